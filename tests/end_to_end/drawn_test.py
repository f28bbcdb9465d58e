#!/usr/bin/python3
"""Hand-drawn catchments in place of points: where their points come to stand, and where survey and elevations disagree."""
import json
import re
import shutil
import unittest

from osgeo import ogr, osr

from support import DemoTest, system_of, table


class Drawn(DemoTest):
    """The demo, with catchments as a file of their own: those that the program finds, moved or cut by a test."""

    def setUp(self):
        super().setUp()
        self.town = self.folder / "town"
        shutil.copytree(self.kept / "town", self.town, ignore=shutil.ignore_patterns("result"))
        self.base = {r["name"]: r for r in table(self.kept / "town/result/tables/outlets.csv")}
        source = ogr.Open(str(self.kept / "town/result/study.gpkg"))
        layer = source.GetLayerByName("catchments")
        self.shapes = {f["point"]: f.GetGeometryRef().Clone() for f in layer}
        self.system = layer.GetSpatialRef().Clone()

    def draw(self, shapes, name="drawn.gpkg", driver="GPKG", epsg=None):
        file = ogr.GetDriverByName(driver).CreateDataSource(str(self.town / name))
        target = system_of(epsg) if epsg else self.system
        layer = file.CreateLayer("drawn", target, ogr.wkbMultiPolygon)
        layer.CreateField(ogr.FieldDefn("name", ogr.OFTString))
        source = self.system.Clone()
        source.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
        for title, shape in shapes.items():
            feature = ogr.Feature(layer.GetLayerDefn())
            feature["name"] = title
            copy = ogr.ForceToMultiPolygon(shape.Clone())
            copy.Transform(osr.CoordinateTransformation(source, target))
            feature.SetGeometry(copy)
            layer.CreateFeature(feature)
        study = (self.town / "study.toml").read_text().replace('file = "points.geojson"', f'catchments = "{name}"').replace('"result"', '"drawn"')
        (self.town / "drawn.toml").write_text(study)
        return self.town / "drawn.toml"

    def run_drawn(self, shapes, **options):
        self.done("run", self.draw(shapes, **options), "-q", "--replace")
        tables = {name: {r.get("name") or r["point"]: r for r in table(self.town / f"drawn/tables/{name}.csv")} for name in ("outlets", "drawn_catchments")}
        notices = {(r["notice"], r["point"]): r for r in table(self.town / "drawn/tables/review.csv")}
        return tables["outlets"], tables["drawn_catchments"], notices

    def differences(self):
        """Who has it, area and shape of each feature."""
        source = ogr.Open(str(self.town / "drawn/study.gpkg"))
        return [(f["who_has_it"], f["area_m2"], f.GetGeometryRef().Clone()) for f in source.GetLayerByName("catchment_differences")]

    def test_the_report_has_areas_and_what_is_in_common_and_draws_the_differences(self):
        shapes = {name: shape.Clone() for name, shape in self.shapes.items()}
        west, east, south, north = shapes["Weir"].GetEnvelope()
        cut = ogr.CreateGeometryFromWkt(f"POLYGON(({west} {north - 100},{east} {north - 100},{east} {north},{west} {north},{west} {north - 100}))")
        shapes["Weir"] = shapes["Weir"].Difference(cut)
        _, drawn, _ = self.run_drawn(shapes)
        report = (self.town / "drawn/report.html").read_text()
        section = report[report.index("Hand-drawn catchments beside those of the elevations"):].split("</section>")[0]
        rows = [re.findall(r"<td[^>]*>(.*?)</td>", row) for row in section.split("<tr>")[2:]]
        self.assertEqual(len(rows), len(drawn))
        for row in rows:
            row[0] = re.sub("<[^>]*>", "", row[0])
            of = drawn[row[0]]
            for shown, column in zip(row[1:], ("drawn_area_ha", "area_by_elevations_ha", "in_both_ha", "drawn_only_ha", "elevations_only_ha", "overlap_percent")):
                self.assertAlmostEqual(float(shown), float(of[column]), delta=6e-4 * float(of[column]) + 0.051 * (column == "overlap_percent"), msg=(row[0], column))
        self.assertEqual(rows[0][0], "Weir")
        self.assertEqual([float(row[-1]) for row in rows], sorted(float(row[-1]) for row in rows))
        data = json.loads(re.search(r'id="map-data">(.*?)</script>', report, re.S)[1])
        self.assertEqual(len(data["differences"]), 2)
        self.assertTrue(any(data["differences"][1]["areas"]))
        self.assertIn("catchment by the elevations only", report)

    def test_catchments_of_the_program_get_their_points_back_and_nothing_differs(self):
        outlets, drawn, notices = self.run_drawn(self.shapes)
        self.assertEqual(outlets.keys(), self.base.keys())
        for name, row in outlets.items():
            self.assertEqual((row["x"], row["y"], row["area_ha"]), (self.base[name]["x"], self.base[name]["y"], self.base[name]["area_ha"]), name)
            self.assertEqual(float(drawn[name]["overlap_percent"]), 100, name)
            self.assertEqual((float(drawn[name]["drawn_only_ha"]), float(drawn[name]["elevations_only_ha"])), (0, 0), name)
        self.assertEqual(self.differences(), [])
        self.assertFalse([n for n in notices if n[0].startswith("drawn") or n[0].startswith("surveyed")])

    def test_a_catchment_drawn_too_far_east_is_told_with_both_sides(self):
        weir = self.shapes["Weir"].Clone()
        x0, x1, y0, y1 = weir.GetEnvelope()
        cut = ogr.CreateGeometryFromWkt(f"POLYGON(({x0} {y1 - 150},{x1} {y1 - 150},{x1} {y1 + 1},{x0} {y1 + 1},{x0} {y1 - 150}))")
        added = ogr.CreateGeometryFromWkt(f"POLYGON(({x1 - 60} {y0},{x1} {y0},{x1} {y1},{x1 - 60} {y1},{x1 - 60} {y0}))")
        drawn_shape = weir.Difference(cut).Union(added)
        outlets, drawn, notices = self.run_drawn({"Weir": drawn_shape})
        row = drawn["Weir"]
        found, by_hand, both = (float(row[c]) for c in ("area_by_elevations_ha", "drawn_area_ha", "in_both_ha"))
        self.assertAlmostEqual(found, float(outlets["Weir"]["area_ha"]), delta=1e-3)
        self.assertAlmostEqual(float(row["drawn_only_ha"]), by_hand - both, delta=2e-3)
        self.assertAlmostEqual(float(row["elevations_only_ha"]), found - both, delta=2e-3)
        self.assertAlmostEqual(float(row["overlap_percent"]), 100 * both / (found + by_hand - both), delta=0.01)
        sides = {side: (area, shape) for side, area, shape in self.differences()}
        for side, column in (("drawn only", "drawn_only_ha"), ("elevations only", "elevations_only_ha")):
            area, shape = sides[side]
            self.assertAlmostEqual(area / 1e4, float(row[column]), delta=1e-3)
            self.assertAlmostEqual(shape.GetArea(), area, delta=0.1)
            self.assertTrue(shape.IsValid())
        kept = sides["elevations only"][1].Intersection(drawn_shape).GetArea()
        self.assertLess(kept, 0.05 * sides["elevations only"][0] + 500)
        if float(row["overlap_percent"]) < 90:
            self.assertIn("% in common", notices["drawn-catchment-differs", "Weir"]["text"])

    def test_the_result_holds_the_drawn_areas_too(self):
        outlets, drawn, _ = self.run_drawn({name: self.shapes[name] for name in ("Weir", "Mill bridge")})
        for outlet in self.result("town/drawn")["outlets"]:
            self.assertEqual(outlet["drawn_catchment"]["overlap"], 1)
            self.assertAlmostEqual(outlet["drawn_catchment"]["area_m2"] / 1e4, float(drawn[outlet["name"]]["drawn_area_ha"]), delta=1e-2)
            self.assertEqual(float(outlets[outlet["name"]]["area_to_surveyed_ratio"]), 1)

    def test_any_format_and_reference_system(self):
        few = {name: self.shapes[name] for name in ("Weir", "Mill bridge")}
        for options in ({"name": "d.geojson", "driver": "GeoJSON", "epsg": 4326}, {"name": "d.shp", "driver": "ESRI Shapefile"}):
            with self.subTest(**options):
                outlets, drawn, _ = self.run_drawn(few, **options)
                for name in few:
                    self.assertEqual(outlets[name]["area_ha"], self.base[name]["area_ha"])
                    self.assertGreater(float(drawn[name]["overlap_percent"]), 99)

    def test_a_catchment_off_the_data_is_left_out_and_told(self):
        away = self.shapes["Weir"].Clone()
        shifted = ogr.CreateGeometryFromWkt("POLYGON((0 0,10 0,10 10,0 10,0 0))")
        outlets, _, notices = self.run_drawn({"Weir": away, "Nowhere": shifted})
        self.assertEqual(list(outlets), ["Weir"])
        self.assertIn(("drawn-catchment-off-data", "Nowhere"), notices)

    def test_two_of_one_name_are_refused(self):
        study = self.draw({"Weir": self.shapes["Weir"]})
        file = ogr.Open(str(self.town / "drawn.gpkg"), 1)
        layer = file.GetLayer(0)
        twin = layer.GetNextFeature().Clone()
        twin.SetFID(-1)
        layer.CreateFeature(twin)
        file = None
        self.refused(1, "run", study, "--replace", says=("drawn.gpkg", "Weir", "same name"))

    def test_catchments_beside_points_are_refused(self):
        study = self.draw({"Weir": self.shapes["Weir"]})
        study.write_text(study.read_text().replace("catchments =", 'file = "points.geojson"\ncatchments ='))
        self.refused(1, "run", study, "--replace", says=("catchments", "keep one of them"))

    def test_check_counts_them(self):
        self.assertIn("catchments: 1 drawn", self.done("check", self.draw({"Weir": self.shapes["Weir"]})))


if __name__ == "__main__":
    unittest.main()
