#!/usr/bin/python3
"""Every row of segments.csv, recomputed from the numbers it prints by the published formulas, as a reviewer would."""
import collections
import math
import unittest

from support import CommandTest, FOOT, INCH, demo_town, table

GRAVITY = {"m": 9.80665, "ft": 9.80665 / FOOT}
# Manning's 1 in metres is 1.4859 in feet; 0.007 h is for feet and inches.
MANNING = {"m": 1.0, "ft": FOOT ** (-1 / 3)}
SHEET_S = {"m": 0.007 * 3600 / FOOT ** 0.8 * (1 / INCH / 1000) ** -0.5, "ft": 0.007 * 3600}


class Row:
    """A row's numbers by the names of its columns without their units."""

    def __init__(self, fields, unit):
        self.fields, self.unit = fields, unit
        self.rain_unit = {"m": "mm", "ft": "in"}[unit]

    def text(self, name):
        return self.fields[name]

    def number(self, name):
        for ending in ("", "_" + self.unit, f"_{self.unit}_per_s", "_" + self.rain_unit):
            if name + ending in self.fields:
                return float(self.fields[name + ending])
        raise KeyError(name)

    def formula_s(self):
        n = self.number
        regime = self.text("regime")
        if regime == "sheet":
            return SHEET_S[self.unit] * (n("index_to") ** 0.8 - n("index_from") ** 0.8) / n("rain_2_year_24_hour") ** 0.5
        if regime == "shallow":
            return n("length") / (n("k") * n("slope_equivalent") ** n("slope_exponent"))
        if regime == "channel":
            velocity = MANNING[self.unit] / n("n") * n("hydraulic_radius") ** (2 / 3) * math.sqrt(n("slope_equivalent"))
            return n("length") / velocity
        return n("length") / math.sqrt(GRAVITY[self.unit] * n("water_depth"))


class Segments(CommandTest):
    def rows_of(self, units):
        study = (self.folder / "town/study.toml").read_text().replace('report_units = "si"', f'report_units = "{units}"')
        study = study.replace("[points]", "[points]\nname = \"name\"")
        (self.folder / "town" / f"{units}.toml").write_text(study)
        self.repeated("run", f"town/{units}.toml", "--out", units)
        return [Row(fields, {"si": "m", "us": "ft"}[units]) for fields in table(self.folder / units / "tables/segments.csv")]

    def setUp(self):
        super().setUp()
        demo_town(self.folder / "town")

    def check_rows(self, units):
        rows = self.rows_of(units)
        regimes = collections.Counter(row.text("regime") for row in rows)
        self.assertGreater(min(regimes[r] for r in ("sheet", "shallow", "channel")), 10)
        for row in rows:
            where = (units, row.text("point"), row.text("path"), row.text("segment"))
            if row.number("length") > 0:
                self.assertAlmostEqual(row.number("formula_time_s") / row.formula_s(), 1, delta=1e-3, msg=where)
                self.assertAlmostEqual(row.number("velocity") * row.number("formula_time_s") / row.number("length"), 1, delta=1e-3, msg=where)
            self.assertAlmostEqual(row.number("time_s"), row.number("formula_time_s") + row.number("ponded_time_s"), places=5, msg=where)
        return rows

    def test_each_row_holds_in_metres(self):
        self.check_rows("si")

    def test_each_row_holds_in_feet_and_inches(self):
        self.check_rows("us")

    def test_rows_add_up_to_the_points_time_to_a_millisecond(self):
        rows = self.rows_of("si")
        for outlet in self.result("si")["outlets"]:
            own = [row for row in rows if row.text("point") == outlet["name"] and row.text("path") == "governing"]
            total = sum(row.number("time_s") for row in own)
            self.assertAlmostEqual(total, outlet["time_of_concentration_s"], delta=1e-3)
            self.assertAlmostEqual(float(own[-1].text("running_time_min")), outlet["time_of_concentration_min"], places=3)
            length = sum(row.number("length") + row.number("ponded_length") for row in own)
            self.assertAlmostEqual(length / outlet["governing_path"]["length_m"], 1, delta=1e-4)

    def test_the_equivalent_slope_lies_between_the_least_and_the_greatest(self):
        for row in self.rows_of("si"):
            if row.text("slope_equivalent") and row.number("length") > 0:
                self.assertLessEqual(row.number("slope_least"), row.number("slope_equivalent") * 1.0001)
                self.assertLessEqual(row.number("slope_equivalent"), row.number("slope_greatest") * 1.0001)

    def test_the_index_of_a_sheet_row_is_its_n_length_over_the_root_of_its_slope(self):
        for row in self.rows_of("si"):
            if row.text("regime") == "sheet" and row.number("length") > 0:
                growth = row.number("n") * row.number("length") / math.sqrt(row.number("slope_equivalent"))
                self.assertAlmostEqual(growth / (row.number("index_to") - row.number("index_from")), 1, delta=1e-3)

    def test_rows_of_a_path_follow_one_another_in_place(self):
        rows = self.rows_of("si")
        for before, after in zip(rows, rows[1:]):
            if (before.text("point"), before.text("path")) == (after.text("point"), after.text("path")):
                self.assertEqual((before.text("x_to"), before.text("y_to")), (after.text("x_from"), after.text("y_from")))


class OpenWater(CommandTest):
    def test_a_row_across_a_pond_runs_at_the_celerity_of_its_depth(self):
        self.run_with_pond()
        found = [Row(fields, "ft") for fields in table(self.folder / "result/tables/segments.csv") if fields["regime"] == "water"]
        found = [row for row in found if row.number("length") > 0]
        self.assertTrue(found)
        for row in found:
            self.assertAlmostEqual(row.number("water_depth") * FOOT, 1.5, places=4)
            self.assertAlmostEqual(row.number("formula_time_s") / row.formula_s(), 1, delta=1e-3)


if __name__ == "__main__":
    unittest.main()
