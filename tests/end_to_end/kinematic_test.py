#!/usr/bin/python3
"""Sheet flow by the kinematic wave through the whole program: rain by duration, a storm for each point and return period, the iteration."""
import csv
import math
import subprocess
import sys
import unittest

import numpy as np
from osgeo import gdal

from support import CommandTest, FOOT, VERIFY, demo_town, table, write_points

RAIN = """duration_min,intensity_2yr_in_h,intensity_10yr_in_h,intensity_100yr_in_h
5,4.8,6.9,9.9
15,3.0,4.4,6.5
60,1.5,2.3,3.4
360,0.4,0.6,0.9
1440,0.13,0.2,0.3
"""
# Invented numbers in the layout of the server's files.
ATLAS14 = """Point precipitation frequency estimates (inches)
NOAA Atlas 14 Volume 99 Version 1
Data type: Precipitation depth
Time series type: Partial duration
Project area: Nowhere States
Location name (ESRI Maps): None
Station Name: None
Latitude: 12.5 Degree
Longitude: -34.5 Degree
Elevation (USGS): None None


PRECIPITATION FREQUENCY ESTIMATES
by duration for ARI (years):, 1,2,10
5-min:, 0.30,0.40,0.60
60-min:, 1.00,1.50,2.40
24-hr:, 2.00,3.00,5.00

Date/time (GMT):  Mon Jan  1 00:00:00 2024
pyRunTime:  0.01
"""
BOOK = """code,name,n_typical,shallow_type,source
1,Even ground,{n},pavement,test
"""
CHICAGO = "i[in/h] = 94.9 / (t[min]^0.88 + 9.04)"
STUDY = """report_units = "{units}"
[terrain]
elevation = "dem.tif"
vertical_step = "0.1 mm"
[surface]
cover = "cover.tif"
book = "book.csv"
[points]
file = "points.geojson"
move_within = "0.1 m"
[rain]
{rain}
[timing]
sheet = "kinematic"
sheet_limit = "{limit}"
sheet_limit_rule = "stated"
channel_from = "mapped only"
{timing}
[peaks]
least_time = "{least}"
"""
KINEMATIC_S = {"m": 0.933 * 60 / FOOT ** 0.6 * 25.4 ** 0.4, "ft": 0.933 * 60}


class Plane(CommandTest):
    """Three strips side by side that fall to the south; the point is the last cell of the middle one."""

    def run_plane(self, n=0.011, slope=0.02, length_ft=300, cell=0.75, rain=f'formula = {{ 10 = "{CHICAGO}" }}', least="0 min",
                  timing="", units="us"):
        cells = round(length_ft * FOOT / cell)
        z = 1000 - slope * cell * np.arange(cells + 1)
        self.ground(values=np.tile(z[:, None], (1, 3)), cell=cell)
        self.cover(values=np.ones((len(z), 3), np.uint8), cell=cell)
        self.book(BOOK.format(n=n))
        write_points(self.folder / "points.geojson", [("end", (500_000 + 1.5 * cell, 5_400_000 - (len(z) - 0.5) * cell))])
        (self.folder / "rain.csv").write_text(RAIN)
        (self.folder / "study.toml").write_text(STUDY.format(rain=rain, timing=timing, least=least, units=units,
                                                             limit=f"{2 * length_ft} ft"))
        self.done("run", "study.toml", "--replace")
        outlet = self.result()["outlets"][0]
        return outlet, cells * cell / FOOT

    CONSTANT = 'formula = { 10 = "i[in/h] = 5 / (t[min] + 0)^0.000001" }'

    def test_twice_the_roughness_takes_two_to_the_power_of_six_tenths(self):
        once, _ = self.run_plane(n=0.1, rain=self.CONSTANT, least="5 min")
        twice, _ = self.run_plane(n=0.2, rain=self.CONSTANT, least="5 min")
        self.assertAlmostEqual(twice["time_of_concentration_s"] / once["time_of_concentration_s"], 2 ** 0.6, places=4)

    def test_four_times_the_relief_divides_by_four_to_the_power_of_three_tenths(self):
        once, _ = self.run_plane(n=0.1, slope=0.01, rain=self.CONSTANT, least="5 min")
        four, _ = self.run_plane(n=0.1, slope=0.04, rain=self.CONSTANT, least="5 min")
        self.assertAlmostEqual(once["time_of_concentration_s"] / four["time_of_concentration_s"], 4 ** 0.3, places=4)

    def test_on_a_plane_every_slope_of_the_catchment_is_that_of_the_plane(self):
        outlet, _ = self.run_plane(slope=0.02)
        measures = outlet["methods"]["measures"]
        for name in ("path_slope", "equal_area_slope", "land_slope", "overland_slope"):
            self.assertAlmostEqual(measures[name], 0.02, places=5, msg=name)

    def test_the_iteration_over_asphalt_is_the_one_done_by_hand(self):
        """n 0.011, 300 ft at 0.02 with the ten-year rain of Chicago, begun at 5 min: 2.802, 2.656, 2.646, 2.645 min at 8.33 in/h. The
        grid gives 300.2 ft, so each time is 0.03 % longer."""
        outlet, length = self.run_plane()
        self.assertAlmostEqual(length, 300, delta=0.3)
        rounds = [row["computed_min"] for row in outlet["storms"][0]["iteration"]]
        for found, expected in zip(rounds, (2.802, 2.656, 2.646, 2.645)):
            self.assertAlmostEqual(found, expected, delta=0.002)
        self.assertAlmostEqual(outlet["time_of_concentration_min"], 2.645, delta=0.003)
        self.assertAlmostEqual(outlet["storms"][0]["intensity_mm_per_h"] / 25.4, 8.33, delta=0.01)

    def test_the_iteration_over_grass_settles_where_it_does_by_hand(self):
        outlet, _ = self.run_plane(n=0.24, slope=0.01, length_ft=100, cell=0.5)
        self.assertAlmostEqual(outlet["time_of_concentration_min"], 13.034, delta=0.02)
        self.assertAlmostEqual(outlet["storms"][0]["intensity_mm_per_h"] / 25.4, 5.10, delta=0.01)

    def intensity(self, inches_per_hour):
        """Rain of one intensity, as good as any formula with a power can have it: 3e-6 of it at 5 min."""
        return f'formula = {{ 10 = "i[in/h] = {inches_per_hour} / (t[min] + 0)^0.000001" }}'

    def test_sheet_flow_on_pavement_takes_the_time_of_the_example(self):
        """Charbeneau, CE 365K (University of Texas), example 1: n 0.015, slope 0.01, 200 ft, 10 in/h (inputs as printed; answers by
        arithmetic: 2.86 min with 0.933, 2.88 with 0.94). Cells of 2.5 ft, so the length is that of the example."""
        for constant, expected in ((0.933, "2.86"), (0.94, "2.88")):
            outlet, length = self.run_plane(n=0.015, slope=0.01, length_ft=200, cell=2.5 * FOOT, rain=self.intensity(10), least="5 min",
                                            timing=f"sheet_constant = {constant}")
            self.assertAlmostEqual(length, 200, places=6)
            self.assertEqual(f"{outlet['time_of_concentration_min']:.2f}", expected)

    def test_one_plot_takes_the_times_of_the_example_under_four_intensities(self):
        """The plot of Troy University's GEM 4409: n 0.011, slope 0.02, 300 ft; with 0.94 at 2, 4, 6 and 8 in/h by arithmetic."""
        for inches, expected in ((2, "4.72"), (4, "3.57"), (6, "3.04"), (8, "2.71")):
            outlet, _ = self.run_plane(cell=2.5 * FOOT, rain=self.intensity(inches), least="5 min", timing="sheet_constant = 0.94")
            self.assertEqual(f"{outlet['time_of_concentration_min']:.2f}", expected)

    def test_the_other_printed_constant_is_in_proportion(self):
        one, _ = self.run_plane(n=0.1, rain=self.CONSTANT, least="5 min")
        other, _ = self.run_plane(n=0.1, rain=self.CONSTANT, least="5 min", timing="sheet_constant = 0.94")
        self.assertAlmostEqual(other["time_of_concentration_s"] / one["time_of_concentration_s"], 0.94 / 0.933, places=5)

    def test_below_the_least_time_the_intensity_is_that_of_the_least_time_and_the_time_stays_its_own(self):
        outlet, length = self.run_plane(least="10 min")
        intensity = 94.9 / (10 ** 0.88 + 9.04)
        self.assertAlmostEqual(outlet["storms"][0]["intensity_mm_per_h"] / 25.4, intensity, places=4)
        expected = 0.933 * (0.011 * length / math.sqrt(0.02)) ** 0.6 / intensity ** 0.4
        self.assertAlmostEqual(outlet["time_of_concentration_min"] / expected, 1, delta=1e-3)

    def test_units_of_the_report_change_no_time(self):
        us, _ = self.run_plane(units="us")
        si, _ = self.run_plane(units="si")
        self.assertEqual(us, si)


class Town(CommandTest):
    def town(self, change=lambda text: text, name="kinematic"):
        if not (self.folder / "town").exists():
            demo_town(self.folder / "town")
            (self.folder / "town/rain.csv").write_text(RAIN)
        study = (self.folder / "town/study.toml").read_text()
        study = study.replace('two_year_24_hour = "62 mm"', 'file = "rain.csv"\nreturn_periods = [2, 10, 100]')
        study = study.replace('sheet = "nrcs"', 'sheet = "kinematic"').replace('folder = "result"', f'folder = "{name}"')
        (self.folder / f"town/{name}.toml").write_text(change(study))
        self.said = self.repeated("run", f"town/{name}.toml", "--replace").stderr
        return self.result(f"town/{name}")["outlets"]

    @staticmethod
    def intensity_in_h(minutes, column):
        rows = [[float(field) for field in row] for row in list(csv.reader(RAIN.splitlines()))[1:]]
        times, values = [row[0] for row in rows], [row[column] for row in rows]
        return float(np.exp(np.interp(np.log(max(minutes, 5)), np.log(times), np.log(values))))

    def test_each_points_storm_lasts_as_long_as_its_own_time(self):
        self.town()
        for row in table(self.folder / "town/kinematic/tables/storms.csv"):
            column = {"2": 1, "10": 2, "100": 3}[row["return_period_years"]]
            read = self.intensity_in_h(float(row["time_of_concentration_min"]), column) * 25.4
            self.assertAlmostEqual(float(row["intensity_mm_per_h"]) / read, 1, delta=1e-4, msg=row["point"])
            self.assertEqual(row["ended"], "settled")

    def test_every_round_of_the_iteration_is_in_its_table(self):
        outlets = {outlet["name"]: outlet for outlet in self.town()}
        rows = table(self.folder / "town/kinematic/tables/iterations.csv")
        self.assertEqual({row["return_period_years"] for row in rows}, {"2", "10", "100"})
        for before, after in zip(rows, rows[1:]):
            if after["round"] == "1":
                self.assertEqual(after["assumed_min"], "5.0000")
            else:
                self.assertEqual(before["computed_min"], after["assumed_min"])
        last = [row for row, after in zip(rows, rows[1:] + [{"round": "1"}]) if after["round"] == "1"]
        self.assertEqual(len(last), 3 * len(outlets))
        for row in last:
            self.assertLessEqual(abs(float(row["computed_min"]) - float(row["assumed_min"])) * 60, 0.1 + 0.01)
            column = {"2": 1, "10": 2, "100": 3}[row["return_period_years"]]
            self.assertAlmostEqual(float(row["intensity_mm_per_h"]) / self.intensity_in_h(float(row["assumed_min"]), column) / 25.4, 1,
                                   delta=1e-4)
            if row["return_period_years"] == "10":
                self.assertAlmostEqual(float(row["computed_min"]), outlets[row["point"]]["time_of_concentration_min"], places=3)

    def check_sheet_rows(self, units, unit, rain_unit):
        self.town(lambda text: text.replace('report_units = "si"', f'report_units = "{units}"'), units)
        rows = [row for row in table(self.folder / f"town/{units}/tables/segments.csv") if row["regime"] == "sheet"]
        self.assertGreater(len(rows), 10)
        for row in rows:
            growth = float(row[f"distance_to_{unit}"]) ** 0.6 - float(row[f"distance_from_{unit}"]) ** 0.6
            if growth == 0:
                continue
            surface = (float(row["n"]) / math.sqrt(float(row["slope_equivalent"]))) ** 0.6
            expected = KINEMATIC_S[unit] * surface * growth / float(row[f"rain_intensity_{rain_unit}_per_h"]) ** 0.4
            if float(row[f"length_{unit}"]) > 0:
                self.assertAlmostEqual(float(row["formula_time_s"]) / expected, 1, delta=1e-3, msg=row)

    def test_each_sheet_row_holds_in_metres_and_in_feet(self):
        self.check_sheet_rows("si", "m", "mm")
        self.check_sheet_rows("us", "ft", "in")

    def test_travel_time_is_under_each_last_points_own_storm(self):
        outlets = self.town()
        raster = gdal.Open(str(self.folder / "town/kinematic/rasters/travel_time.tif"))
        self.assertIn("10 years", raster.GetMetadata()["STORM"])
        self.assertIn("kinematic", raster.GetMetadata()["SHEET_FLOW"])
        owner = gdal.Open(str(self.folder / "town/kinematic/rasters/catchment.tif")).ReadAsArray()
        names = {outlet["name"]: outlet for outlet in outlets}

        def last(outlet):
            return outlet if outlet["next_point"] is None else last(names[outlet["next_point"]])
        times = raster.ReadAsArray()
        for end in (outlet for outlet in outlets if outlet["next_point"] is None):
            numbers = [outlet["number"] for outlet in outlets if last(outlet) is end]
            cells = np.sort(times[np.isin(owner, numbers)])
            self.assertAlmostEqual(float(cells[-1]), end["time_of_concentration_min"], places=4)
            for arrival in end["arrivals"]:
                rank = math.ceil(arrival["share_of_area"] * len(cells)) - 1
                self.assertAlmostEqual(arrival["time_min"], float(cells[rank]), delta=0.1)

    def test_the_rasters_storm_is_the_one_that_is_asked_for(self):
        outlets = self.town(lambda text: text.replace("[timing]", "[timing]\nraster_return_period = 100"))
        for outlet in outlets:
            self.assertEqual(outlet["time_of_concentration_s"], outlet["storms"][2]["time_s"])
            self.assertEqual(outlet["governing_path"]["head"], outlet["storms"][2]["governing_head"])
        raster = gdal.Open(str(self.folder / "town/kinematic/rasters/travel_time.tif"))
        self.assertIn("100 years", raster.GetMetadata()["STORM"])

    def test_a_storm_as_long_as_the_sheet_part_is_shorter_and_so_is_the_time(self):
        whole = {outlet["name"]: outlet for outlet in self.town()}
        part = self.town(lambda text: text.replace("[timing]", '[timing]\nstorm = "sheet part"'), "part")
        for outlet in part:
            storm = outlet["storms"][1]
            self.assertAlmostEqual(storm["iteration"][-1]["computed_min"] * 60, storm["sheet_time_s"], places=3)
            self.assertLess(outlet["time_of_concentration_s"], whole[outlet["name"]]["time_of_concentration_s"])

    def test_the_independent_verification_finds_the_same_times_under_each_points_storm(self):
        self.town()
        done = subprocess.run([sys.executable, "-B", VERIFY, self.folder / "town/kinematic", self.folder / "town/dem.tif", "--study",
                               self.folder / "town/kinematic.toml"], capture_output=True, text=True, check=False)
        self.assertEqual(done.returncode, 0, done.stdout + done.stderr)
        self.assertIn("travel time to Weir", done.stdout)

    def test_what_was_read_is_told(self):
        self.town()
        echo = "rain: rain.csv: table, intensity in in/h, 5 min to 24 h, 2, 10, 100 years"
        self.assertIn(echo, self.said)
        checked = self.done("check", "town/kinematic.toml")
        self.assertIn(echo, checked)
        self.assertIn("storms: 2, 10, 100 years; rasters, paths and segments are for 10", checked)
        rain = self.result("town/kinematic")["parameters"]["rain"]
        self.assertEqual((rain["kind"], rain["unit"], rain["first_duration_min"], rain["last_duration_min"]), ("table", "in/h", 5, 1440))
        self.assertIn("rain", {file["role"] for file in self.result("town/kinematic")["inputs"]})

    def test_two_runs_give_the_same_bytes(self):
        self.town()
        first = (self.folder / "town/kinematic/result.json").read_bytes()
        self.done("run", "town/kinematic.toml", "--out", "again")
        self.assertEqual((self.folder / "again/result.json").read_bytes(), first)

    def test_nrcs_times_do_not_change_where_rain_by_duration_is_added(self):
        demo_town(self.folder / "town")
        (self.folder / "rain.csv").write_text(RAIN)
        self.done("run", "town/study.toml")
        self.done("run", "town/study.toml", "--rain-file", "rain.csv", "--out", "with-rain")
        plain, more = self.result("town/result")["outlets"], self.result("with-rain")["outlets"]
        for outlet in plain + more:
            outlet.pop("methods")  # some of them need rain by duration
            for storm in outlet["network"]:
                storm.pop("return_period")
        for outlet in more:
            storm = outlet.pop("storms")[0]
            self.assertEqual(storm["time_s"], outlet["time_of_concentration_s"])
        self.assertEqual(plain, more)
        self.assertFalse((self.folder / "with-rain/tables/iterations.csv").exists())
        self.assertTrue((self.folder / "with-rain/tables/storms.csv").exists())

    def test_an_atlas_14_file_gives_rain_and_depth_and_its_echo_names_block_and_series(self):
        words = self.small_study()
        (self.folder / "atlas14.csv").write_text(ATLAS14)
        self.done("run", *words[:-2], "--rain-file", "atlas14.csv")
        parameters = self.result()["parameters"]
        self.assertEqual(parameters["sheet"]["rain_2_year_24_hour_mm"], 76.2)
        rain = parameters["rain"]
        self.assertEqual((rain["block"], rain["quantity"], rain["unit"], rain["series"]), ("estimate", "depth", "inches", "partial duration"))
        self.assertEqual((rain["source_return_periods"], rain["return_periods"]), ([1, 2, 10], [10]))
        self.assertIn("NOAA Atlas 14 point file", self.done("check", *words[:-2], "--rain-file", "atlas14.csv"))

    def test_the_2_year_24_hour_depth_comes_from_the_rain_file(self):
        words = self.small_study()
        (self.folder / "rain.csv").write_text(RAIN)
        self.done("run", *words[:-2], "--rain-file", "rain.csv")
        depth = self.result()["parameters"]["sheet"]["rain_2_year_24_hour_mm"]
        self.assertAlmostEqual(depth, 0.13 * 24 * 25.4, places=3)
        self.done("run", *words, "--rain-file", "rain.csv", "--replace")
        result = self.result()
        self.assertEqual(result["parameters"]["sheet"]["rain_2_year_24_hour_mm"], 90)
        self.assertIn("rain-depths-differ", {notice["notice"] for notice in result["notices"]})


class BadInput(CommandTest):
    def refuse(self, rain, says, timing="sheet = \"kinematic\"", text=RAIN):
        words = self.small_study()
        (self.folder / "rain.csv").write_text(text)
        (self.folder / "study.toml").write_text(f"[rain]\n{rain}\n[timing]\n{timing}\n")
        self.refused(1, "run", "study.toml", *words[:-2], says=says)

    def test_kinematic_sheet_flow_without_rain_by_duration(self):
        self.refuse('two_year_24_hour = "3 in"', ("study.toml", "needs rain by duration", "--rain-file"))

    def test_a_rain_file_that_is_not_there(self):
        self.refuse('file = "none.csv"', ("none.csv",))

    def test_rain_that_falls_with_the_return_period_is_told_with_its_line(self):
        self.refuse('file = "rain.csv"', ("rain.csv", "line 3"), text=RAIN.replace("15,3.0,4.4", "15,4.6,4.4"))

    def test_a_return_period_that_the_file_does_not_hold(self):
        self.refuse('file = "rain.csv"\nreturn_periods = [500]', ("rain.csv", "500 years"))

    def test_rain_that_ends_before_the_time_names_the_point(self):
        short = "duration_min,intensity_10yr_in_h\n1,4.8\n2,4.4\n"
        self.refuse('file = "rain.csv"', ("10 years at the point", "outlasts the rain", "rain.csv", "longest duration is 2 min"),
                    timing='sheet = "kinematic"\n[peaks]\nleast_time = "0 min"', text=short)

    def test_a_formula_without_units(self):
        self.refuse('formula = "i = 5 / (t + 10)"', ("rain.formula (study.toml, line 2, column 11)",))

    def test_statements_that_act_on_nothing(self):
        self.refuse('two_year_24_hour = "3 in"', ("kinematic sheet flow only",), timing='storm = "sheet part"')


if __name__ == "__main__":
    unittest.main()
