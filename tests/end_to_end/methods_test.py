#!/usr/bin/python3
"""Time of concentration by the formulas that take a catchment as one lump, recomputed from what the result says was measured."""
import json
import statistics
import unittest

from support import CommandTest, FOOT, demo_town, table

MILE, SQUARE_MILE = 1609.344, 1609.344 ** 2
CURVE_NUMBERS = {1: "98,98,98,98", 2: "98,98,98,98", 3: "39,61,74,80", 4: "30,58,71,78", 5: "67,78,85,89", 6: "36,60,73,79",
                 7: "98,98,98,98", 8: "76,85,89,91"}
RUNOFF = {1: 0.9, 2: 0.9, 3: 0.2, 4: 0.2, 5: 0.3, 6: 0.15, 7: 1, 8: 0.6}
RAIN = "duration_min,intensity_10yr_in_h\n5,6.9\n15,4.4\n60,2.3\n1440,0.2\n"


class Methods(CommandTest):
    def setUp(self):
        super().setUp()
        demo_town(self.folder / "town")

    def run_town(self, soil_group="B", numbers=True, rain=False):
        lines = (self.folder / "town/cover-book.csv").read_text().strip().splitlines()
        if numbers:
            lines = [lines[0] + ",cn_a,cn_b,cn_c,cn_d,c"] + [
                f"{line},{CURVE_NUMBERS[code]},{RUNOFF[code]}" for code, line in enumerate(lines[1:], 1)]
        (self.folder / "town/cover-book.csv").write_text("\n".join(lines) + "\n")
        study = (self.folder / "town/study.toml").read_text()
        if soil_group:
            study = study.replace("[surface]", f'[surface]\nsoil_group = "{soil_group}"')
        if rain:
            (self.folder / "town/rain.csv").write_text(RAIN)
            study = study.replace("[rain]", '[rain]\nfile = "rain.csv"')
        (self.folder / "town/methods.toml").write_text(study)
        self.repeated("run", "town/methods.toml", "--replace")
        rows = {(row["point"], row["method"]): row for row in table(self.folder / "town/result/tables/methods.csv")}
        return self.result("town/result")["outlets"], rows

    def test_every_point_has_a_row_for_every_method(self):
        outlets, rows = self.run_town()
        methods = [line.split(":")[0] for line in self.done("methods").splitlines() if line.startswith("lump-")]
        self.assertEqual(len(methods), 14)
        self.assertEqual(set(rows), {(outlet["name"], method) for outlet in outlets for method in methods})

    def test_times_follow_from_the_measures_by_the_printed_formulas(self):
        outlets, rows = self.run_town()
        for outlet in outlets:
            m = outlet["methods"]["measures"]
            length_ft, fall_ft, slope = m["longest_path_m"] / FOOT, m["fall_m"] / FOOT, m["path_slope"]
            self.assertAlmostEqual(slope / (m["fall_m"] / m["longest_path_m"]), 1, places=4)
            expected = {
                "lump-nrcs-lag": 60 * length_ft ** 0.8 * (1000 / m["curve_number"] - 9) ** 0.7 / (1140 * (100 * m["land_slope"]) ** 0.5),
                "lump-kirpich": 0.0078 * length_ft ** 0.77 * slope ** -0.385,
                "lump-california": 60 * (11.9 * (m["longest_path_m"] / MILE) ** 3 / fall_ft) ** 0.385,
                "lump-bransby-williams": 21.3 * m["longest_path_m"] / MILE / ((m["area_m2"] / SQUARE_MILE) ** 0.1 * slope ** 0.2),
                "lump-bransby-williams-equal-area": 58.5 * m["longest_path_m"] / 1000 / (
                    (m["area_m2"] / 1e6) ** 0.1 * (1000 * m["equal_area_slope"]) ** 0.2),
                "lump-giandotti": 60 * (4 * (m["area_m2"] / 1e6) ** 0.5 + 1.5 * m["longest_path_m"] / 1000) / (0.8 * m["mean_height_m"] ** 0.5),
                "lump-faa": 1.8 * (1.1 - m["runoff_coefficient"]) * length_ft ** 0.5 / (100 * slope) ** (1 / 3)}
            for method, minutes in expected.items():
                row = rows[outlet["name"], method]
                self.assertAlmostEqual(float(row["time_min"]) / minutes, 1, delta=2e-3, msg=(outlet["name"], method))
                self.assertAlmostEqual(float(row["ratio_to_segments"]) / (minutes / outlet["time_of_concentration_min"]), 1, delta=2e-3)

    def test_the_curve_number_lies_between_those_of_its_classes_and_rises_with_the_soil_group(self):
        numbers = []
        for group in "ABCD":
            outlets, _ = self.run_town(group, numbers=group == "A")
            numbers.append([outlet["methods"]["measures"]["curve_number"] for outlet in outlets])
        for by_group in zip(*numbers):
            self.assertEqual(sorted(by_group), list(by_group))
            self.assertTrue(all(30 <= number <= 98 for number in by_group))

    def test_ranges_and_missing_numbers_are_told(self):
        _, rows = self.run_town(soil_group=None, numbers=False)
        self.assertIn("the study states no soil_group", rows["Weir", "lump-nrcs-lag"]["why_not"])
        self.assertIn("the cover book has no c for", rows["Weir", "lump-faa"]["why_not"])
        self.assertIn("below 170", rows["Weir", "lump-giandotti"]["why_not"])
        self.assertIn("no rain by duration", rows["Weir", "lump-papadakis-kazan"]["why_not"])
        self.assertEqual(rows["Weir", "lump-kerby"]["time_min"], "")

    def test_the_spread_is_that_of_the_applicable_methods(self):
        outlets, rows = self.run_town()
        columns = {row["name"]: row for row in table(self.folder / "town/result/tables/outlets.csv")}
        for outlet in outlets:
            times = sorted(float(row["time_min"]) for (point, _), row in rows.items()
                           if point == outlet["name"] and row["applicable"] == "yes")
            row = columns[outlet["name"]]
            self.assertEqual(int(row["methods_applicable"]), len(times))
            for name, value in (("lowest", times[0]), ("median", statistics.median(times)), ("highest", times[-1])):
                self.assertAlmostEqual(float(row[f"methods_{name}_min"]), value, delta=0.002)

    def test_a_method_with_rain_shows_its_rounds(self):
        outlets, _ = self.run_town(rain=True)
        found = next(time for time in outlets[0]["methods"]["times"] if time["method"] == "lump-papadakis-kazan")
        m, last = outlets[0]["methods"]["measures"], found["iteration"][-1]
        expected = 0.66 * (m["longest_path_m"] / FOOT) ** 0.5 * m["overland_n"] ** 0.52 * m["path_slope"] ** -0.31 * (
            last["intensity_mm_per_h"] / 25.4) ** -0.38
        self.assertTrue(found["applicable"])
        self.assertAlmostEqual(found["time_min"] / expected, 1, delta=1e-3)
        self.assertLess(abs(last["computed_min"] - last["assumed_min"]) * 60, 0.11)

    def test_numbers_of_the_study_and_of_fields_make_methods_applicable(self):
        _, rows = self.run_town(rain=True)
        for method in ("lump-kerby", "lump-izzard", "lump-los-angeles", "lump-county-initial"):
            self.assertIn("state", rows["Weir", method]["why_not"])
        study = (self.folder / "town/methods.toml").read_text()
        points = json.loads((self.folder / "town/points.geojson").read_text())
        for feature in points["features"]:
            feature["properties"] |= {"kerby": "pavement", "imp": 0.35 if feature["properties"]["name"] == "Weir" else None}
        (self.folder / "town/with-fields.geojson").write_text(json.dumps(points))
        study = study.replace('"points.geojson"', '"with-fields.geojson"') + (
            '\n[methods]\nkerby_n = "field kerby"\nimpervious = "field imp"\nundeveloped_coefficient = 0.3\ncounty_k = "commercial"\n'
            'izzard_c = "concrete"\nkirpich_factor = "paved overland"\n')
        (self.folder / "town/fields.toml").write_text(study)
        self.done("run", "town/fields.toml", "--replace")
        rows = {(row["point"], row["method"]): row for row in table(self.folder / "town/result/tables/methods.csv")}
        for outlet in self.result("town/result")["outlets"]:
            m, name = outlet["methods"]["measures"], outlet["name"]
            length_ft, fall_ft, slope = m["longest_path_m"] / FOOT, m["fall_m"] / FOOT, m["path_slope"]
            expected = {"lump-kerby": 0.828 * (length_ft * 0.02) ** 0.467 * slope ** -0.235,
                        "lump-kirpich": 0.4 * 0.0078 * length_ft ** 0.77 * slope ** -0.385,
                        "lump-county-initial": 0.304 * (length_ft ** 3 / fall_ft) ** 0.2}
            for method, minutes in expected.items():
                self.assertAlmostEqual(float(rows[name, method]["time_min"]) / minutes, 1, delta=2e-3, msg=(name, method))
            found = {time["method"]: time for time in outlet["methods"]["times"]}
            i = found["lump-izzard"]["iteration"][-1]["intensity_mm_per_h"] / 25.4
            izzard = 41.025 * (0.0007 * i + 0.012) * (length_ft / slope) ** (1 / 3) / i ** (2 / 3)
            self.assertAlmostEqual(float(rows[name, "lump-izzard"]["time_min"]) / izzard, 1, delta=2e-3)
            if name == "Weir":
                i = found["lump-los-angeles"]["iteration"][-1]["intensity_mm_per_h"] / 25.4
                minutes = 10 ** -0.507 * ((0.9 * 0.35 + 0.65 * 0.3) * i) ** -0.519 * length_ft ** 0.483 * slope ** -0.135
                self.assertAlmostEqual(float(rows[name, "lump-los-angeles"]["time_min"]) / minutes, 1, delta=2e-3)
            else:
                self.assertIn("the impervious share is not known", rows[name, "lump-los-angeles"]["why_not"])

    def test_a_field_with_a_wrong_value_is_refused_with_its_point(self):
        points = json.loads((self.folder / "town/points.geojson").read_text())
        points["features"][0]["properties"]["kerby"] = "gold"
        name = points["features"][0]["properties"]["name"]
        (self.folder / "town/points.geojson").write_text(json.dumps(points))
        study = (self.folder / "town/study.toml").read_text() + '\n[methods]\nkerby_n = "field kerby"\n'
        (self.folder / "town/wrong.toml").write_text(study)
        self.refused(1, "run", "town/wrong.toml", says=(f"the field \"kerby\" of the point '{name}'", '"gold"', "or one of: pavement"))

    def test_a_soil_group_that_is_none_is_refused(self):
        study = (self.folder / "town/study.toml").read_text().replace("[surface]", '[surface]\nsoil_group = "E"')
        (self.folder / "town/wrong.toml").write_text(study)
        self.refused(1, "run", "town/wrong.toml", says=("surface.soil_group (town/wrong.toml, line", '"A" or "B" or "C" or "D"'))


if __name__ == "__main__":
    unittest.main()
