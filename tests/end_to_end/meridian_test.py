#!/usr/bin/python3
"""Ground across the 180th meridian: what is written in longitude and latitude is cut there, as RFC 7946 (3.1.9) asks, and nothing is lost."""
import json
import unittest

import numpy as np
import pyproj
from osgeo import gdal, ogr

from support import CommandTest, hills, system_of, table

ROWS, COLUMNS = 44, 60
CELL = 10.0
FILES = ("governing_paths", "longest_paths", "depressions", "isochrones", "own_paths")


def ground():
    """Falls to the east, with a pit in its middle that is deep enough for a depression."""
    values = hills(COLUMNS, ROWS).T * 1.0
    values[18:26, 26:35] -= 6.0
    return np.round(values, 3)


def longitudes(geometry):
    """The longitudes of each part of a geometry: of lines, or of all rings of a polygon."""
    kind, places = geometry["type"], geometry["coordinates"]
    if kind == "Point":
        return [np.array([places[0]])]
    if kind == "LineString":
        return [np.array(places)[:, 0]]
    if kind == "MultiLineString":
        return [np.array(line)[:, 0] for line in places]
    polygons = [places] if kind == "Polygon" else places
    return [np.concatenate([np.array(ring)[:, 0] for ring in polygon]) for polygon in polygons]


class AcrossTheMeridian:
    """What holds on any grid; a class for each sets its reference system, its north-western corner, and by what share its lengths may be off."""

    epsg, corner, scale = 0, (0.0, 0.0), 0.0

    def setUp(self):
        super().setUp()
        self.ground(values=ground(), cell=CELL, corner=self.corner, epsg=self.epsg)
        self.cover(values=np.ones((ROWS, COLUMNS), np.uint8), cell=CELL, corner=self.corner, epsg=self.epsg)
        self.book()
        left, top = self.corner
        # A brook that was drawn straight through, from north-west to south-east, where the ground would lead its water another way.
        self.shape("brook.gpkg", ogr.wkbLineString, f"LINESTRING ({left + CELL * 4.5} {top - CELL * 7.5}, {left + CELL * 56.5} {top - CELL * 39.5})")
        self.shape("points.gpkg", ogr.wkbPoint, f"POINT ({left + CELL * 56.5} {top - CELL * 39.5})")
        (self.folder / "study.toml").write_text(
            'report_units = "si"\n[terrain]\nelevation = "dem.tif"\nchannels = "brook.gpkg"\ndeparture = "20 m"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n[points]\nfile = "points.gpkg"\n'
            'name = "name"\n[rain]\ntwo_year_24_hour = "90 mm"\n[output]\nisochrones = "2 min"\n')
        self.repeated("run", "study.toml")
        self.written = {name: json.loads((self.folder / f"result/{name}.geojson").read_text(encoding="utf-8")) for name in FILES}

    def shape(self, name, kind, wkt):
        source = ogr.GetDriverByName("GPKG").CreateDataSource(str(self.folder / name))
        target = source.CreateLayer("one", system_of(self.epsg), kind)
        target.CreateField(ogr.FieldDefn("name", ogr.OFTString))
        feature = ogr.Feature(target.GetLayerDefn())
        feature.SetField("name", "Mouth")
        feature.SetGeometry(ogr.CreateGeometryFromWkt(wkt))
        target.CreateFeature(feature)

    def raster(self, name):
        return gdal.Open(str(self.folder / "result/rasters" / name))

    def on_the_grid(self, geometry):
        """A geometry back on the plane of the grid."""
        to_grid = pyproj.Transformer.from_crs("EPSG:4326", system_of(self.epsg).ExportToWkt(), always_xy=True)

        def moved(places):
            return list(to_grid.transform(*places)) if isinstance(places[0], (int, float)) else [moved(part) for part in places]
        return ogr.CreateGeometryFromJson(json.dumps({"type": geometry["type"], "coordinates": moved(geometry["coordinates"])}))

    def test_all_that_is_written_follows_rfc_7946_and_lies_on_one_side_part_by_part(self):
        for name, text in self.written.items():
            self.assertEqual(text["type"], "FeatureCollection")
            self.assertNotIn("crs", text)
            self.assertTrue(text["features"], name)
            every = [part for feature in text["features"] for part in longitudes(feature["geometry"])]
            for part in every:
                self.assertTrue((np.abs(part) <= 180).all(), name)
                self.assertTrue((part >= 0).all() or (part <= 0).all(), (name, part.min(), part.max()))
            # There is something on either side, and the box has its western side east of the meridian (5.2).
            self.assertTrue(any((part > 0).all() for part in every) and any((part < 0).all() for part in every), name)
            west, south, east, north = text["bbox"]
            self.assertGreater(west, 179)
            self.assertLess(east, -179)
            self.assertLess(south, north)
            for part in every:
                self.assertTrue((part >= west).all() or (part <= east).all(), name)

    def test_rings_are_closed_and_oriented(self):
        for name in ("depressions", "isochrones"):
            for feature in self.written[name]["features"]:
                shape = feature["geometry"]
                for polygon in [shape["coordinates"]] if shape["type"] == "Polygon" else shape["coordinates"]:
                    for place, ring in enumerate(polygon):
                        self.assertEqual(ring[0], ring[-1])
                        self.assertGreaterEqual(len(ring), 4)
                        x, y = np.array(ring).T
                        area = np.sum((x[:-1] - x[0]) * (y[1:] - y[0]) - (x[1:] - x[0]) * (y[:-1] - y[0]))
                        self.assertEqual(area > 0, place == 0, (name, "outer rings run counter-clockwise, holes clockwise"))

    def test_lines_go_on_where_they_were_cut(self):
        cut = 0
        for name in ("governing_paths", "longest_paths", "own_paths"):
            for feature in self.written[name]["features"]:
                if feature["geometry"]["type"] != "MultiLineString":
                    continue
                parts = feature["geometry"]["coordinates"]
                for one, other in zip(parts, parts[1:]):
                    self.assertEqual((abs(one[-1][0]), one[-1][0]), (180, -other[0][0]))
                    self.assertEqual(one[-1][1], other[0][1])
                    cut += 1
        self.assertGreaterEqual(cut, 3)

    def test_a_path_is_as_long_as_its_table_says(self):
        ellipsoid = pyproj.Geod(ellps="WGS84")
        lengths = {}
        for feature in self.written["governing_paths"]["features"]:
            shape = feature["geometry"]
            for line in [shape["coordinates"]] if shape["type"] == "LineString" else shape["coordinates"]:
                lengths[feature["properties"]["point"]] = lengths.get(feature["properties"]["point"], 0.0) + ellipsoid.line_length(*np.array(line).T)
        for row in table(self.folder / "result/tables/outlets.csv"):
            said = float(row["governing_grid_length_m"])
            self.assertAlmostEqual(lengths[row["name"]], said, delta=self.scale * said)

    def test_isochrones_cover_each_cell_once_with_its_time_and_have_the_area_of_their_cells(self):
        times, catchments = self.raster("travel_time.tif"), self.raster("catchment.tif").ReadAsArray()
        owned = (catchments > 0) & (catchments < 4294967295)
        memory = gdal.GetDriverByName("MEM").Create("", COLUMNS, ROWS, 2, gdal.GDT_Float64)
        memory.SetGeoTransform(times.GetGeoTransform())
        system = system_of(self.epsg)
        memory.SetProjection(system.ExportToWkt())
        shapes = ogr.GetDriverByName("Memory").CreateDataSource("")
        cell = abs(times.GetGeoTransform()[1] * times.GetGeoTransform()[5])
        for feature in self.written["isochrones"]["features"]:
            if feature["properties"]["of"] != "catchment":
                continue
            geometry = self.on_the_grid(feature["geometry"])
            layer = shapes.CreateLayer("one", system)
            shape = ogr.Feature(layer.GetLayerDefn())
            shape.SetGeometry(geometry)
            layer.CreateFeature(shape)
            before = memory.GetRasterBand(2).ReadAsArray().sum()
            gdal.RasterizeLayer(memory, [1], layer, burn_values=[feature["properties"]["from_min"]])
            gdal.RasterizeLayer(memory, [2], layer, burn_values=[1], options=["MERGE_ALG=ADD"])
            shapes.DeleteLayer(0)
            cells = memory.GetRasterBand(2).ReadAsArray().sum() - before
            # Coordinates are rounded to seven decimals, a hundredth of a metre: a thousandth of a cell's side on its whole outline.
            self.assertAlmostEqual(geometry.GetArea() / cell, cells, delta=4e-3 * cells + 4e-3)
        np.testing.assert_array_equal(memory.GetRasterBand(2).ReadAsArray(), owned)
        bands = np.floor(times.ReadAsArray()[owned].astype(float) / 2) * 2
        np.testing.assert_array_equal(memory.GetRasterBand(1).ReadAsArray()[owned], bands)

    def test_a_depression_has_the_area_that_its_table_says(self):
        ellipsoid = pyproj.Geod(ellps="WGS84")
        for feature in self.written["depressions"]["features"]:
            shape = feature["geometry"]
            area = sum(ellipsoid.polygon_area_perimeter(*np.array(ring).T)[0] for polygon in ([shape["coordinates"]] if shape["type"] == "Polygon" else shape["coordinates"])
                       for ring in polygon)
            said = feature["properties"]["area_m2"]
            self.assertAlmostEqual(area, said, delta=2 * self.scale * said)


class InAZone(AcrossTheMeridian, CommandTest):
    """UTM zone 60 south, where the meridian runs askew to the columns; its lengths are 0.09 % too long there."""

    epsg, corner, scale = 32760, (819_110.0, 8_118_220.0), 2e-3


class InAPlaneAroundIt(AcrossTheMeridian, CommandTest):
    """A plane whose own axis is the meridian, along which cells of either side meet."""

    epsg, corner, scale = "+proj=laea +lat_0=-17 +lon_0=180 +datum=WGS84 +units=m", (-300.0, 200.0), 1e-3


class InDegrees(CommandTest):
    def test_a_grid_in_degrees_across_it_is_refused_with_what_to_do(self):
        for left in (179.9975, -180.0025):
            words = self.small_study()
            self.ground(cell=0.0001, corner=(left, -17.0), epsg=4326)
            self.refused(1, "run", *words, says=("crosses the 180th meridian", "gdalwarp -t_srs"))


if __name__ == "__main__":
    unittest.main()
