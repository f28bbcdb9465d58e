#!/usr/bin/python3
"""Pipes and overrides in the demo: arrivals led elsewhere, times and coefficients stated, and marks wherever they act."""
import re
import shutil
import tempfile
import unittest

from peaks_test import demo_with_peaks, intensity
from support import CommandTest, table

PIPES = """from,to,length,diameter,n,slope
Market inlet,Tramway bank,120 m,0.45 m,0.013,0.008
School inlet,Market inlet,100 m,0.3 m,0.013,0.01
"""
OVERRIDES = """point,time,way_time,sheet_length,n,c
Side valley mouth,20 min,,,,
Tramway bank,,4 min,,,
Orchard inlet,,,,,0.85
School inlet,,,,0.8,
"""


def by_name(rows, column="name"):
    return {r[column]: r for r in rows}


def setUpModule():
    """The demo as it stands, with pipes, and with overrides."""
    global PLAIN, PIPED, STATED  # pylint: disable=global-statement
    folder = tempfile.mkdtemp(prefix="rillclock-test-")
    unittest.addModuleCleanup(shutil.rmtree, folder, ignore_errors=True)
    PLAIN = demo_with_peaks(folder)
    PIPED = demo_with_peaks(folder, pipes=PIPES, timing='pipe_flow = "design flow"')
    STATED = demo_with_peaks(folder, overrides=OVERRIDES)


def rebuilt_peaks(tables):
    """Whole-area time (min) and peak (m3/s) of each point in 10 years, from the hand-over table alone."""
    subareas = by_name(tables["handover"], "subarea")
    made = {}
    for point in subareas:
        times, runoff = [], 0.0
        for name in subareas:
            seconds, at = float(subareas[name]["own_time_s"]), name
            while at != point and subareas[at]["next_point"]:
                seconds, at = seconds + float(subareas[at]["way_time_s"]), subareas[at]["next_point"]
            if at == point:
                times.append(seconds)
                runoff += float(subareas[name]["ca_10yr_ha"])
        minutes = max(times) / 60
        made[point] = minutes, runoff * intensity(10, minutes) / 360
    return made


class Both(unittest.TestCase):
    def test_every_peak_is_rebuilt_from_the_handover_table_alone(self):
        for tables in (PIPED, STATED):
            for point, (minutes, flow) in rebuilt_peaks(tables).items():
                row = next(r for r in tables["peaks"] if (r["point"], r["return_period_years"]) == (point, "10"))
                self.assertAlmostEqual(minutes, float(row["time_of_concentration_min"]), delta=1e-4)
                self.assertAlmostEqual(flow / float(row["whole_area_peak_m3_per_s"]), 1, delta=1e-4)
                self.assertGreaterEqual(float(row["peak_m3_per_s"]), float(row["whole_area_peak_m3_per_s"]))

    def test_nothing_changes_where_nothing_stated_arrives(self):
        for tables in (PIPED, STATED):
            before, same = by_name(PLAIN["outlets"]), 0
            for row in tables["outlets"]:
                plain = before[row["name"]]
                self.assertEqual(row["time_of_concentration_min"], plain["time_of_concentration_min"])  # over the ground
                if not row["stated_above"] and row["network_next_point"] == plain["network_next_point"] and \
                        row["subareas"] == plain["subareas"]:
                    self.assertEqual(row["network_time_min"], plain["network_time_min"])
                    self.assertEqual(row["peak_m3_per_s"], plain["peak_m3_per_s"])
                    same += 1
            self.assertGreater(same, 3)


class Shown(unittest.TestCase):
    """What stands first of a point is what its peaks are made with, marked where pipes or stated figures act."""

    def test_the_time_used_is_that_of_the_peaks_and_the_ground_keeps_names_of_its_own(self):
        for tables, other in ((PIPED, 1), (STATED, 3), (PLAIN, 0)):
            used = {r["point"]: r for r in tables["peaks"] if r["return_period_years"] == "10"}
            plain = by_name(PLAIN["outlets"])
            differ = 0
            for row in tables["outlets"]:
                peak = used[row["name"]]
                self.assertAlmostEqual(float(row["time_used_min"]), float(peak["time_of_concentration_min"]), delta=6e-4)
                self.assertAlmostEqual(float(row["network_area_ha"]) / float(peak["area_ha"]), 1, delta=1e-4)
                for column in ("time_of_concentration_min", "area_ha"):
                    self.assertEqual(row[column], plain[row["name"]][column])
                is_other = (row["time_used_min"], row["network_area_ha"]) != (row["time_of_concentration_min"], row["area_ha"])
                self.assertTrue(row["stated_acts"] == "yes" or not is_other, row["name"])
                differ += is_other
            self.assertGreaterEqual(differ, other)

    def test_points_are_marked_where_something_stated_acts_and_only_there(self):
        marked = {r["name"] for r in STATED["outlets"] if r["stated_acts"] == "yes"}
        # The way time of the tramway bank acts below it alone; a C counts at its own point already.
        self.assertTrue({"Side valley mouth", "Orchard inlet", "School inlet", "Weir"} <= marked)
        self.assertNotIn("Tramway bank", marked)
        self.assertEqual({r["stated_acts"] for r in PLAIN["outlets"]}, {"no"})
        for row in STATED["outlets"]:
            self.assertFalse(row["stated_acts"] == "yes" and not row["stated_above"], row["name"])

    def test_the_console_shows_the_time_used_with_its_mark_and_the_headline_both(self):
        for tables in (PIPED, STATED, PLAIN):
            shown = {}
            for line in tables["said"].splitlines():
                for row in tables["outlets"]:
                    if re.match(re.escape(row["name"]) + r"  +[0-9]", line):
                        shown[row["name"]] = line[len(row["name"]):].split()[1]
            for row in tables["outlets"]:
                mark = "*" if row["stated_acts"] == "yes" else ""
                if row["name"] in shown:
                    time = shown[row["name"]]
                    self.assertEqual(time.endswith("*"), bool(mark), row["name"])
                    self.assertAlmostEqual(float(time.rstrip("*")), float(row["time_used_min"]), delta=0.0506)
            self.assertIn("Weir", shown)
            is_any = tables is not PLAIN
            self.assertEqual("* Pipes or stated figures act on this point" in tables["said"], is_any)
            weir = by_name(tables["outlets"])["Weir"]
            headline = next(line for line in tables["said"].splitlines() if line.strip(" *").startswith("'Weir' drains"))
            self.assertIn(f"arrives after {float(weir['time_used_min']):.3g} min", headline)
            self.assertEqual("Over the ground alone it drains" in headline, is_any)
            if is_any:
                self.assertIn(f"the time is {float(weir['time_of_concentration_min']):.3g} min", headline)

    def test_the_reports_table_of_points_has_the_time_used_with_its_mark(self):
        for tables in (STATED, PLAIN):
            for row in tables["outlets"]:
                found = re.search(r"<tr data-number=\"" + row["number"] + r"\".*?</a></td><td>(.*?)</td><td>(.*?)</td>", tables["report"])
                mark = "*" if row["stated_acts"] == "yes" else ""
                self.assertEqual(found[2], row["time_used_min"] + mark)
                self.assertEqual(found[1].endswith("*"), bool(mark))
            self.assertEqual('<p class="mark">* Pipes or stated figures act' in tables["report"], tables is STATED)

    def test_every_return_periods_storm_has_the_time_of_its_peak_beside_the_grounds(self):
        used = {(r["point"], r["return_period_years"]): r["time_of_concentration_min"] for r in STATED["peaks"]}
        for r in STATED["storms"]:
            self.assertEqual(r["time_used_min"], used[r["point"], r["return_period_years"]])


class Pipes(unittest.TestCase):
    def test_what_arrives_at_an_inlet_goes_on_from_the_end_of_its_pipe(self):
        outlets = by_name(PIPED["outlets"])
        self.assertEqual(outlets["School inlet"]["network_next_point"], "Market inlet")
        self.assertEqual(outlets["Market inlet"]["network_next_point"], "Tramway bank")
        above = {r["subarea"] for r in PIPED["subareas"] if r["point"] == "Tramway bank"}
        self.assertEqual(above, {"Tramway bank", "Market inlet", "School inlet"})
        self.assertEqual(outlets["Tramway bank"]["stated_above"], "School inlet (pipe), Market inlet (pipe)")

    def test_areas_are_led_with_the_water_and_none_is_lost(self):
        row = {r["point"]: float(r["area_ha"]) for r in PIPED["peaks"] if r["return_period_years"] == "10"}
        own = {r["subarea"]: float(r["area_ha"]) for r in PIPED["handover"]}
        self.assertAlmostEqual(row["Tramway bank"], own["Tramway bank"] + own["Market inlet"] + own["School inlet"], delta=1e-5)
        self.assertAlmostEqual(row["Weir"], sum(own.values()), delta=1e-4)

    def test_the_velocity_is_that_of_the_depth_of_the_design_flow(self):
        peaks = {r["point"]: float(r["whole_area_peak_m3_per_s"]) for r in PIPED["peaks"] if r["return_period_years"] == "10"}
        for r in PIPED["pipes"]:
            diameter, slope, n = float(r["diameter_m"]), float(r["slope"]), float(r["n"])
            full = (diameter / 4) ** (2 / 3) * slope**0.5 / n
            area = 3.14159265 * diameter**2 / 4
            self.assertAlmostEqual(float(r["capacity_m3_per_s"]) / (full * area), 1, delta=1e-4)
            self.assertAlmostEqual(float(r["design_flow_m3_per_s"]) / peaks[r["from"]], 1, delta=1e-3)
            self.assertAlmostEqual(float(r["time_min"]), float(r["length_m"]) / float(r["velocity_m_per_s"]) / 60, delta=2e-4)
            self.assertEqual(r["runs_full"], "no")
            self.assertLess(float(r["velocity_m_per_s"]), 1.15 * full)  # at most 1.14 of it, at 0.81 of the diameter
            way = by_name(PIPED["handover"], "subarea")[r["from"]]["way_time_s"]
            self.assertAlmostEqual(float(way) / 60, float(r["time_min"]), delta=1e-4)


class TooSmall(CommandTest):
    """A pipe of 0.2 m where several times as much comes, beside one that is wide enough."""

    PIPES = "from,to,length,diameter,n,slope\nMill bridge,Weir,200 m,0.2 m,0.013,0.01\nSchool inlet,Market inlet,100 m,1.2 m,0.013,0.01\n"

    def run_with(self, timing="", more=""):
        tables = demo_with_peaks(self.folder, pipes=self.PIPES, timing=timing, more=more)
        told = [r for r in tables["review"] if r["notice"] == "pipe-too-small"]
        return by_name(tables["pipes"], "from"), told, tables

    def test_an_overloaded_pipe_is_told_whichever_way_it_is_timed(self):
        for timing in ("", 'pipe_flow = "design flow"'):
            pipes, told, tables = self.run_with(timing)
            self.assertEqual([r["point"] for r in told], ["Mill bridge"], timing)
            peak = next(r for r in tables["peaks"] if (r["point"], r["return_period_years"]) == ("Mill bridge", "10"))["peak_m3_per_s"]
            small = pipes["Mill bridge"]
            self.assertEqual((small["peak_m3_per_s"], small["too_small"], small["runs_full"]), (peak, "yes", "yes"))
            self.assertEqual((pipes["School inlet"]["too_small"], bool(timing)), ("no", bool(small["design_flow_m3_per_s"])))
            full = (0.2 / 4) ** (2 / 3) * 0.01**0.5 / 0.013
            self.assertAlmostEqual(float(small["velocity_m_per_s"]) / full, 1, delta=1e-4)
            self.assertEqual((told[0]["value"], told[0]["threshold"], told[0]["return_period_years"]), (peak, small["capacity_m3_per_s"], "10"))
            self.assertNotIn("ft3/s", told[0]["text"])
            self.assertIn("the peak of 10 years that comes to it", told[0]["text"])

    def test_it_is_told_in_the_units_of_the_report(self):
        self.run_with()
        study = self.folder / "town/peaks.toml"
        study.write_text('report_units = "us"\n' + study.read_text().replace('report_units = "si"', ""))
        self.done("run", study, "--replace")
        told = next(r for r in table(self.folder / "town/result/tables/review.csv") if r["notice"] == "pipe-too-small")
        pipe = by_name(table(self.folder / "town/result/tables/pipes.csv"), "from")["Mill bridge"]
        self.assertEqual((told["value"], told["threshold"]), (pipe["peak_ft3_per_s"], pipe["capacity_ft3_per_s"]))
        self.assertIn("ft3/s just full", told["text"])
        self.assertNotIn("m3/s", told["text"].replace("ft3/s", ""))


class Overrides(unittest.TestCase):
    def test_a_stated_time_counts_for_its_subarea_at_every_point_below(self):
        for r in STATED["subareas"]:
            if r["subarea"] == "Side valley mouth":
                self.assertEqual(float(r["own_time_min"]), 20)
                self.assertEqual(r["stated"], "time")
        self.assertEqual(by_name(STATED["outlets"])["Side valley mouth"]["network_time_min"], "20.000")
        self.assertEqual(by_name(STATED["outlets"])["Weir"]["stated_above"],
                         "Side valley mouth (time), Tramway bank (way), School inlet (n), Orchard inlet (C)")
        # Its own 54 min set the time of the outlet before; now something else does.
        self.assertNotEqual(by_name(STATED["outlets"])["Weir"]["last_subarea"], by_name(PLAIN["outlets"])["Weir"]["last_subarea"])

    def test_a_stated_way_and_coefficient_count(self):
        handover = by_name(STATED["handover"], "subarea")
        self.assertEqual(float(handover["Tramway bank"]["way_time_s"]), 240)
        self.assertEqual(float(handover["Orchard inlet"]["runoff_coefficient_with_factor_10yr"]), 0.85)
        self.assertAlmostEqual(float(handover["Orchard inlet"]["runoff_coefficient_with_factor_100yr"]), 1.0)  # 1.25 · 0.85 is cut
        marks = {r["subarea"]: r["stated"] for r in STATED["handover"] if r["stated"]}
        self.assertEqual(marks, {"Side valley mouth": "time", "Tramway bank": "way", "Orchard inlet": "C", "School inlet": "n"})

    def test_rougher_sheet_flow_makes_the_own_time_longer_and_nothing_else(self):
        before, after = (by_name(t["handover"], "subarea")["School inlet"] for t in (PLAIN, STATED))
        self.assertGreater(float(after["own_time_s"]), 1.2 * float(before["own_time_s"]))
        self.assertEqual(after["way_time_s"], before["way_time_s"])
        fixed, storm = map(float, after["own_time_parts_s"].split(" + s * "))
        self.assertAlmostEqual(fixed + float(after["storm_factor"]) * storm, float(after["own_time_s"]), delta=1e-4)

    def test_result_json_marks_what_is_stated(self):
        outlets = {o["name"]: o for o in STATED["json"]["outlets"]}
        self.assertEqual(outlets["Tramway bank"]["stated"], "way")
        self.assertIsNone(outlets["Spring wood ford"]["stated_above"])
        self.assertIn("overrides", [i["role"] for i in STATED["json"]["inputs"]])


class Refused(CommandTest):
    def study(self, pipes="", overrides="", timing=""):
        self.done("demo", "town")
        study = (self.folder / "town/study.toml").read_text()
        if pipes:
            (self.folder / "town/pipes.csv").write_text("from,to,length,diameter,n,slope\n" + pipes)
            study = study.replace('move_within = "5 m"', 'move_within = "5 m"\npipes = "pipes.csv"')
        if overrides:
            (self.folder / "town/overrides.csv").write_text(overrides)
            timing += 'overrides = "overrides.csv"\n'
        (self.folder / "town/study.toml").write_text(study.replace('[timing]\n', f"[timing]\n{timing}"))
        return "town/study.toml"

    def test_a_pipe_that_leads_in_a_circle_names_the_points(self):
        study = self.study(pipes="Mill bridge,Market footbridge,10 m,1 m,0.013,0.01\n")
        self.refused(1, "run", study, says=("pipes.csv, line 2", "circle", "Market footbridge", "Mill bridge"))

    def test_a_name_that_no_point_has_is_refused_with_the_nearest(self):
        study = self.study(overrides="point,time\nWier,3 min\n")
        self.refused(1, "run", study, says=("overrides.csv, line 2", "'Wier'", "did you mean Weir?"))

    def test_check_counts_pipes_and_overrides_and_finds_their_faults(self):
        study = self.study(pipes="Mill bridge,Weir,10 m,1 m,0.013,0.01\n", overrides="point,time\nWeir,3 min\n")
        said = self.done("check", study)
        self.assertIn("pipes: 1", said)
        self.assertIn("overrides: of 1 points", said)
        (self.folder / "town/pipes.csv").write_text("from,to,length,diameter,n,slope\nMill bridge,Weir,10,1 m,0.013,0.01\n")
        self.assertEqual(self.rillclock("check", study).returncode, 1)


if __name__ == "__main__":
    unittest.main()
