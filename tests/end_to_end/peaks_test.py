#!/usr/bin/python3
"""Peak flows of the demo: every table recomputed from what it prints, peaks rebuilt from the hand-over table alone, and laws."""
import csv
import json
import pathlib
import re
import shutil
import subprocess
import tempfile
import unittest

from support import COMMAND, CommandTest, table

# Invented coefficients for the demo's classes.
COEFFICIENTS = {"1": 0.9, "2": 0.9, "3": 0.25, "4": 0.2, "5": 0.3, "6": 0.1, "7": 1.0, "8": 0.6}
PERIODS = (2, 10, 100)
LEAST_MIN = 5.0
AS_IT_STANDS = None


def intensity(years, minutes, factor=1.0):
    """mm/h, as the study states it; the least time is the shortest."""
    return factor * 1000 * years**0.2 / (max(minutes, LEAST_MIN) + 12) ** 0.85


def frequency_factor(years):
    return {2: 1.0, 10: 1.0, 100: 1.25}[years]


def demo_with_peaks(folder, peaks="", rain_factor=1.0, sheet="nrcs", leave_out=(), pipes="", overrides="", timing="", more=""):
    """Runs the demo with rain by duration and runoff coefficients; gives its tables. `more` stands at the study's end, in [output]."""
    town = pathlib.Path(folder) / "town"
    if not town.exists():
        subprocess.run([COMMAND, "demo", town], check=True, capture_output=True)
    with open(town / "cover-book.csv", encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    for row in rows:
        row["c"] = COEFFICIENTS[row["code"]]
    with open(town / "book-with-c.csv", "w", encoding="utf-8", newline="") as file:
        writer = csv.DictWriter(file, rows[0].keys())
        writer.writeheader()
        writer.writerows(rows)
    points = json.loads((town / "points.geojson").read_text())
    points["features"] = [f for f in points["features"] if f["properties"]["name"] not in leave_out]
    (town / "some-points.geojson").write_text(json.dumps(points))
    study = (town / "study.toml").read_text().split("[rain]")[0].replace("cover-book.csv", "book-with-c.csv")
    study = study.replace("points.geojson", "some-points.geojson")
    study += f"""[rain]
two_year_24_hour = "62 mm"
formula = "i[mm/h] = {1000 * rain_factor:g} T^0.2 / (t[min] + 12)^0.85"
return_periods = [2, 10, 100]
[timing]
sheet = "{sheet}"
raster_return_period = 10
[peaks]
{peaks}
[output]
subareas = "all"
{more}"""
    if pipes:
        (town / "pipes.csv").write_text(pipes)
        study = study.replace('move_within = "5 m"', 'move_within = "5 m"\npipes = "pipes.csv"')
    if overrides:
        (town / "overrides.csv").write_text(overrides)
        timing += '\noverrides = "overrides.csv"'
    study = study.replace("raster_return_period = 10", f"raster_return_period = 10\n{timing}")
    (town / "peaks.toml").write_text(study)
    run = subprocess.run([COMMAND, "run", town / "peaks.toml", "--replace"], check=False, capture_output=True, text=True)
    assert run.returncode == 0, run.stderr
    result = {path.stem: table(path) for path in (town / "result/tables").glob("*.csv")}
    return result | {"json": json.loads((town / "result/result.json").read_text()), "said": run.stdout,
                     "report": (town / "result/report.html").read_text()}


def setUpModule():
    """The demo as most tests want it, run once."""
    global AS_IT_STANDS  # pylint: disable=global-statement
    folder = tempfile.mkdtemp(prefix="rillclock-test-")
    unittest.addModuleCleanup(shutil.rmtree, folder, ignore_errors=True)
    AS_IT_STANDS = demo_with_peaks(folder)


class PeakTables(unittest.TestCase):
    @classmethod
    def setUpClass(cls):
        cls.tables = AS_IT_STANDS
        cls.peaks = cls.tables["peaks"]

    def test_there_is_a_row_for_each_point_and_return_period(self):
        self.assertEqual(len(self.peaks), 3 * len(self.tables["outlets"]))
        self.assertEqual({r["why_not"] for r in self.peaks}, {""})

    def test_the_whole_area_peak_is_c_i_a(self):
        for r in self.peaks:
            years, minutes = int(r["return_period_years"]), float(r["time_of_concentration_min"])
            i = intensity(years, minutes)
            self.assertAlmostEqual(float(r["intensity_mm_per_h"]) / i, 1, delta=1e-5)
            by_hand = float(r["runoff_coefficient_with_factor"]) * i * float(r["area_ha"]) / 360
            self.assertAlmostEqual(float(r["whole_area_peak_m3_per_s"]) / by_hand, 1, delta=1e-4)
            self.assertEqual(float(r["frequency_factor"]), frequency_factor(years))
            plain = float(r["runoff_coefficient_before_factor"])
            self.assertAlmostEqual(plain * frequency_factor(years) / float(r["coefficient_uncut"]), 1, delta=1e-5)
            self.assertLessEqual(float(r["runoff_coefficient_with_factor"]), frequency_factor(years) * plain * (1 + 1e-5))
            if frequency_factor(years) == 1:
                self.assertEqual(r["runoff_coefficient_before_factor"], r["runoff_coefficient_with_factor"])
            else:
                self.assertGreater(float(r["runoff_coefficient_with_factor"]), plain)

    def test_the_partial_area_never_gives_less_and_lies_within_its_bounds(self):
        for r in self.peaks:
            peak = float(r["peak_m3_per_s"])
            self.assertGreaterEqual(peak, float(r["whole_area_peak_m3_per_s"]))
            self.assertLessEqual(float(r["peak_unbinned_at_least_m3_per_s"]), peak)
            self.assertGreaterEqual(float(r["peak_unbinned_at_most_m3_per_s"]), peak)
            # Bins of 5 s against times of half an hour: the bounds are close.
            self.assertLess(float(r["peak_unbinned_at_most_m3_per_s"]) / peak, 1.05)
            window = float(r["peak_share_of_runoff_percent"]) / 100 * float(r["runoff_coefficient_with_factor"]) * float(r["area_ha"])
            by_hand = window * intensity(int(r["return_period_years"]), float(r["peak_duration_min"])) / 360
            self.assertAlmostEqual(by_hand / peak, 1, delta=2e-4)

    def test_the_search_can_be_followed_by_hand(self):
        for r in self.peaks:
            rows = [t for t in self.tables["time_area"] if (t["point"], t["return_period_years"]) == (r["point"], r["return_period_years"])]
            self.assertLessEqual(len(rows), 30)
            running, years = 0.0, int(r["return_period_years"])
            for t in rows:
                running += float(t["arriving_since_ca_ha"])
                self.assertAlmostEqual(running, float(t["arrived_ca_ha"]), delta=1e-4 * running + 1e-9)
                self.assertGreaterEqual(float(t["most_ca_ha"]) * (1 + 1e-6), 0)
                flow = float(t["most_ca_ha"]) * intensity(years, float(t["duration_min"])) / 360
                self.assertAlmostEqual(flow / float(t["flow_m3_per_s"]), 1, delta=1e-4)
            self.assertAlmostEqual(running, float(r["runoff_coefficient_with_factor"]) * float(r["area_ha"]), delta=1e-4 * running)
            searched = [float(t["flow_m3_per_s"]) for t in rows if t["searched"] == "yes"]
            self.assertEqual(max(searched), float(r["peak_m3_per_s"]))
            governing = [t for t in rows if t["governs"] == "yes"]
            self.assertEqual(len(governing), 1)
            self.assertEqual(governing[0]["flow_m3_per_s"], r["peak_m3_per_s"])

    def test_every_peak_of_a_whole_area_is_rebuilt_from_the_handover_table_alone(self):
        subareas = {r["subarea"]: r for r in self.tables["handover"]}

        def way(name, point):
            """Seconds from one point down to another; none where it does not lie below."""
            seconds = 0.0
            while name != point:
                if not subareas[name]["next_point"]:
                    return None
                seconds, name = seconds + float(subareas[name]["way_time_s"]), subareas[name]["next_point"]
            return seconds

        for r in self.peaks:
            years = r["return_period_years"]
            above = {name: way(name, r["point"]) for name in subareas}
            above = {name: seconds for name, seconds in above.items() if seconds is not None}
            time = max(float(subareas[name]["own_time_s"]) + seconds for name, seconds in above.items()) / 60
            self.assertAlmostEqual(time, float(r["time_of_concentration_min"]), delta=1e-4)
            runoff = sum(float(subareas[name][f"ca_{years}yr_ha"]) for name in above)
            area = sum(float(subareas[name]["area_ha"]) for name in above)
            self.assertAlmostEqual(area, float(r["area_ha"]), delta=1e-6 * area)
            peak = runoff * intensity(int(years), time) / 360
            self.assertAlmostEqual(peak / float(r["whole_area_peak_m3_per_s"]), 1, delta=1e-4)
            self.rebuild_handbook_cases(r, {n: (float(subareas[n]["own_time_s"]) + s, float(subareas[n][f"ca_{years}yr_ha"]))
                                            for n, s in above.items()})
        for row in subareas.values():
            product = float(row["runoff_coefficient_with_factor_10yr"]) * float(row["area_ha"])
            plain = {row[f"runoff_coefficient_before_factor_{years}yr"] for years in PERIODS}
            self.assertEqual(plain, {row["runoff_coefficient_with_factor_10yr"]})  # C alone knows no return period here; Cf of 10 years is 1
            self.assertGreater(float(row["runoff_coefficient_with_factor_100yr"]), float(*plain))
            self.assertAlmostEqual(product, float(row["ca_10yr_ha"]), delta=1e-6 * product)

    def rebuild_handbook_cases(self, r, lumps):
        """Rain as long as some subarea's time: those that have arrived, alone and with their share of the others."""
        alone, shared = 0.0, 0.0
        for time, _ in lumps.values():
            seconds = max(time, 60 * LEAST_MIN)
            i = intensity(int(r["return_period_years"]), seconds / 60) / 360
            alone = max(alone, i * sum(ca for t, ca in lumps.values() if t <= seconds))
            shared = max(shared, i * sum(ca * min(1, seconds / t) for t, ca in lumps.values()))
        self.assertAlmostEqual(alone / float(r["handbook_part_alone_m3_per_s"]), 1, delta=1e-4)
        self.assertAlmostEqual(shared / float(r["handbook_part_and_share_m3_per_s"]), 1, delta=1e-4)

    def test_the_shares_of_subareas_make_the_whole(self):
        for r in self.peaks:
            rows = [s for s in self.tables["subareas"] if (s["point"], s["return_period_years"]) == (r["point"], r["return_period_years"])]
            for column in ("share_of_area_percent", "share_of_runoff_percent", "share_of_peak_window_percent"):
                self.assertAlmostEqual(sum(float(s[column]) for s in rows), 100, delta=0.02)
            most = max(rows, key=lambda s: float(s["share_of_peak_window_percent"]))
            self.assertTrue(r["peak_subareas"].startswith(most["subarea"]), r["peak_subareas"])
            self.assertEqual(int(r["subareas_in_window"]), sum(float(s["share_of_peak_window_percent"]) > 0 for s in rows))

    def test_result_json_and_the_table_of_outlets_say_the_same(self):
        by_name = {o["name"]: o for o in self.tables["json"]["outlets"]}
        for r in self.peaks:
            said = next(p for p in by_name[r["point"]]["peaks"] if p["return_period"] == int(r["return_period_years"]))
            self.assertAlmostEqual(said["partial_area"]["flow_m3_per_s"] / float(r["peak_m3_per_s"]), 1, delta=1e-4)
            self.assertAlmostEqual(said["whole_area"]["flow_m3_per_s"] / float(r["whole_area_peak_m3_per_s"]), 1, delta=1e-4)
        for o in self.tables["outlets"]:
            row = next(r for r in self.peaks if r["point"] == o["name"] and r["return_period_years"] == "10")
            self.assertEqual(o["peak_m3_per_s"], row["peak_m3_per_s"])

    def test_the_command_says_the_peak_of_the_main_outlet(self):
        row = next(r for r in self.peaks if r["point"] == "Weir" and r["return_period_years"] == "10")
        self.assertIn(f"Its peak of 10 years is {float(row['peak_m3_per_s']):.3g} m3/s", self.tables["said"])

    def test_a_large_catchment_and_a_cut_coefficient_are_told(self):
        notices = {(r["notice"], r["point"]) for r in self.tables["review"]}
        self.assertIn(("rational-area", "Weir"), notices)        # 94 ha, more than 200 ac
        self.assertNotIn(("rational-area", "School inlet"), notices)
        self.assertIn(("coefficient-cut", "Weir"), notices)      # 1.25 · 0.9 in 100 years

    def test_what_is_noticed_of_a_peak_says_how_much_at_which_return_period_and_where(self):
        outlets = {o["name"]: o for o in self.tables["outlets"]}
        peaks = {(r["point"], r["return_period_years"]): r for r in self.tables["peaks"]}
        cuts = [r for r in self.tables["review"] if r["notice"] == "coefficient-cut"]
        self.assertGreater(len(cuts), 3)
        for r in cuts:
            self.assertGreater(float(r["value"]), float(r["threshold"]))
            self.assertEqual((float(r["threshold"]), r["return_period_years"]), (1, "100"))
            self.assertIn(float(r["value"]), (1.125, 1.25))   # 1.25 times 0.9 of streets, or 1 of a pond
            self.assertIn("100 years", r["text"])
            mean, uncut = re.search(r"the mean of its catchment is ([\d.]+), and would be ([\d.]+) without", r["text"]).groups()
            self.assertLess(float(mean), float(uncut))
            self.assertAlmostEqual(float(mean) / float(peaks[r["point"], "100"]["runoff_coefficient_with_factor"]), 1, delta=5e-3)
        for r in self.tables["review"]:
            if r["notice"] in ("coefficient-cut", "rational-area", "time-below-least"):
                self.assertEqual((r["x"], r["y"]), (outlets[r["point"]]["x"], outlets[r["point"]]["y"]))



class PeakLaws(CommandTest):
    def test_a_point_fewer_changes_no_time_and_no_peak_of_the_others(self):
        columns = ("time_of_concentration_min", "whole_area_peak_m3_per_s", "peak_m3_per_s", "peak_duration_min",
                   "peak_unbinned_at_least_m3_per_s", "peak_unbinned_at_most_m3_per_s", "runoff_coefficient_with_factor")
        all_points = {(r["point"], r["return_period_years"]): r for r in AS_IT_STANDS["peaks"]}
        fewer = demo_with_peaks(self.folder, leave_out=("Mill bridge", "Spring wood ford"))["peaks"]
        self.assertEqual(len(fewer), len(all_points) - 6)
        for r in fewer:
            for column in columns:
                self.assertEqual(r[column], all_points[r["point"], r["return_period_years"]][column], (r["point"], column))

    def test_more_rain_makes_no_less_flow(self):
        before = AS_IT_STANDS["peaks"]
        after = demo_with_peaks(self.folder, rain_factor=1.1)["peaks"]
        for a, b in zip(before, after):
            self.assertGreater(float(b["peak_m3_per_s"]), float(a["peak_m3_per_s"]))

    def test_the_rounded_conversion_is_that_of_acres_and_inches(self):
        exact = AS_IT_STANDS["peaks"]
        rounded = demo_with_peaks(self.folder, peaks='conversion = "rounded"\nfrequency_factors = "none"')["peaks"]
        for a, b in zip(exact, rounded):
            if a["return_period_years"] != "100":
                self.assertAlmostEqual(float(a["peak_m3_per_s"]) / float(b["peak_m3_per_s"]), 43560 / 43200, delta=1e-4)
            self.assertEqual(float(b["frequency_factor"]), 1)


class KinematicPeaks(CommandTest):
    def test_every_peak_is_rebuilt_from_the_parts_of_the_handover_table(self):
        tables = demo_with_peaks(self.folder, sheet="kinematic")
        subareas = {r["subarea"]: r for r in tables["handover"]}

        def parts(text):
            return [tuple(map(float, part.split(" + s * "))) for part in text.split("; ")]

        for r in tables["peaks"]:
            years = int(r["return_period_years"])
            minutes = float(r["time_of_concentration_min"])
            s = (intensity(years, minutes) / 3.6e6) ** -0.4   # i in m/s
            times, runoff = [], 0.0
            for name in subareas:
                fixed, storm, at = 0.0, 0.0, name
                while at != r["point"] and subareas[at]["next_point"]:
                    way = parts(subareas[at]["way_time_parts_s"])[0]
                    fixed, storm, at = fixed + way[0], storm + way[1], subareas[at]["next_point"]
                if at != r["point"]:
                    continue
                times += [b + fixed + s * (a + storm) for b, a in parts(subareas[name]["own_time_parts_s"])]
                runoff += float(subareas[name][f"ca_{years}yr_ha"])
            # The rounds stop where two times differ by 0.1 s.
            self.assertAlmostEqual(max(times) / 60, minutes, delta=0.1 / 60)
            self.assertAlmostEqual(runoff * intensity(years, minutes) / 360 / float(r["whole_area_peak_m3_per_s"]), 1, delta=1e-4)
            self.assertGreaterEqual(float(r["peak_m3_per_s"]), float(r["whole_area_peak_m3_per_s"]))


class ShortTimes(CommandTest):
    def test_a_time_below_the_least_is_told_with_its_storm_and_place(self):
        tables = demo_with_peaks(self.folder, peaks='least_time = "30 min"')
        short = {r["point"]: r for r in tables["review"] if r["notice"] == "time-below-least"}
        times = {r["point"]: float(r["time_of_concentration_min"]) for r in tables["peaks"] if r["return_period_years"] == "2"}
        self.assertEqual(short.keys(), {point for point, minutes in times.items() if minutes < 30})
        self.assertGreater(len(short), 2)
        outlets = {o["name"]: o for o in tables["outlets"]}
        for point, r in short.items():
            self.assertAlmostEqual(float(r["value"]), times[point], delta=1e-3)
            self.assertEqual((float(r["threshold"]), r["return_period_years"]), (30, "2"))
            self.assertEqual((r["x"], r["y"]), (outlets[point]["x"], outlets[point]["y"]))


class WithoutPeaks(CommandTest):
    def test_a_book_without_coefficients_gives_a_notice_and_no_table(self):
        words = self.small_study()
        (self.folder / "rain.csv").write_text("duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n5,4.8,6.9\n1440,0.13,0.2\n")
        self.done("run", *words, "--rain-file", "rain.csv")
        self.assertIn("no-peaks", [n["notice"] for n in self.result()["notices"]])
        told = [s for s in self.result()["headlines"] if "o peak flows were computed, since no class of the cover book has a runoff coefficient" in s]
        self.assertEqual(len(told), 1)
        self.assertRegex(told[0], r"[^.]\.$")   # one full stop
        text = next(n["text"] for n in self.result()["notices"] if n["notice"] == "no-peaks")
        self.assertTrue(told[0].endswith(text))
        sheet = " ".join(self.done("explain", "result", self.result()["outlets"][0]["name"]).split())
        self.assertIn("Peak flow --------- " + text + " ", sheet)
        self.assertFalse((self.folder / "result/tables/peaks.csv").exists())
        self.assertTrue((self.folder / "result/tables/handover.csv").exists())

    def test_findings_say_at_how_many_points_there_is_no_peak_and_why(self):
        subprocess.run([COMMAND, "demo", self.folder / "town"], check=True, capture_output=True)
        study = (self.folder / "town/study-with-peaks.toml").read_text().split("[output]")[0]
        study = study[:study.index("formula = ")] + 'file = "short.csv"\n' + study[study.index("return_periods"):]
        (self.folder / "town/short.csv").write_text("duration_min,intensity_2yr_mm_h,intensity_100yr_mm_h\n5,110,260\n30,45,110\n")
        (self.folder / "town/short.toml").write_text(study)
        said = self.done("run", "town/short.toml", "--out", "short")
        rows = table(self.folder / "short/tables/peaks.csv")
        lacking = {r["point"] for r in rows if r["why_not"]}
        self.assertTrue(0 < len(lacking) < 11)
        sentence = next(s for s in self.result("short")["headlines"] if s.startswith("No peak flow"))
        self.assertRegex(sentence, f"at {len(lacking)} of 11 points .column why_not of tables/peaks.csv.: at {len(lacking)} the rain's durations end "
                                   "before the time of concentration, which is up to [0-9.]+ (min|h)")
        self.assertIn(sentence, " ".join(said.split()))

    def test_findings_name_what_coefficients_are_missing_where_no_point_has_a_peak(self):
        self.ground()
        self.cover()
        self.book("code,name,n_typical,shallow_type,c,source\n1,Grass,0.24,grassed waterway,,test\n2,Street,0.011,pavement,0.9,test\n")
        (self.folder / "rain.csv").write_text("duration_min,intensity_10yr_in_h\n5,6.9\n1440,0.2\n")
        self.done("run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "90 mm", "--rain-file", "rain.csv")
        found = self.result()["headlines"]
        self.assertTrue(any("the cover book has no c or land_use for Grass" in s for s in found if s.startswith("No peak flow")), found)
        self.assertFalse([s for s in found if "At no point does a part" in s], found)

    def test_peaks_without_rain_by_duration_are_refused(self):
        self.ground()
        self.cover()
        self.book()
        (self.folder / "study.toml").write_text('[terrain]\nelevation = "dem.tif"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n'
                                                '[rain]\ntwo_year_24_hour = "90 mm"\n[peaks]\nconversion = "rounded"\n')
        self.refused(1, "run", "study.toml", says=("something under [peaks]", "rain by duration"))


if __name__ == "__main__":
    unittest.main()
