#!/usr/bin/python3
"""Surveyed areas beside points: the cell that is nearest to them, their units, and what is told of the misfit."""
import json
import math
import unittest

import numpy as np
from osgeo import gdal

from support import CommandTest, demo_town, table


class Surveyed(CommandTest):
    def study(self, areas, more=""):
        """The demo with one field more beside its points."""
        demo_town(self.folder / "town")
        town = self.folder / "town"
        points = json.loads((town / "points.geojson").read_text())
        for feature in points["features"]:
            if feature["properties"]["name"] in areas:
                feature["properties"]["surveyed"] = areas[feature["properties"]["name"]]
        (town / "points.geojson").write_text(json.dumps(points))
        study = town / "study.toml"
        study.write_text(study.read_text().replace('move_within = "5 m"', f'move_within = "5 m"\narea = "surveyed"\n{more}'))
        return study

    def run_study(self, *words, **options):
        self.done("run", self.study(*words, **options))
        outlets = {r["name"]: r for r in table(self.folder / "town/result/tables/outlets.csv")}
        notices = {(r["notice"], r["point"]): r for r in table(self.folder / "town/result/tables/review.csv")}
        return outlets, notices

    def test_a_point_moves_to_the_area_that_was_surveyed_and_not_to_the_largest(self):
        outlets, notices = self.run_study({"Market footbridge": "0.02 ha", "Weir": "94 ha"})
        bridge, weir = outlets["Market footbridge"], outlets["Weir"]
        self.assertLess(float(bridge["area_ha"]), 1)   # beside the brook, not on it
        self.assertGreater(float(weir["area_ha"]), 90)
        self.assertEqual(float(weir["surveyed_area_ha"]), 94)
        self.assertAlmostEqual(float(weir["area_to_surveyed_ratio"]), float(weir["area_ha"]) / 94, delta=2e-5)
        self.assertEqual(outlets["School culvert"]["surveyed_area_ha"] if "School culvert" in outlets else "", "")
        self.assertNotIn(("surveyed-area-differs", "Weir"), notices)

    def test_no_cell_within_reach_is_nearer_in_the_logarithm(self):
        outlets, _ = self.run_study({"Weir": "20 ha"})
        areas = gdal.Open(str(self.folder / "town/result/rasters/contributing_area.tif"))
        left, cell, _, top, _, _ = areas.GetGeoTransform()
        values = areas.ReadAsArray()
        rows, columns = np.mgrid[0:values.shape[0], 0:values.shape[1]]
        weir = outlets["Weir"]
        stated = self.result("town/result")["outlets"]
        place = next(f for f in json.loads((self.folder / "town/points.geojson").read_text())["features"] if f["properties"]["name"] == "Weir")
        self.assertTrue(stated and place)
        # Cells within 5 m less the distance it moved of where it landed are all within reach of where it was stated.
        reach = 5.0 - float(weir["moved_m"])
        away = np.hypot(left + (columns + 0.5) * cell - float(weir["x"]), top - (rows + 0.5) * cell - float(weir["y"]))
        near = values[(away <= reach) & (values > 0)] / 1e4
        best = min(abs(math.log(area / 20)) for area in near)
        self.assertAlmostEqual(abs(math.log(float(weir["area_ha"]) / 20)), best, delta=1e-4)

    def test_a_large_misfit_is_told_with_both_areas(self):
        outlets, notices = self.run_study({"Weir": "200 ha"})
        told = notices["surveyed-area-differs", "Weir"]
        self.assertIn("200 ha", told["text"])
        self.assertAlmostEqual(float(told["value"]), float(outlets["Weir"]["area_ha"]) / 200, delta=1e-4)

    def test_bare_numbers_are_in_the_stated_unit(self):
        outlets, _ = self.run_study({"Weir": 232.3}, more='area_unit = "ac"')
        self.assertAlmostEqual(float(outlets["Weir"]["surveyed_area_ha"]), 232.3 * 0.40468564224, delta=1e-3)

    def test_a_number_without_a_unit_is_refused_with_the_right_form(self):
        self.refused(1, "run", self.study({"Weir": 94}), says=("surveyed", "Weir", "area_unit", "4 ha"))

    def test_an_area_of_nothing_is_refused(self):
        self.refused(1, "run", self.study({"Weir": "0 ha"}), says=("surveyed", "Weir"))

    def test_a_unit_without_a_field_is_refused(self):
        study = self.study({})
        study.write_text(study.read_text().replace('area = "surveyed"', 'area_unit = "ha"'))
        self.refused(1, "run", study, says=("area_unit", 'area = "surveyed"'))

    def test_a_field_that_is_not_there_is_refused_with_those_that_are(self):
        study = self.study({"Weir": "94 ha"})
        study.write_text(study.read_text().replace('area = "surveyed"', 'area = "surveyd"'))
        self.refused(1, "run", study, says=("surveyd", "its fields are name"))

    def test_check_says_how_many_there_are(self):
        self.assertIn("surveyed areas: beside 1 points", self.done("check", self.study({"Weir": "94 ha"})))


if __name__ == "__main__":
    unittest.main()
