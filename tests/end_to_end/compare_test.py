#!/usr/bin/python3
"""Two results side by side: what changes at each point and in each cell, what gets worse, and what cannot be compared."""
import csv
import json
import shutil
import unittest

import numpy as np
from osgeo import gdal

from support import CommandTest, hills, table, write_points, write_raster

BOOK = """code,name,n_typical,shallow_type,source
1,Wood,0.4,contour crops or woodland,test
2,Street,0.011,pavement,test
"""
STUDY = """report_units = "si"
[terrain]
elevation = "dem.tif"
[surface]
cover = "{cover}"
book = "book.csv"
[points]
{points}
[rain]
two_year_24_hour = "80 mm"
[output]
folder = "{folder}"
"""


class TwoResults(CommandTest):
    """Wood before; a street over the eastern half after."""

    def setUp(self):
        super().setUp()
        cover = np.ones((40, 50), np.uint8)
        write_raster(self.folder / "dem.tif", hills())
        write_raster(self.folder / "wood.tif", cover, kind=gdal.GDT_Byte, unit=None)
        cover[:, 25:] = 2
        write_raster(self.folder / "street.tif", cover, kind=gdal.GDT_Byte, unit=None)
        (self.folder / "book.csv").write_text(BOOK)
        self.run_study("before", "wood.tif")
        self.run_study("after", "street.tif")

    def run_study(self, folder, cover, points='auto_area = "3 %"', units="si", more=""):
        (self.folder / f"{folder}.toml").write_text(
            STUDY.format(cover=cover, folder=folder, points=points).replace('"si"', f'"{units}"') + more)
        self.repeated("run", f"{folder}.toml", "-q")

    def times(self, folder):
        return {row["name"]: float(row["time_of_concentration_min"]) for row in table(self.folder / folder / "tables/outlets.csv")}

    def test_a_result_beside_itself_changes_nothing_and_ends_with_status_0(self):
        run = self.rillclock("compare", "before", "before", "--json")
        self.assertEqual(run.returncode, 0, run.stderr)
        comparison = json.loads(run.stdout)
        self.assertEqual(comparison["worse"], [])
        for point in comparison["points"]:
            self.assertEqual(point["time_min"]["change"], 0)
            self.assertTrue(point["same_head"])
            self.assertTrue(point["same_path"])
        self.assertIn("All governing paths run through the same cells.", self.done("compare", "before", "before"))

    def test_points_whose_time_becomes_shorter_are_worse_and_the_status_is_4(self):
        run = self.rillclock("compare", "before", "after", "--json")
        self.assertEqual(run.returncode, 4, run.stderr)
        before, after = self.times("before"), self.times("after")
        shorter = {name: 1 - after[name] / before[name] for name in before if 1 - after[name] / before[name] > 0.05}
        self.assertGreater(len(shorter), 1)
        comparison = json.loads(run.stdout)
        self.assertEqual(comparison["worse"], sorted(shorter, key=shorter.get, reverse=True))
        for point in comparison["points"]:
            self.assertAlmostEqual(point["time_min"]["change"], after[point["name"]] - before[point["name"]], places=6)

    def test_the_other_way_round_nothing_gets_worse(self):
        run = self.rillclock("compare", "after", "before")
        self.assertEqual(run.returncode, 0, run.stdout + run.stderr)
        self.assertTrue(run.stdout.startswith("None of "))

    def test_the_tolerance_decides(self):
        run = self.rillclock("compare", "before", "after", "--tolerance", "99 %")
        self.assertEqual(run.returncode, 0, run.stdout + run.stderr)
        self.assertIn("more than 99 %", run.stdout)

    def test_the_text_names_the_worst_first(self):
        run = self.rillclock("compare", "before", "after")
        self.assertEqual(run.returncode, 4)
        before, after = self.times("before"), self.times("after")
        worst = max(before, key=lambda name: 1 - after[name] / before[name])
        self.assertIn(f"the worst is '{worst}'", run.stdout)
        self.assertTrue(run.stdout.splitlines()[3].startswith(worst))

    def test_the_raster_is_after_less_before_in_every_cell(self):
        run = self.rillclock("compare", "before", "after", "--out", "change")
        self.assertEqual(run.returncode, 4, run.stderr)
        values = {}
        for name in ("before/rasters/travel_time.tif", "after/rasters/travel_time.tif", "change/rasters/travel_time_change.tif"):
            file = gdal.Open(str(self.folder / name))
            values[name.split("/")[0]] = file.ReadAsArray().astype(float)
        # Float32: half a unit in the last place of minutes below 64.
        np.testing.assert_allclose(values["change"], values["after"] - values["before"], atol=4e-6)
        self.assertLess(values["change"].min(), -0.1)
        rows = table(self.folder / "change/tables/comparison.csv")
        self.assertEqual(rows[0]["worse"], "yes")
        self.assertEqual(len(rows), len(self.times("before")))
        self.assert_nothing_left()

    def test_peaks_count_where_both_results_have_them(self):
        for folder, factor in (("before", 1.0), ("after", 1.2)):
            with open(self.folder / folder / "tables/peaks.csv", "w", encoding="utf-8", newline="") as file:
                writer = csv.writer(file)
                writer.writerow(["point", "return_period_years", "runoff_coefficient_with_factor", "whole_area_peak_m3_per_s", "peak_m3_per_s"])
                for number, name in enumerate(self.times("before")):
                    writer.writerow([name, 10, 0.5 * factor, 1.0, 2.0 * (factor if number == 0 else 1.0)])
        run = self.rillclock("compare", "before", "after", "--json", "--out", "change")
        self.assertEqual(run.returncode, 4, run.stderr)
        first = json.loads(run.stdout)["points"][0]
        self.assertEqual(first["peaks"][0]["peak_m3_per_s"], {"before": 2, "after": 2.4, "change": 0.4, "change_percent": 20})
        self.assertEqual(first["peaks"][0]["runoff_coefficient"]["change"], 0.1)
        rows = table(self.folder / "change/tables/compared_peaks.csv")
        self.assertEqual(rows[0]["peak_change_percent"], "20.000")

    def write_peaks(self, folder, figures):
        """Whole-area and partial-area peak of each point and return period."""
        with open(self.folder / folder / "tables/peaks.csv", "w", encoding="utf-8", newline="") as file:
            writer = csv.writer(file)
            writer.writerow(["point", "return_period_years", "whole_area_peak_m3_per_s", "peak_m3_per_s"])
            writer.writerows(figures)

    def test_a_whole_area_peak_alone_makes_a_point_worse_and_the_rows_that_grow_most_come_first(self):
        names = sorted(self.times("before"), reverse=True)[:3]
        self.write_peaks("before", [(name, years, 1.0, 2.0) for name in names for years in (2, 10)])
        shutil.copytree(self.folder / "before", self.folder / "copy")
        grown = {(names[1], 10): (1.3, 2.0), (names[2], 2): (1.0, 2.2), (names[0], 2): (0.8, 1.9)}
        self.write_peaks("copy", [(name, years, *grown.get((name, years), (1.0, 2.0))) for name in names for years in (2, 10)])
        run = self.rillclock("compare", "before", "copy", "--json", "--out", "change")
        self.assertEqual(run.returncode, 4, run.stderr)
        self.assertEqual(json.loads(run.stdout)["worse"], [names[1], names[2]])
        rows = table(self.folder / "change/tables/compared_peaks.csv")
        self.assertEqual([(r["point"], r["return_period_years"]) for r in rows[:2]], [(names[1], "10"), (names[2], "2")])
        self.assertEqual((rows[-1]["point"], rows[-1]["whole_area_peak_change_percent"]), (names[0], "-20.000"))
        self.assertEqual((rows[0]["whole_area_peak_change_percent"], rows[0]["peak_change_percent"]), ("30.000", "0.000"))

    def own_points(self):
        """The points of the results as a file, to which pipes and overrides may belong; what names it in a study."""
        rows = table(self.folder / "before/tables/outlets.csv")
        write_points(self.folder / "own.geojson", [(r["name"], (float(r["x"]), float(r["y"]))) for r in rows])
        return 'file = "own.geojson"\nname = "name"'

    def test_a_time_that_only_an_override_or_a_pipe_changes_is_compared(self):
        """The ground is the same to the last digit; a stated time is half of it, and a pipe leads one point's water to another."""
        points = self.own_points()
        self.run_study("own", "wood.tif", points=points)
        times = self.times("own")
        name = max(times, key=times.get)
        inlet = next(other for other in times if other != name)
        (self.folder / "overrides.csv").write_text(f"point,time\n{name},{times[name] / 2} min\n")
        (self.folder / "pipes.csv").write_text(f"from,to,length,diameter,n,slope\n{name},{inlet},900 m,1 m,0.013,0.001\n")
        self.run_study("stated", "wood.tif", points=points, more='[timing]\noverrides = "overrides.csv"\n')
        self.run_study("piped", "wood.tif", points=points + '\npipes = "pipes.csv"')
        run = self.rillclock("compare", "own", "stated", "--json", "--out", "change")
        self.assertEqual(run.returncode, 4, run.stdout + run.stderr)
        said = json.loads(run.stdout)
        self.assertEqual(said["worse"], [name])
        point = next(p for p in said["points"] if p["name"] == name)
        self.assertEqual((point["ground_time_min"]["change"], round(point["time_min"]["change_percent"])), (0, -50))
        row = table(self.folder / "change/tables/comparison.csv")[0]
        self.assertEqual((row["point"], row["worse"], float(row["ground_time_change_min"])), (name, "yes", 0))
        self.assertEqual(self.rillclock("compare", "stated", "own").returncode, 0)
        later = json.loads(self.rillclock("compare", "own", "piped", "--json").stdout)["points"]
        end = next(p for p in later if p["name"] == inlet)
        self.assertEqual((end["ground_time_min"]["change"], end["time_min"]["change"] > 0), (0, True))

    def test_a_scenario_of_an_override_alone_is_seen_by_its_comparison(self):
        points, times = self.own_points(), self.times("before")
        name = max(times, key=times.get)
        (self.folder / "overrides.csv").write_text(f"point,time\n{name},{times[name] / 2} min\n")
        study = self.folder / "both.toml"
        study.write_text(STUDY.format(cover="wood.tif", folder="both", points=points) + '[scenario.known]\ntiming.overrides = "overrides.csv"\n')
        said = self.done("run", study)
        self.assertIn(f"the worst is '{name}'", said)
        rows = table(self.folder / "both/comparison-known/tables/comparison.csv")
        self.assertEqual((rows[0]["point"], rows[0]["worse"]), (name, "yes"))
        self.assertEqual([r["worse"] for r in rows[1:]], ["no"] * (len(rows) - 1))

    def test_a_result_without_the_times_that_are_compared_is_refused(self):
        path = self.folder / "after/tables/outlets.csv"
        path.write_text(path.read_text().replace("time_used_min", "time_min"))
        self.refused(1, "compare", "before", "after", says=("time_used_min", "run its study again"))

    def test_what_is_no_result_is_refused(self):
        self.refused(1, "compare", "before", "nowhere", says=("no folder 'nowhere'",))
        (self.folder / "empty").mkdir()
        self.refused(1, "compare", "empty", "after", says=("'empty' is not a result", "outlets.csv"))

    def test_other_points_are_refused_by_name(self):
        write_points(self.folder / "points.geojson", [("Elsewhere", (500_050.0, 5_399_930.0))])
        self.run_study("other", "wood.tif", points='file = "points.geojson"\nname = "name"')
        self.refused(1, "compare", "before", "other", says=("not of the same points", "'Elsewhere'"))

    def test_other_units_are_refused(self):
        self.run_study("feet", "wood.tif", units="us")
        self.refused(1, "compare", "before", "feet", says=("different units", "report_units"))

    def test_other_grids_are_refused(self):
        write_raster(self.folder / "dem.tif", hills(), corner=(500_002.0, 5_400_000.0))
        write_raster(self.folder / "moved.tif", np.ones((40, 50), np.uint8), corner=(500_002.0, 5_400_000.0), kind=gdal.GDT_Byte, unit=None)
        self.run_study("moved", "moved.tif")
        # The ground is the same, so points where water leaves the data have the same names.
        self.refused(1, "compare", "before", "moved", says=("different grids", "40 rows × 50 columns"))

    def test_a_folder_that_is_there_is_kept_unless_it_may_be_replaced(self):
        self.assertEqual(self.rillclock("compare", "before", "after", "--out", "change").returncode, 4)
        self.refused(1, "compare", "before", "after", "--out", "change", says=("--replace",))
        self.assertEqual(self.rillclock("compare", "before", "after", "--out", "change", "--replace").returncode, 4)

    def test_a_tolerance_that_is_no_share_is_a_fault_of_the_command_line(self):
        self.refused(2, "compare", "before", "after", "--tolerance", "5 min", says=("--tolerance", "5 %"))


class TwoPaths(CommandTest):
    """One head, one point, and two ways round between them, of equal length and fall: which is taken hangs on a centimetre."""

    def run_with_dip(self, folder, column):
        ground = np.full((7, 5), -9999.0)
        ground[0, 2], ground[6, 2] = 110, 100
        for row in range(1, 6):
            ground[row, [1, 3]] = 110 - 1.5 * row
        ground[1, column] -= 0.01
        write_raster(self.folder / "dem.tif", ground, nodata=-9999.0)
        write_raster(self.folder / "cover.tif", np.ones((7, 5), np.uint8), kind=gdal.GDT_Byte, unit=None)
        (self.folder / "book.csv").write_text(BOOK)
        write_points(self.folder / "points.geojson", [("Foot", (500_005.0, 5_399_987.0))])
        (self.folder / f"{folder}.toml").write_text(STUDY.format(cover="cover.tif", folder=folder, points='file = "points.geojson"\nname = "name"'))
        self.done("run", f"{folder}.toml", "-q")

    def setUp(self):
        super().setUp()
        self.run_with_dip("left", 1)
        self.run_with_dip("right", 3)

    def compared(self, before, after):
        return json.loads(self.done("compare", before, after, "--json"))["points"][0]

    def test_other_cells_are_another_path_though_head_length_and_time_are_the_same(self):
        point = self.compared("left", "right")
        self.assertEqual((point["same_head"], point["path_length_m"]["change"], point["time_min"]["change"]), (True, 0, 0))
        self.assertIs(point["same_path"], False)
        self.assertIn("1 of 1 governing paths run through other cells than before.", self.done("compare", "left", "right", "--out", "change"))
        self.assertEqual(table(self.folder / "change/tables/comparison.csv")[0]["same_path"], "no")

    def test_a_result_without_digests_leaves_it_open_and_says_so(self):
        path = self.folder / "left/tables/outlets.csv"
        path.write_text(path.read_text().replace("governing_path_digest", "governing_path"))
        for before, after in (("left", "right"), ("right", "left"), ("left", "left")):
            self.assertIsNone(self.compared(before, after)["same_path"])
            self.assertIn("is not known: tables/outlets.csv of one of the results has no column governing_path_digest", self.done("compare", before, after))
        self.done("compare", "left", "right", "--out", "change")
        self.assertEqual(table(self.folder / "change/tables/comparison.csv")[0]["same_path"], "")


if __name__ == "__main__":
    unittest.main()
