#!/usr/bin/python3
"""What runs off within isochrone bands: every flow found again from the hand-over table and the rain alone, and parts that add up."""
import json
import subprocess
import unittest

from osgeo import ogr

from peaks_test import demo_with_peaks, intensity
from support import COMMAND, DemoTest, class_folder, table

YEARS = 10


class Runoff(unittest.TestCase):
    @classmethod
    def setUpClass(cls):
        folder = class_folder(cls, "test")
        demo_with_peaks(folder)
        study = folder / "town/peaks.toml"
        study.write_text(study.read_text() + 'isochrones = "7 min"\n')
        subprocess.run([COMMAND, "run", study, "--replace"], check=True, capture_output=True)
        cls.folder = folder / "town/result"
        cls.tables = {name: table(cls.folder / f"tables/{name}.csv") for name in ("handover", "outlets", "peaks")}
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
                ca = sum(float(by_hand[p["subarea"]][f"runoff_coefficient_{YEARS}yr"]) * p["area_m2"] for p in band["subareas"])
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
