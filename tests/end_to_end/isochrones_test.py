#!/usr/bin/python3
"""What runs off within isochrone bands: every flow found again from the hand-over table and the rain alone, and parts that add up."""
import json
import subprocess
import unittest

import numpy as np
from osgeo import ogr

from peaks_test import demo_with_peaks, intensity
from support import COMMAND, CommandTest, DemoTest, class_folder, table

YEARS = 10


class Runoff(unittest.TestCase):
    @classmethod
    def setUpClass(cls):
        folder = class_folder(cls, "test")
        demo_with_peaks(folder, more='isochrones = "7 min"\n')
        cls.folder = folder / "town/result"
        cls.tables = {name: table(cls.folder / f"tables/{name}.csv") for name in ("handover", "outlets", "peaks", "time_area")}
        cls.bands = [f["properties"] for f in json.loads((cls.folder / "isochrones.geojson").read_text())["features"]]

    def bands_of(self, scope, point):
        return sorted((b for b in self.bands if b["of"] == scope and b["point"] == point), key=lambda b: b["from_min"])

    def test_every_flow_is_found_again_from_the_handover_table_and_the_rain_alone(self):
        by_hand = {r["subarea"]: r for r in self.tables["handover"]}
        greatest = {("catchment", r["name"]): float(r["greatest_time_min"]) for r in self.tables["outlets"]}
        greatest |= {("subarea", name): float(r["own_time_s"]) / 60 for name, r in by_hand.items()}
        for scope, point in sorted({(b["of"], b["point"]) for b in self.bands}):
            running = 0.0
            for band in self.bands_of(scope, point):
                ca = sum(float(by_hand[p["subarea"]][f"runoff_coefficient_with_factor_{YEARS}yr"]) * p["area_m2"] for p in band["subareas"])
                running += ca
                minutes = min(band["to_min"], greatest[scope, point])
                flow = running * intensity(YEARS, minutes) / 3.6e6
                where = (scope, point, band["from_min"])
                self.assertAlmostEqual(band["ca_m2"], ca, delta=1e-6 * ca + 0.2, msg=where)
                self.assertAlmostEqual(band["ca_until_m2"], running, delta=1e-6 * running + 1, msg=where)
                self.assertAlmostEqual(band["rain_duration_min"], minutes, delta=6e-4, msg=where)
                self.assertAlmostEqual(band["intensity_mm_per_h"], intensity(YEARS, minutes), delta=0.01, msg=where)
                self.assertAlmostEqual(band["flow_m3_per_s"], flow, delta=1e-4 * flow + 1e-6, msg=where)
                self.assertEqual(band["return_period_years"], YEARS)

    def test_parts_add_up_to_the_band_and_bands_to_the_catchment(self):
        areas = {r["name"]: float(r["area_ha"]) for r in self.tables["outlets"]}
        own = {r["name"]: float(r["own_area_ha"]) for r in self.tables["outlets"]}
        for band in self.bands:
            self.assertAlmostEqual(sum(p["area_m2"] for p in band["subareas"]), band["area_m2"], delta=0.06 * len(band["subareas"]))
        for scope, point in {(b["of"], b["point"]) for b in self.bands}:
            whole = (areas if scope == "catchment" else own)[point]
            self.assertAlmostEqual(sum(b["area_m2"] for b in self.bands_of(scope, point)) / 1e4, whole, delta=1e-4 * whole)

    def test_parts_of_a_subarea_over_all_bands_are_the_subarea(self):
        own = {r["name"]: float(r["own_area_ha"]) for r in self.tables["outlets"]}
        found = dict.fromkeys(own, 0.0)
        for band in self.bands:
            for part in band["subareas"] if band["of"] == "catchment" else ():
                found[part["subarea"]] += part["area_m2"] / 1e4
        for name, area in own.items():
            self.assertAlmostEqual(found[name], area, delta=1e-4 * area + 1e-4)

    def test_the_last_band_of_a_catchment_gives_the_peak_of_its_whole_area(self):
        peaks = {r["point"]: float(r["whole_area_peak_m3_per_s"]) for r in self.tables["peaks"] if float(r["return_period_years"]) == YEARS}
        for point in {b["point"] for b in self.bands if b["of"] == "catchment"}:
            self.assertAlmostEqual(self.bands_of("catchment", point)[-1]["flow_m3_per_s"], peaks[point], delta=2e-4 * peaks[point])

    def test_rain_translated_through_the_bands_keeps_its_volume(self):
        """Three stretches of rain, each as long as a band, on the C·A of each band: what flows off is their depth on all C·A of the subareas."""
        step_min, rain_mm = 7, np.array([2.0, 5.0, 1.0])
        ca = {r["subarea"]: 1e4 * float(r[f"ca_{YEARS}yr_ha"]) for r in self.tables["handover"]}
        for point in sorted({b["point"] for b in self.bands if b["of"] == "catchment"}):
            bands = self.bands_of("catchment", point)
            self.assertEqual([b["from_min"] for b in bands], [step_min * k for k in range(len(bands))])
            arriving = np.diff([0.0] + [b["ca_until_m2"] for b in bands])
            flow = np.convolve(rain_mm / 1000 / (60 * step_min), arriving)  # m3/s at the end of each stretch
            subareas = {p["subarea"] for b in bands for p in b["subareas"]}
            expected = rain_mm.sum() / 1000 * sum(ca[s] for s in subareas)
            self.assertAlmostEqual(flow.sum() * 60 * step_min / expected, 1, delta=1e-4, msg=point)

    def test_the_printed_search_holds_all_c_a_of_its_point(self):
        for peak in self.tables["peaks"]:
            rows = [r for r in self.tables["time_area"] if all(r[c] == peak[c] for c in ("point", "return_period_years"))]
            ca = float(peak["area_ha"]) * float(peak["runoff_coefficient_with_factor"])
            self.assertAlmostEqual(sum(float(r["arriving_since_ca_ha"]) for r in rows) / ca, 1, delta=1e-4)
            self.assertAlmostEqual(float(rows[-1]["arrived_ca_ha"]) / ca, 1, delta=1e-4)

    def test_the_layer_says_the_same(self):
        source = ogr.Open(str(self.folder / "study.gpkg"))
        layer = source.GetLayerByName("isochrones")
        by_key = {(b["of"], b["point"], b["from_min"]): b for b in self.bands}
        self.assertEqual(layer.GetFeatureCount(), len(self.bands))
        for feature in layer:
            band = by_key[feature["of"], feature["point"], feature["from_min"]]
            for field in ("ca_m2", "ca_until_m2", "rain_duration_min", "intensity_mm_per_h", "flow_m3_per_s", "return_period_years"):
                self.assertAlmostEqual(feature[field], band[field], delta=1e-6 * abs(band[field]))
            self.assertEqual(feature["subareas"], "; ".join(f"{p['subarea']} {p['area_m2']:.1f}" for p in band["subareas"]))


class Asked(unittest.TestCase):
    """So many bands in place of a step, the catchments of two points besides, one above the other, and smoothed borders."""

    @classmethod
    def setUpClass(cls):
        folder = class_folder(cls, "test")
        demo_with_peaks(folder)
        town = folder / "town"
        base = (town / "peaks.toml").read_text()
        asked = 'isochrones = "9 bands"\nisochrone_catchments = ["Mill bridge", "Market footbridge"]\n'
        cls.said = {}
        for name, more in {"cells": asked, "smooth": asked + 'isochrone_borders = "smoothed"\n', "steps": 'isochrones = "10 min"\n'}.items():
            (town / f"{name}.toml").write_text(base.replace("[output]", f'[output]\nfolder = "{name}"') + more)
            cls.said[name] = subprocess.run([COMMAND, "run", town / f"{name}.toml"], check=True, capture_output=True, text=True).stderr
        cls.town = town

    def features(self, name):
        return json.loads((self.town / name / "isochrones.geojson").read_text())["features"]

    def layer(self, name):
        self.source = ogr.Open(str(self.town / name / "study.gpkg"))
        return self.source.GetLayerByName("isochrones")

    def test_the_step_is_the_shortest_round_one_for_so_many_bands_and_is_said(self):
        steps = {f["properties"]["to_min"] - f["properties"]["from_min"] for f in self.features("cells")}
        self.assertEqual(steps, {10.0})
        self.assertEqual(json.loads((self.town / "cells/result.json").read_text())["parameters"]["isochrones"],
                         {"step_min": 10.0, "bands_at_most": 9, "catchments": ["Mill bridge", "Market footbridge"], "borders": "cells"})
        self.assertIn("isochrones: every 10 min, the shortest round step that gives at most 9 bands", self.said["cells"])
        self.assertNotIn("isochrones:", self.said["steps"])
        self.assertLessEqual(max(f["properties"]["to_min"] for f in self.features("cells")), 90)

    def test_but_for_the_catchments_asked_for_all_is_as_with_that_step_stated(self):
        others = [f for f in self.features("cells") if f["properties"]["of"] == "subarea" or f["properties"]["point"] not in ("Mill bridge", "Market footbridge")]
        self.assertEqual(others, self.features("steps"))

    def test_catchments_asked_for_have_the_areas_and_parts_of_all_that_drains_to_them(self):
        outlets = {r["name"]: r for r in table(self.town / "cells/tables/outlets.csv")}
        for point in ("Mill bridge", "Market footbridge"):
            bands = [f["properties"] for f in self.features("cells") if f["properties"]["of"] == "catchment" and f["properties"]["point"] == point]
            area = sum(b["area_m2"] for b in bands) / 1e4
            self.assertAlmostEqual(area, float(outlets[point]["area_ha"]), delta=1e-4 * area)
            self.assertEqual(bands[-1]["share_until"], 1.0)
            self.assertEqual(bands[-1]["to_min"], 10 * (int(float(outlets[point]["greatest_time_min"]) / 10) + 1))
            for band in bands:
                self.assertAlmostEqual(sum(p["area_m2"] for p in band["subareas"]), band["area_m2"], delta=0.06 * len(band["subareas"]))
            self.assertAlmostEqual(bands[-1]["rain_duration_min"], float(outlets[point]["greatest_time_min"]), delta=6e-4)

    def test_smoothed_borders_are_shared_and_leave_the_areas_nearly_as_they_were(self):
        cells = {(f["of"], f["point"], f["from_min"]): f.GetGeometryRef().Clone() for f in self.layer("cells")}
        cell = 2.0   # metres
        sums = {}
        buffered = 0
        for feature in self.layer("smooth"):
            key = feature["of"], feature["point"], feature["from_min"]
            shape = feature.GetGeometryRef()
            self.assertTrue(shape.IsValid(), key)
            corners = sum(ring.GetPointCount() - 1 for polygon in cells[key] for ring in polygon)
            self.assertLessEqual(abs(shape.GetArea() - cells[key].GetArea()), corners * cell**2 / 8, key)
            if corners < 300:   # a buffer of more corners takes long
                self.assertLessEqual(shape.Difference(cells[key].Buffer(0.36 * cell)).GetArea(), 1e-6, key)
                buffered += 1
            self.assertEqual(feature["borders"], "smoothed")
            if feature["point"] in ("Market footbridge", "School inlet"):
                sums.setdefault(key[:2], []).append(shape.Clone())
        self.assertGreater(buffered, 5)
        self.assertEqual(len(sums), 3)   # one subarea and both of the footbridge
        for key, shapes in sums.items():
            whole = ogr.Geometry(ogr.wkbMultiPolygon)
            for shape in shapes:
                for polygon in shape:
                    whole.AddGeometry(polygon)
            together = whole.UnionCascaded().GetArea()
            self.assertAlmostEqual(together, sum(shape.GetArea() for shape in shapes), delta=1e-6 * together, msg=key)

    def test_the_layer_says_that_it_is_smoothed(self):
        self.assertIn("smoothed", self.layer("smooth").GetMetadataItem("DESCRIPTION") or "")
        self.assertNotIn("smoothed", self.layer("cells").GetMetadataItem("DESCRIPTION") or "")
        self.assertIn("smoothed", json.loads((self.town / "smooth/isochrones.geojson").read_text())["description"])


class WhatPipesChange(unittest.TestCase):
    def test_layer_and_report_say_that_stated_times_are_not_in_the_bands(self):
        folder = class_folder(type(self), "test")
        demo_with_peaks(folder, overrides="point,way_time\nSchool inlet,3 min\n", more='isochrones = "10 min"\n')
        result = folder / "town/result"
        text = json.loads((result / "isochrones.geojson").read_text())
        self.assertIn("over the ground", text["description"])
        source = ogr.Open(str(result / "study.gpkg"))   # a layer ends with its source
        self.assertIn("over the ground", source.GetLayerByName("isochrones").GetMetadataItem("DESCRIPTION"))
        self.assertIn("over the ground: what pipes and stated times change is not in them", (result / "report.html").read_text())
        stated = {f["properties"]["point"]: f["properties"]["stated_above"] for f in text["features"]}
        self.assertEqual(stated["School inlet"], "School inlet (way)")
        self.assertIn(None, stated.values())


class Wrongly(CommandTest):
    def study(self, output):
        study = self.folder / "town/study.toml"
        if not study.exists():
            self.done("demo", "town")
            self.written = study.read_text()
        study.write_text(self.written.replace('isochrones = "10 min"', output))
        return "town/study.toml"

    def test_a_point_that_is_not_there_is_refused_with_the_nearest_name(self):
        study = self.study('isochrones = "10 min"\nisochrone_catchments = ["Mil bridge"]')
        self.refused(1, "run", study, says=("isochrone_catchments", "'Mil bridge'", "did you mean Mill bridge?"))
        check = self.rillclock("check", study)
        self.assertEqual(check.returncode, 1)
        self.assertIn("did you mean Mill bridge?", check.stderr)

    def test_so_many_bands_are_a_whole_number_from_one(self):
        for bad in ("0 bands", "2.5 bands", "some bands", "1001 bands", "-3 bands"):
            with self.subTest(bad):
                self.refused(1, "check", self.study(f'isochrones = "{bad}"'), says=("output.isochrones", "12 bands"))

    def test_more_bands_than_the_bound_are_refused_and_check_says_so_before(self):
        study = self.study('isochrones = "1 s"')
        check = self.rillclock("check", study)
        self.assertEqual(check.returncode, 0)
        self.assertIn("isochrones: every 1 s; at most 10000 bands", check.stdout)
        self.assertIn("will be refused where they are too many", check.stderr)
        self.refused(1, "run", study, says=("every 1 s", "more than 10000 bands", '"12 bands"'))
        check = self.rillclock("check", self.study('isochrones = "5 min"'))
        self.assertIn("isochrones: every 5 min; at most 10000 bands", check.stdout)
        self.assertNotIn("too many", check.stderr)

    def test_smoothing_without_isochrones_is_refused(self):
        self.refused(1, "run", self.study('isochrone_borders = "smoothed"'), says=("asks for none", 'isochrones = "5 min"'))


class WithoutRunoff(DemoTest):
    with_isochrones = True

    def test_fields_are_null_where_the_study_has_no_rain_by_duration(self):
        source = ogr.Open(str(self.kept / "town/result/study.gpkg"))
        layer = source.GetLayerByName("isochrones")
        features = json.loads((self.kept / "town/result/isochrones.geojson").read_text())["features"]
        self.assertGreater(len(features), 20)
        for field in ("ca_m2", "ca_until_m2", "rain_duration_min", "intensity_mm_per_h", "flow_m3_per_s", "return_period_years"):
            self.assertTrue(all(f["properties"][field] is None for f in features))
            self.assertTrue(all(f[field] is None for f in layer))
        self.assertTrue(all(f["properties"]["subareas"] for f in features))


if __name__ == "__main__":
    unittest.main()
