#!/usr/bin/python3
"""The length of a path along the grid, as it is and without bias; and each choice of how steps are timed, verified independently on a whole town."""
import csv
import math
import subprocess
import sys
import unittest

import numpy as np

from step_rules_test import LEFT, NRCS, STUDY, TOP
from support import CommandTest, VERIFY, demo_town, table, write_points


class PathLength(CommandTest):
    STEPS = 300

    def run_line(self, degrees, surface=""):
        """A trough that falls to the point in a straight line, so many degrees off the north, with no ground but beside it."""
        angle, size = math.radians(degrees), self.STEPS + 8
        rows, columns = np.mgrid[0:size, 0:size].astype(float)
        along = (rows - 3) * math.cos(angle) + (columns - 3) * math.sin(angle)
        across = np.abs((columns - 3) * math.cos(angle) - (rows - 3) * math.sin(angle))
        length = self.STEPS / math.cos(angle)
        z = 100 - 0.05 * along + 0.06 * across  # no cell of the trough lies above the one before
        z[(across > 2) | (along < -0.1) | (along > length + 0.1)] = -9999
        self.ground(values=np.round(z, 6), cell=1.0, nodata=-9999)
        self.cover(values=np.ones(z.shape, np.uint8), cell=1.0)
        self.book()
        end = (round(3 + self.STEPS), round(3 + self.STEPS * math.tan(angle)))
        write_points(self.folder / "points.geojson", [("end", (LEFT + end[1] + 0.5, TOP - end[0] - 0.5))])
        (self.folder / "study.toml").write_text(STUDY.format(units="si", window="20 m", terrain="", surface=surface, rain=NRCS, timing=""))
        self.done("run", "study.toml", "--replace")
        row = table(self.folder / "result/tables/outlets.csv")[0]
        return {name: float(row[f"longest_{name}_m"]) / length for name in ("length", "grid_length", "unbiased_length")}

    def test_straight_lines_at_every_aspect_have_the_known_error_without_weights_and_the_least_with(self):
        """cos θ + (√2 − 1) sin θ, at most 1.0824 at 22.5°; times 0.96194 from 0.962 to 1.041. A cell or two at the ends, of 300, are the tolerance."""
        found = []
        for degrees in (0, 11.25, 22.5, 33.75, 45):
            lengths = self.run_line(degrees)
            curve = math.cos(math.radians(degrees)) + (math.sqrt(2) - 1) * math.sin(math.radians(degrees))
            self.assertAlmostEqual(lengths["length"], curve, delta=0.01, msg=degrees)
            self.assertEqual(lengths["length"], lengths["grid_length"])
            weighted = self.run_line(degrees, 'path_length = "unbiased"')
            self.assertAlmostEqual(weighted["length"] / lengths["length"], 0.96194, places=4)
            self.assertEqual(weighted["length"], weighted["unbiased_length"])
            self.assertLess(abs(weighted["length"] - 1), 0.045)
            found.append((lengths["length"] - 1, weighted["length"] - 1))
        plain, weighted = np.array(found).T
        self.assertAlmostEqual(max(plain), 0.0824, delta=0.006)
        self.assertAlmostEqual(max(weighted), -min(weighted), delta=0.01)  # over- and underestimates are alike

    def town(self, name, change):
        if not (self.folder / "town").exists():
            demo_town(self.folder / "town")
            (self.folder / "town/rain.csv").write_text("duration_min,intensity_10yr_in_h\n5,6.9\n15,4.4\n60,2.3\n1440,0.2\n")
            (self.folder / "town/chart.csv").write_text("slope_percent,hard_m_s,soft_m_s\n0.5,0.4,0.1\n4,1.3,0.35\n20,2.6,0.8\n")
            book = list(csv.reader((self.folder / "town/cover-book.csv").read_text().splitlines()))
            with open(self.folder / "town/cover-book.csv", "w", newline="", encoding="utf-8") as file:
                csv.writer(file).writerows([book[0] + ["chart_line", "c", "c_c"]] + [
                    row + ["" if row[0] == "7" else "hard" if row[0] in "128" else "soft", "0.9" if row[0] in "12" else "0.3",
                           "0.4" if row[0] in "3456" else ""] for row in book[1:]])
        study = change((self.folder / "town/study.toml").read_text()).replace('folder = "result"', f'folder = "{name}"')
        (self.folder / f"town/{name}.toml").write_text(study)
        self.repeated("run", f"town/{name}.toml")
        return {outlet["name"]: outlet for outlet in self.result(f"town/{name}")["outlets"]}

    def test_the_independent_verification_finds_the_same_times_under_each_choice(self):
        def kinematic(text):
            return text.replace('two_year_24_hour = "62 mm"', 'file = "rain.csv"').replace('sheet = "nrcs"', 'sheet = "kinematic"')
        choices = {"unbiased": lambda text: text.replace("[surface]", '[surface]\npath_length = "unbiased"'),
                   "runoff": lambda text: kinematic(text).replace("[timing]", '[timing]\nsheet_rain = "runoff"').replace(
                       "[surface]", '[surface]\nsoil_group = "C"'),
                   "chart": lambda text: text.replace('shallow = "by cover"', 'shallow = "chart"\nvelocity_chart = "chart.csv"'),
                   "region": lambda text: text.replace(', width = "2.70 m * km2^0.352", depth = "0.30 m * km2^0.213"', ', region = "Atlantic Plain"')}
        times = {}
        for name, change in choices.items():
            times[name] = self.town(name, change)["Weir"]["time_of_concentration_s"]
            done = subprocess.run([sys.executable, "-B", VERIFY, self.folder / "town" / name, self.folder / "town/dem.tif", "--study",
                                   self.folder / f"town/{name}.toml"], capture_output=True, text=True, check=False)
            self.assertEqual(done.returncode, 0, name + done.stdout + done.stderr)
            self.assertIn("travel time", done.stdout)
        self.assertEqual(len(set(times.values())), len(times))

    def test_slopes_of_the_land_and_areas_stay_as_they_are(self):
        plain = self.town("plain", lambda text: text)
        weighted = self.town("weighted", lambda text: text.replace("[surface]", '[surface]\npath_length = "unbiased"'))
        for name, outlet in plain.items():
            self.assertEqual(outlet["area_m2"], weighted[name]["area_m2"])
            self.assertAlmostEqual(weighted[name]["methods"]["measures"]["land_slope"] / outlet["methods"]["measures"]["land_slope"], 1, delta=1e-4)
            self.assertAlmostEqual(weighted[name]["longest_path"]["length_m"] / outlet["longest_path"]["length_m"], 0.96194, places=4)
        self.assertEqual(self.result("town/weighted")["parameters"]["path_length"], {"rule": "unbiased", "step_weight": 0.96194})


if __name__ == "__main__":
    unittest.main()
