"""Channels, crossings, barriers and kept water that a study maps beside its elevations."""
import json
import unittest

import numpy as np
from osgeo import gdal, ogr

from support import CommandTest, system_of, table

LEFT, TOP, CELL = 500_000.0, 5_400_000.0, 2.0
NOWHERE = 65534


def at(row, column):
    """The centre of a cell."""
    return LEFT + (column + 0.5) * CELL, TOP - (row + 0.5) * CELL


def dammed_valley():
    """Ground that falls to the east along a valley in row 20, closed in the west, with an embankment of 6 m at columns 24 to 26."""
    rows, columns = np.mgrid[0:40, 0:50]
    ground = 100 + 0.2 * np.abs(rows - 20) - 0.05 * columns
    ground[:, 24:27] += 6
    ground[:, 0] += 20
    return np.round(ground, 3)


class MappedTerrain(CommandTest):
    def setUp(self):
        super().setUp()
        self.ground(values=dammed_valley())
        self.cover()
        self.book()

    def shapes(self, name, *wkts, epsg=25832):
        """A GeoPackage of shapes given as WKT in the ground's system, written in another."""
        driver = ogr.GetDriverByName("GPKG" if name.endswith("gpkg") else "GeoJSON")
        file = driver.CreateDataSource(str(self.folder / name))
        layer = file.CreateLayer("shapes", system_of(epsg), ogr.wkbUnknown)
        for wkt in wkts:
            geometry = ogr.CreateGeometryFromWkt(wkt)
            geometry.AssignSpatialReference(system_of(25832))
            geometry.TransformTo(system_of(epsg))
            feature = ogr.Feature(layer.GetLayerDefn())
            feature.SetGeometry(geometry)
            layer.CreateFeature(feature)
        del file

    @staticmethod
    def line(*cells):
        return "LINESTRING(" + ",".join("%.3f %.3f" % at(*cell) for cell in cells) + ")"

    def study(self, terrain="", timing=""):
        (self.folder / "study.toml").write_text(
            f'[terrain]\nelevation = "dem.tif"\n{terrain}\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n'
            f'[rain]\ntwo_year_24_hour = "90 mm"\n[timing]\n{timing}\n')

    def run_study(self):
        self.done("run", "study.toml", "--replace")

    def raster(self, name):
        return gdal.Open(str(self.folder / "result/rasters" / name)).ReadAsArray()

    def notices(self):
        return {row["notice"]: row for row in table(self.folder / "result/tables/review.csv")}

    def test_a_crossing_takes_the_flow_through_an_embankment_and_its_pond_away(self):
        self.study()
        self.run_study()
        spill_before = self.raster("spill_elevation.tif")
        deepest = table(self.folder / "result/tables/depressions.csv")[0]
        self.assertGreater(float(deepest["depth_ft"]) * 0.3048, 3)
        self.assertEqual(deepest["on_governing_path"], "yes")
        self.shapes("culverts.gpkg", self.line((20, 28), (20, 22)), epsg=4326)
        self.study('crossings = "culverts.gpkg"')
        self.run_study()
        self.assertEqual(set(self.raster("flow_azimuth.tif")[20, 22:28]), {90})
        spill = self.raster("spill_elevation.tif")
        self.assertGreater(spill_before[20, 20], spill[20, 20] + 3)
        self.assertAlmostEqual(spill[20, 20], dammed_valley()[20, 20], 3)
        self.assertEqual(set(self.raster("regime.tif")[20, 22:29]), {3})
        self.assertEqual(table(self.folder / "result/tables/depressions.csv"), [])
        self.assertEqual(float(self.notices()["terrain-edited"]["value"]), 7)
        self.assertAlmostEqual(float(self.notices()["bed-below-ground"]["value"]), 5.95, 2)
        self.assertIn("culverts.gpkg", [file["file"] for file in self.result()["inputs"]])

    def test_mapped_channels_are_the_only_ones_where_the_study_says_so(self):
        self.shapes("brook.geojson", self.line((20, 2), (10, 12), (10, 14), (20, 24), (20, 49)), epsg=4326)
        self.study('channels = "brook.geojson"', 'channel_from = "mapped only"')
        self.run_study()
        azimuth, regime = self.raster("flow_azimuth.tif"), self.raster("regime.tif")
        self.assertEqual([azimuth[20 - i, 2 + i] for i in range(10)], [45] * 10)
        self.assertEqual([azimuth[10 + i, 14 + i] for i in range(10)], [135] * 10)
        self.assertEqual(azimuth[20, 49], NOWHERE)
        self.assertEqual(np.count_nonzero(regime == 3), 48)
        rows = table(self.folder / "result/tables/segments.csv")
        self.assertIn("channel", {row["regime"] for row in rows})

    def test_a_barrier_turns_the_flow_aside_and_kept_water_ends_it(self):
        self.shapes("walls.gpkg", self.line((14, 10), (26, 10)))
        pond = "POLYGON((%f %f,%f %f,%f %f,%f %f))" % (*at(19, 18), *at(19, 21), *at(22, 21), *at(22, 18))
        self.shapes("ponds.gpkg", "POINT(%f %f)" % at(3, 40), pond)
        self.study('barriers = "walls.gpkg"\nkeep_water = "ponds.gpkg"')
        self.run_study()
        azimuth = self.raster("flow_azimuth.tif")
        self.assertTrue(all(azimuth[row, 9] not in (45, 90, 135) for row in range(15, 26)))
        self.assertEqual(azimuth[3, 40], NOWHERE)
        self.assertTrue(np.all(azimuth[20:22, 19:21] == NOWHERE))

    def test_what_became_of_each_shape_is_told_by_number_and_reason(self):
        self.shapes("brooks.gpkg", self.line((20, 10), (20, 20)), self.line((5, 5), (5, 5)))
        self.shapes("culverts.gpkg", self.line((20, 12), (20, 16)))
        self.shapes("walls.gpkg", self.line((20, 13), (20, 15)), self.line((30, 10), (30, 12)), "LINESTRING(1 1,2 2)", "LINESTRING(3 1,4 2)")
        self.shapes("ponds.gpkg", "POINT(%f %f)" % at(3, 40))
        self.study('channels = "brooks.gpkg"\ncrossings = "culverts.gpkg"\nbarriers = "walls.gpkg"\nkeep_water = "ponds.gpkg"')
        self.run_study()
        told = [row["text"] for row in table(self.folder / "result/tables/review.csv") if row["notice"] == "terrain-edited"]
        self.assertEqual(told, [
            "Channels: 1 shape leads the flow through 11 cells; 1 has no effect, being off the data or within one cell.",
            "Crossings: no shape leads the flow; 1 has no effect, since other shapes have its cells already.",
            "Barriers: 1 shape stops the flow at 3 cells; 2 have no effect, being off the data; 1 has no effect, since other shapes have its cells already.",
            "Kept water: 1 shape holds the water of 1 cell."])

    def features(self, name):
        return json.loads((self.folder / "result" / name).read_text(encoding="utf-8"))["features"]

    def test_the_way_of_the_ground_alone_stands_beside_a_crossing_that_departs_from_it(self):
        # Without the culvert the water goes round the embankment: over its top, 6 m up, there is no lower way.
        ground = dammed_valley()
        ground[36, 24:27] -= 6.5
        self.ground(values=ground)
        self.shapes("culverts.gpkg", self.line((20, 22), (20, 28)))
        self.study('crossings = "culverts.gpkg"\ndeparture = "25 m"')
        self.run_study()
        (path,) = self.features("own_paths.geojson")
        # The notch lies in row 36, sixteen rows of 2 m from the crossing in row 20.
        self.assertAlmostEqual(path["properties"]["departure_m"], 32, delta=0.01)
        self.assertTrue(path["properties"]["comes_back"])
        self.assertEqual(path["geometry"]["type"], "LineString")
        self.layer_has_the_same(path)
        self.assertIn("32 m away", self.notices()["departs-from-ground"]["text"])
        self.study('crossings = "culverts.gpkg"\ndeparture = "35 m"')
        self.run_study()
        self.assertEqual(self.features("own_paths.geojson"), [])
        self.assertNotIn("departs-from-ground", self.notices())
        package = gdal.OpenEx(str(self.folder / "result/study.gpkg"), gdal.OF_VECTOR)
        self.assertEqual(package.GetLayerByName("own_paths").GetFeatureCount(), 0)

    def layer_has_the_same(self, path):
        """The layer own_paths of study.gpkg holds the one path of own_paths.geojson, in the system of the elevations."""
        package = gdal.OpenEx(str(self.folder / "result/study.gpkg"), gdal.OF_VECTOR)
        layer = package.GetLayerByName("own_paths")
        self.assertEqual(layer.GetFeatureCount(), 1)
        feature = layer.GetNextFeature()
        self.assertEqual((feature["own_path"], feature["comes_back"]), (1, "yes" if path["properties"]["comes_back"] else "no"))
        self.assertAlmostEqual(feature["departure_m"], path["properties"]["departure_m"], delta=0.01)
        line = ogr.CreateGeometryFromJson(json.dumps(path["geometry"]))
        line.AssignSpatialReference(system_of(4326))
        line.TransformTo(system_of(25832))
        drawn = feature.GetGeometryRef().GetGeometryRef(0)
        self.assertGreater(drawn.GetPointCount(), 2)
        places, corners = np.array(drawn.GetPoints())[:, :2], np.array(line.GetPoints())[:, :2]
        # The text has the corners alone, to a centimetre; the layer every cell.
        np.testing.assert_allclose(places[[0, -1]], corners[[0, -1]], atol=0.02)
        for corner in corners:
            self.assertLess(np.hypot(*(places - corner).T).min(), 0.02)
        self.assertAlmostEqual(drawn.Length(), line.Length(), delta=0.05)
        for x, y in places:
            self.assertEqual(((x - 500_000) / 2 % 1, (5_400_000 - y) / 2 % 1), (0.5, 0.5))

    def test_depressions_are_outlined(self):
        self.ground(values=dammed_valley(), kind=gdal.GDT_Float32)
        self.study()
        self.run_study()
        rows, features = table(self.folder / "result/tables/depressions.csv"), self.features("depressions.geojson")
        self.assertEqual(len(features), len(rows))
        deepest = features[0]
        self.assertEqual(deepest["properties"]["depression"], 1)
        self.assertTrue(deepest["properties"]["on_governing_path"])
        shape = ogr.CreateGeometryFromJson(json.dumps(deepest["geometry"]))
        shape.AssignSpatialReference(system_of(4326))
        shape.TransformTo(system_of(25832))
        self.assertTrue(shape.IsValid())
        # Degrees are rounded to a centimetre; the area is that of whole cells of 4 m².
        self.assertAlmostEqual(shape.Area(), deepest["properties"]["area_m2"], delta=0.002 * shape.Area())
        self.assertEqual(deepest["properties"]["area_m2"], 4 * int(rows[0]["cells"]))
        # Elevations of 32 bits are hundredths of a millimetre off; depths do not show it.
        self.assertEqual([f["properties"]["depth_m"] for f in features], [round(f["properties"]["depth_m"], 3) for f in features])
        self.assertEqual([row["depth_ft"] for row in rows], ["%g" % round(float(row["depth_ft"]), 3) for row in rows])
        self.assertAlmostEqual(float(rows[0]["depth_ft"]) * 0.3048, deepest["properties"]["depth_m"], 3)

    def test_a_file_of_several_layers_needs_its_layer_named(self):
        file = ogr.GetDriverByName("GPKG").CreateDataSource(str(self.folder / "town.gpkg"))
        for name, cells in (("roads", ((1, 1), (1, 40))), ("brooks", ((20, 2), (20, 22)))):
            layer = file.CreateLayer(name, system_of(25832), ogr.wkbLineString)
            feature = ogr.Feature(layer.GetLayerDefn())
            feature.SetGeometry(ogr.CreateGeometryFromWkt(self.line(*cells)))
            layer.CreateFeature(feature)
            del feature, layer
        del file
        self.study('channels = "town.gpkg"')
        self.refused(1, "run", "study.toml", says=["town.gpkg", "several layers: roads, brooks", 'channels_layer = "roads"'])
        self.study('channels = "town.gpkg"\nchannels_layer = "bridges"')
        self.refused(1, "run", "study.toml", says=['no layer "bridges"', "roads, brooks"])
        self.study('channels = "town.gpkg"\nchannels_layer = "brooks"')
        self.run_study()
        self.assertEqual(float(self.notices()["terrain-edited"]["value"]), 21)
        self.study('channels_layer = "brooks"')
        self.refused(1, "run", "study.toml", says=["channels_layer", 'channels = "mapped.gpkg"'])

    def test_check_counts_features_and_names_what_is_wrong(self):
        self.shapes("brook.gpkg", self.line((20, 2), (20, 22)), "LINESTRING(1 1,2 2)", "POINT(500010 5399990)")
        self.study('channels = "brook.gpkg"')
        run = self.rillclock("check", "study.toml")
        self.assertEqual(run.returncode, 0, run.stderr)
        said = run.stdout + run.stderr
        self.assertIn("channels: 2 features, 1 of 2 lines within the elevations", said)
        self.assertIn("Feature 3", said)
        self.shapes("far.gpkg", "LINESTRING(1 1,2 2)")
        self.study('barriers = "far.gpkg"')
        run = self.rillclock("check", "study.toml")
        self.assertEqual(run.returncode, 1)
        self.assertIn("far.gpkg", run.stdout + run.stderr)
        self.refused(1, "run", "study.toml", says=["barriers", "far.gpkg", "reference system"])


if __name__ == "__main__":
    unittest.main()
