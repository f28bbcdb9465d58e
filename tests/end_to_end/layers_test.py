#!/usr/bin/python3
"""The layers for a GIS: what stands in study.gpkg and isochrones.geojson, held to the rasters and to the standards."""
import contextlib
import json
import shutil
import sqlite3
import subprocess
import sys
import unittest
import xml.etree.ElementTree as xml

import numpy as np
from osgeo import gdal, ogr, osr

from peaks_test import demo_with_peaks
from support import CommandTest, DemoTest, class_folder, hills, table

sys.path.insert(0, "/usr/lib/python3/dist-packages")
from osgeo_utils.samples import validate_cloud_optimized_geotiff, validate_gpkg  # noqa: E402

LAYERS = {"outlets": "POINT", "catchments": "MULTIPOLYGON", "subareas": "MULTIPOLYGON", "paths": "MULTILINESTRING",
          "segments": "MULTILINESTRING", "network": "MULTILINESTRING", "isochrones": "MULTIPOLYGON", "depressions": "MULTIPOLYGON"}
INDEXED = {"depressions": "depression"}   # the others by their point
PIPES = "from,to,length,diameter,n,slope\nMarket inlet,Tramway bank,120 m,0.45 m,0.013,0.008\n"
OVERRIDES = "point,time,way_time,sheet_length,n,c\nTramway bank,,4 min,,,\n"


def burnt(layer, raster, query, value_of=lambda feature: 1):
    """The features of a layer laid back on the grid of a raster: values, and how often each cell was covered."""
    memory = gdal.GetDriverByName("MEM")
    values, count = (memory.Create("", raster.RasterXSize, raster.RasterYSize, 1, gdal.GDT_Float64) for _ in range(2))
    shapes = ogr.GetDriverByName("Memory").CreateDataSource("")
    for target in (values, count):
        target.SetGeoTransform(raster.GetGeoTransform())
        target.SetProjection(raster.GetProjection())
    layer.SetAttributeFilter(query)
    for feature in layer:
        one = shapes.CreateLayer("one", layer.GetSpatialRef())
        copy = ogr.Feature(one.GetLayerDefn())
        copy.SetGeometry(feature.GetGeometryRef().Clone())
        one.CreateFeature(copy)
        gdal.RasterizeLayer(values, [1], one, burn_values=[value_of(feature)])
        gdal.RasterizeLayer(count, [1], one, burn_values=[1], options=["MERGE_ALG=ADD"])
        shapes.DeleteLayer(0)
    return values.ReadAsArray(), count.ReadAsArray()


def wgs84():
    system = osr.SpatialReference()
    system.ImportFromEPSG(4326)
    system.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
    return system


class Layers(DemoTest):
    with_isochrones = True

    @classmethod
    def setUpClass(cls):
        super().setUpClass()
        cls.result_folder = cls.kept / "town/result"
        cls.package = cls.result_folder / "study.gpkg"

    def layer(self, name):
        self.opened = gdal.OpenEx(str(self.package), gdal.OF_VECTOR)
        return self.opened.GetLayerByName(name)

    def database(self, query):
        with sqlite3.connect(f"file:{self.package}?mode=ro", uri=True) as connection:
            return connection.execute(query).fetchall()

    def raster(self, name):
        return gdal.Open(str(self.result_folder / "rasters" / name))

    def test_every_layer_is_there_with_its_geometry_and_system(self):
        said = subprocess.run(["ogrinfo", "-so", "-al", self.package], capture_output=True, text=True, check=True)
        self.assertEqual(said.stderr, "")
        found = dict(self.database("SELECT table_name, geometry_type_name FROM gpkg_geometry_columns"))
        self.assertEqual(found, LAYERS)
        for name in LAYERS:
            self.assertEqual(self.layer(name).GetSpatialRef().GetAuthorityCode(None), "25831", name)

    def test_it_is_a_valid_geopackage(self):
        checker = validate_gpkg.GPKGChecker(str(self.package))
        checker.check()
        self.assertEqual(checker.errors, [])

    def test_each_layer_has_a_spatial_index_a_description_and_an_indexed_point(self):
        indexed = {row[0] for row in self.database("SELECT table_name FROM gpkg_extensions WHERE extension_name = 'gpkg_rtree_index'")}
        described = dict(self.database("SELECT table_name, description FROM gpkg_contents"))
        indexes = dict(self.database("SELECT tbl_name, sql FROM sqlite_master WHERE type = 'index' AND sql LIKE 'CREATE INDEX%_by_%'"))
        for name in LAYERS:
            self.assertIn(name, indexed)
            self.assertGreater(len(described[name]), 10)
            self.assertIn(f'("{INDEXED.get(name, "point")}")', indexes[name])
            undescribed = self.database(f"SELECT name FROM pragma_table_info('{name}') WHERE name NOT IN ('fid', 'geom') AND name NOT IN "
                                        f"(SELECT column_name FROM gpkg_data_columns WHERE table_name = '{name}' AND length(description) > 3)")
            self.assertEqual(undescribed, [], name)

    def test_each_layer_has_a_default_style_in_well_formed_xml(self):
        styles = self.database("SELECT f_table_name, styleQML, styleSLD, useAsDefault FROM layer_styles")
        self.assertEqual({row[0] for row in styles}, set(LAYERS))
        for name, qml, sld, default in styles:
            self.assertEqual(default, 1)
            self.assertIn("symbol", {element.tag for element in xml.fromstring(qml).iter()})
            root = xml.fromstring(sld)
            self.assertEqual(root.tag, "{http://www.opengis.net/sld}StyledLayerDescriptor")
            self.assertEqual(root.find(".//{http://www.opengis.net/sld}Name").text, name)
        regimes = next(sld for name, _, sld, _ in styles if name == "segments")
        for colour in ("#e69f00", "#d55e00", "#0072b2"):
            self.assertIn(colour, regimes)

    def test_subareas_cover_their_cells_and_no_others_exactly_once(self):
        catchment = self.raster("catchment.tif")
        layer = self.layer("subareas")
        values, count = burnt(layer, catchment, None, lambda feature: feature["number"])
        cells = catchment.ReadAsArray()
        owned = (cells > 0) & (cells < 4294967295)
        np.testing.assert_array_equal(count, owned)
        np.testing.assert_array_equal(values[owned], cells[owned])
        areas = {feature["number"]: feature.GetGeometryRef().GetArea() for feature in layer}
        for number, area in areas.items():
            self.assertAlmostEqual(area, 4.0 * np.count_nonzero(cells == number), places=6)

    def test_catchments_are_their_subareas_and_all_above(self):
        rows = table(self.result_folder / "tables/outlets.csv")
        below = {row["name"]: row["next_point"] for row in rows}
        numbers = {row["name"]: int(row["number"]) for row in rows}
        cells = self.raster("catchment.tif").ReadAsArray()
        for row in rows:
            above = []
            for name in numbers:
                at = name
                while at and at != row["name"]:
                    at = below[at]
                above += [numbers[name]] if at else []
            layer = self.layer("catchments")
            _, count = burnt(layer, self.raster("catchment.tif"), f"number = {row['number']}")
            np.testing.assert_array_equal(count, np.isin(cells, above), row["name"])

    def test_depressions_are_those_of_the_table_on_cells_below_their_spill_elevation(self):
        rows = table(self.result_folder / "tables/depressions.csv")
        layer = self.layer("depressions")
        self.assertEqual(layer.GetFeatureCount(), len(rows))
        deepest_first = [feature["depth_m"] for feature in layer]
        self.assertEqual(deepest_first, sorted(deepest_first, reverse=True))
        for number, (feature, row) in enumerate(zip(layer, rows), 1):
            self.assertEqual((feature["depression"], feature["on_governing_path"]), (number, row["on_governing_path"]))
            self.assertEqual((feature["pass_x"], feature["pass_y"]), (float(row["pass_x"]), float(row["pass_y"])))
            self.assertEqual(feature["area_m2"], 4.0 * int(row["cells"]))
            self.assertAlmostEqual(feature.GetGeometryRef().GetArea(), feature["area_m2"], places=6)
        spill = self.raster("spill_elevation.tif")
        depth = spill.ReadAsArray() - gdal.Open(str(self.kept / "town/dem.tif")).ReadAsArray()
        depths, count = burnt(self.layer("depressions"), spill, None, lambda feature: feature["depth_m"])
        below = (depth > 0) & (spill.ReadAsArray() != spill.GetRasterBand(1).GetNoDataValue())
        np.testing.assert_array_equal(count, below)
        self.assertTrue((depth[below] <= depths[below] + 6e-4).all())   # shown to the thousandth

    def test_shapes_are_valid(self):
        for name in LAYERS:
            for feature in self.layer(name):
                shape = feature.GetGeometryRef()
                if shape is None:
                    self.assertIn(name, ("paths", "segments"), "all of whose way may be drawn with others")
                    continue
                self.assertTrue(shape.IsValid(), (name, feature.GetFID()))

    def test_isochrones_of_catchments_are_the_bands_of_the_travel_time(self):
        times = self.raster("travel_time.tif")
        layer = self.layer("isochrones")
        values, count = burnt(layer, times, "of = 'catchment'", lambda feature: feature["from_min"])
        cells = self.raster("catchment.tif").ReadAsArray()
        owned = (cells > 0) & (cells < 4294967295)
        np.testing.assert_array_equal(count, owned)
        bands = np.floor(times.ReadAsArray()[owned].astype(float) / 10) * 10
        np.testing.assert_array_equal(values[owned], bands)

    def test_isochrones_of_subareas_are_the_bands_of_the_time_to_the_own_point(self):
        times = self.raster("travel_time.tif").ReadAsArray().astype(float)
        cells = self.raster("catchment.tif").ReadAsArray()
        owned = (cells > 0) & (cells < 4294967295)
        at_point = np.zeros(12)
        for row in table(self.result_folder / "tables/outlets.csv"):
            left, width, _, top, _, height = self.raster("travel_time.tif").GetGeoTransform()
            at_point[int(row["number"])] = times[int((float(row["y"]) - top) / height), int((float(row["x"]) - left) / width)]
        values, count = burnt(self.layer("isochrones"), self.raster("travel_time.tif"), "of = 'subarea'", lambda feature: feature["from_min"])
        np.testing.assert_array_equal(count, owned)
        own = times[owned] - at_point[cells[owned]]
        clear = np.abs(own / 10 - np.round(own / 10)) > 1e-4   # single precision leaves the others open
        np.testing.assert_array_equal(values[owned][clear], (np.floor(np.maximum(own, 0) / 10) * 10)[clear])

    def test_areas_of_bands_add_up(self):
        for feature in self.layer("isochrones"):
            self.assertAlmostEqual(feature["area_m2"], feature.GetGeometryRef().GetArea(), delta=0.06)
        layer = self.layer("isochrones")
        layer.SetAttributeFilter("of = 'catchment' AND point = 'Weir'")
        last = max(layer, key=lambda feature: feature["from_min"])
        self.assertEqual(last["share_until"], 1.0)
        rows = {row["name"]: row for row in table(self.result_folder / "tables/outlets.csv")}
        self.assertAlmostEqual(last["area_until_m2"] / 1e4, float(rows["Weir"]["area_ha"]), delta=0.001)

    def test_isochrones_as_geojson_follow_rfc_7946(self):
        text = json.loads((self.result_folder / "isochrones.geojson").read_text(encoding="utf-8"))
        self.assertEqual(text["type"], "FeatureCollection")
        self.assertNotIn("crs", text)
        west, south, east, north = text["bbox"]
        self.assertEqual(len(text["features"]), self.layer("isochrones").GetFeatureCount())
        for feature in text["features"]:
            self.assertEqual(feature["geometry"]["type"], "MultiPolygon")
            for polygon in feature["geometry"]["coordinates"]:
                for place, ring in enumerate(polygon):
                    self.assertEqual(ring[0], ring[-1])
                    self.assertGreaterEqual(len(ring), 4)
                    x, y = np.array(ring).T
                    self.assertTrue((x >= west).all() and (x <= east).all() and (y >= south).all() and (y <= north).all())
                    area = np.sum((x[:-1] - x[0]) * (y[1:] - y[0]) - (x[1:] - x[0]) * (y[:-1] - y[0]))
                    self.assertEqual(area > 0, place == 0, "outer rings run counter-clockwise, holes clockwise")

    def test_segments_and_outlets_are_those_of_the_tables(self):
        self.assertEqual(self.layer("segments").GetFeatureCount(), len(table(self.result_folder / "tables/segments.csv")))
        rows = {row["name"]: row for row in table(self.result_folder / "tables/outlets.csv")}
        for feature in self.layer("outlets"):
            row = rows[feature["point"]]
            self.assertAlmostEqual(feature["time_of_concentration_min"], float(row["time_of_concentration_min"]), delta=6e-4)
            self.assertAlmostEqual(feature.GetGeometryRef().GetX(), float(row["x"]), places=3)


    def test_paths_put_together_from_their_branches_are_those_of_the_geojson(self):
        branches = {(f["point"], f["path"]): f for f in self.layer("paths")}
        places = {key: [place[:2] for place in f.GetGeometryRef().GetGeometryRef(0).GetPoints()] if f.GetGeometryRef() else [] for key, f in branches.items()}
        steps = [step for way in places.values() for step in zip(way, way[1:])]
        self.assertEqual(len(steps), len(set(steps)), "each step is drawn once")
        ends = {f["point"]: f.GetGeometryRef().GetPoint(0)[:2] for f in self.layer("outlets")}
        to_degrees = osr.CoordinateTransformation(self.layer("paths").GetSpatialRef(), wgs84())
        whole = {}
        for name in ("governing", "longest"):
            for feature in json.loads((self.result_folder / f"{name}_paths.geojson").read_text(encoding="utf-8"))["features"]:
                whole.setdefault((feature["properties"]["point"], name), []).extend(feature["geometry"]["coordinates"])
        joined = 0
        for key, feature in branches.items():
            way, at = [(feature["head_x"], feature["head_y"])], key
            while way[-1] != ends[key[0]]:
                rest = places[at]
                rest = rest[rest.index(way[-1]) + 1:] if way[-1] in rest else []
                way += rest[:rest.index(ends[key[0]]) + 1] if ends[key[0]] in rest else rest
                joined += at != key
                at = (branches[at]["joins_point"], branches[at]["joins_path"])
                self.assertTrue(way[-1] == ends[key[0]] or at in branches, key)
            self.assertAlmostEqual(np.hypot(*np.diff(way, axis=0).T).sum() / feature["length_m"], 1, delta=1e-5, msg=key)
            drawn = ogr.Geometry(ogr.wkbLineString)   # the GeoJSON leaves out places on a straight line
            for place in whole[key]:
                drawn.AddPoint_2D(*place)
            for place in way:
                at = ogr.Geometry(ogr.wkbPoint)
                at.AddPoint_2D(*to_degrees.TransformPoint(*place)[:2])
                self.assertLess(drawn.Distance(at), 1e-6, key)
        self.assertGreater(joined, len(branches) // 2, "the demo has paths that run together")

    def test_segments_draw_what_the_paths_draw(self):
        length = {}
        for name in ("paths", "segments"):
            for feature in self.layer(name):
                key = (feature["point"], feature["path"])
                shape = feature.GetGeometryRef()
                length.setdefault(key, {}).setdefault(name, []).append(shape.Length() if shape else 0.0)
        for key, found in length.items():
            self.assertAlmostEqual(sum(found["paths"]), sum(found.get("segments", [0.0])), places=6, msg=key)

    def test_each_way_of_the_network_runs_along_the_flow_from_its_point_to_the_next(self):
        rows = {row["name"]: row for row in table(self.result_folder / "tables/outlets.csv")}
        edges = {feature["point"]: feature for feature in self.layer("network")}
        self.assertEqual(set(edges), {name for name, row in rows.items() if row["next_point"]})
        azimuths = self.raster("flow_azimuth.tif")
        left, width, _, top, _, height = azimuths.GetGeoTransform()
        azimuth = azimuths.ReadAsArray()
        for name, edge in edges.items():
            row = rows[name]
            self.assertEqual((edge["next_point"], edge["by"], edge["stated"]), (row["next_point"], "flow path", ""))
            for field, column in (("length_m", "way_length_m"), ("fall_m", "way_fall_m"), ("time_min", "way_min"), ("channel_percent", "way_channel_percent")):
                self.assertAlmostEqual(edge[field], float(row[column]), delta=1e-3 + 1e-4 * abs(float(row[column])), msg=(name, field))
            places = np.array(edge.GetGeometryRef().GetGeometryRef(0).GetPoints())[:, :2]
            for end, at in ((0, name), (-1, row["next_point"])):
                np.testing.assert_allclose(places[end], (float(rows[at]["x"]), float(rows[at]["y"])), atol=1e-3)
            for (x, y), (to_x, to_y) in zip(places, places[1:]):
                here = azimuth[int((y - top) / height), int((x - left) / width)]
                self.assertEqual(here, round(np.degrees(np.arctan2(to_x - x, to_y - y))) % 360)
            length = np.hypot(*np.diff(places, axis=0).T).sum()
            self.assertAlmostEqual(edge["length_m"] / length, 1, delta=1e-5)
            shares = sum(edge[f"{regime}_percent"] for regime in ("sheet", "shallow", "channel", "water"))
            self.assertAlmostEqual(shares, 100, delta=0.01)


class Peaks(unittest.TestCase):
    """Rain by duration, a pipe, and a stated way."""

    @classmethod
    def setUpClass(cls):
        cls.folder = class_folder(cls, "test")
        cls.tables = demo_with_peaks(cls.folder, pipes=PIPES, overrides=OVERRIDES)
        cls.package = cls.folder / "town/result/study.gpkg"

    def features(self, name):
        with contextlib.closing(sqlite3.connect(f"file:{self.package}?mode=ro", uri=True)) as connection:
            connection.row_factory = sqlite3.Row
            return connection.execute(f"SELECT * FROM {name} ORDER BY fid").fetchall()

    def test_peaks_are_those_of_the_table(self):
        found = self.features("peaks")
        self.assertEqual(len(found), len(self.tables["peaks"]))
        for feature, row in zip(found, self.tables["peaks"]):
            self.assertEqual((feature["point"], str(int(feature["return_period_years"]))), (row["point"], row["return_period_years"]))
            for field in ("whole_area_peak_m3_per_s", "peak_m3_per_s", "peak_duration_min", "runoff_coefficient_with_factor", "intensity_mm_per_h",
                          "peak_share_of_area_percent"):
                self.assertAlmostEqual(feature[field] / float(row[field]), 1, delta=1e-5, msg=field)
            self.assertEqual((feature["last_subarea"], feature["peak_subareas"]), (row["last_subarea"], row["peak_subareas"]))
            more = float(row["peak_m3_per_s"]) > float(row["whole_area_peak_m3_per_s"])
            self.assertEqual(feature["made_by"] == "part of the area", more, row)

    def test_a_pipe_is_an_edge_that_runs_straight_to_its_end(self):
        edge = next(feature for feature in self.features("network") if feature["point"] == "Market inlet")
        pipe = self.tables["pipes"][0]
        self.assertEqual((edge["by"], edge["next_point"], edge["stated"], edge["channel_percent"]), ("pipe", "Tramway bank", "pipe", None))
        for field in ("length_m", "diameter_m", "n", "slope", "capacity_m3_per_s", "velocity_m_per_s", "time_min"):
            self.assertAlmostEqual(edge[field] / float(pipe[field]), 1, delta=1e-4, msg=field)
        self.assertAlmostEqual(edge["fall_m"], 120 * 0.008, places=6)
        layer = gdal.OpenEx(str(self.package), gdal.OF_VECTOR)
        network = layer.GetLayerByName("network")
        network.SetAttributeFilter("point = 'Market inlet'")
        feature = network.GetNextFeature()   # a shape lives no longer than its feature
        self.assertEqual(feature.GetGeometryRef().GetGeometryRef(0).GetPointCount(), 2)

    def test_a_stated_way_is_the_time_of_its_edge(self):
        edge = next(feature for feature in self.features("network") if feature["point"] == "Tramway bank")
        self.assertEqual((edge["by"], edge["time_min"], edge["stated"]), ("flow path", 4.0, "way"))

    def test_it_is_a_valid_geopackage_with_all_the_rules_of_layers(self):
        checker = validate_gpkg.GPKGChecker(str(self.package))
        checker.check()
        self.assertEqual(checker.errors, [])
        styled = {row["f_table_name"] for row in self.features_of("SELECT f_table_name FROM layer_styles")}
        self.assertIn("peaks", styled)
        indexed = {row["tbl_name"] for row in self.features_of("SELECT tbl_name FROM sqlite_master WHERE type = 'index' AND sql LIKE '%(\"point\")%'")}
        self.assertIn("peaks", indexed)

    def features_of(self, query):
        with contextlib.closing(sqlite3.connect(f"file:{self.package}?mode=ro", uri=True)) as connection:
            connection.row_factory = sqlite3.Row
            return connection.execute(query).fetchall()

    def test_another_run_gives_the_same_bytes(self):
        before = self.package.read_bytes()
        demo_with_peaks(self.folder, pipes=PIPES, overrides=OVERRIDES)
        self.assertEqual(self.package.read_bytes(), before)


class Rasters(DemoTest):
    with_isochrones = True

    def test_on_request_they_are_cloud_optimized_and_say_the_same(self):
        shutil.copytree(self.kept / "town", self.folder / "town", ignore=shutil.ignore_patterns("result"))
        with open(self.folder / "town/study.toml", "a", encoding="utf-8") as study:
            study.write('rasters = "cog"\n')
        self.done("run", "town/study.toml", "--out", "cog")
        plain, cloud = self.kept / "town/result/rasters", self.folder / "cog/rasters"
        self.assertEqual(sorted(path.name for path in plain.iterdir()), sorted(path.name for path in cloud.iterdir()))
        for path in sorted(cloud.glob("*.tif")):
            warnings, errors, _ = validate_cloud_optimized_geotiff.validate(str(path), full_check=True)
            self.assertEqual((warnings, errors), ([], []), path.name)
            same, other = gdal.Open(str(path)), gdal.Open(str(plain / path.name))
            np.testing.assert_array_equal(same.ReadAsArray(), other.ReadAsArray())
            for band, twin in ((same.GetRasterBand(1), other.GetRasterBand(1)),):
                self.assertEqual(band.GetDescription(), twin.GetDescription())
                self.assertEqual(band.GetNoDataValue(), twin.GetNoDataValue())
                self.assertEqual(band.GetCategoryNames(), twin.GetCategoryNames())
                self.assertEqual(band.GetMetadata(), twin.GetMetadata())

    def test_regimes_have_names_and_colours_and_styles_stand_beside(self):
        rasters = self.kept / "town/result/rasters"
        said = json.loads(subprocess.run(["gdalinfo", "-json", rasters / "regime.tif"], capture_output=True, text=True, check=True).stdout)
        band = said["bands"][0]
        self.assertEqual(band["colorTable"]["entries"][1][:3], [0xE6, 0x9F, 0x00])
        regimes = gdal.Open(str(rasters / "regime.tif"))
        regimes.GetRasterBand(1).GetMetadata()   # the file beside the raster is read only after it
        self.assertEqual(regimes.GetRasterBand(1).GetCategoryNames()[:4], ["none", "sheet", "shallow", "channel"])
        for name in ("regime", "travel_time", "flow_azimuth", "contributing_area", "catchment"):
            root = xml.parse(rasters / f"{name}.sld").getroot()
            entries = root.findall(".//{http://www.opengis.net/sld}ColorMapEntry")
            self.assertGreater(len(entries), 3)
            numbers = [float(entry.get("quantity")) for entry in entries]
            self.assertEqual(numbers, sorted(numbers))
            raster = gdal.Open(str(rasters / f"{name}.tif"))   # a band lives no longer than its file
            band = raster.GetRasterBand(1)
            values = band.ReadAsArray()
            values = np.unique(values[values != band.GetNoDataValue()])
            if name in ("travel_time", "contributing_area"):
                self.assertGreaterEqual(numbers[-1], values.max())
            else:
                self.assertLessEqual(set(values), set(numbers), name)


class Asking(CommandTest):
    def study(self, isochrones):
        self.small_study()
        (self.folder / "study.toml").write_text(
            '[terrain]\nelevation = "dem.tif"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n[rain]\ntwo_year_24_hour = "90 mm"\n'
            f'[output]\n{isochrones}')

    def test_without_isochrones_there_are_none(self):
        self.study("")
        self.done("run", "study.toml")
        self.assertFalse((self.folder / "result/isochrones.geojson").exists())
        layers = subprocess.run(["ogrinfo", "result/study.gpkg"], cwd=self.folder, capture_output=True, text=True, check=True).stdout
        self.assertNotIn("isochrones", layers)
        self.assertIn("subareas", layers)

    def test_a_step_that_makes_too_many_bands_is_refused_with_what_to_do(self):
        self.done("demo", "town")
        study = self.folder / "town/study.toml"
        study.write_text(study.read_text().replace('"10 min"', '"0.0001 min"'))
        self.refused(1, "run", "town/study.toml", says=("isochrones every", "longer step", "output.isochrones"))

    def test_a_step_that_is_none_is_refused(self):
        self.study('isochrones = "0 min"')
        self.refused(1, "run", "study.toml", says=("isochrones", "5 min"))

    def test_a_geographic_grid_has_its_layers_in_degrees(self):
        self.ground(values=hills(), cell=0.0001, corner=(7.0, 50.0), epsg=4326)
        self.cover(cell=0.0001, corner=(7.0, 50.0), epsg=4326)
        self.book()
        self.done("run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "90 mm")
        package = gdal.OpenEx(str(self.folder / "result/study.gpkg"), gdal.OF_VECTOR)
        layer = package.GetLayerByName("subareas")
        west, east, south, north = layer.GetExtent()
        self.assertTrue(7.0 - 1e-9 <= west < east <= 7.005 + 1e-9 and 49.996 - 1e-9 <= south < north <= 50.0 + 1e-9)


if __name__ == "__main__":
    unittest.main()
