#!/usr/bin/python3
"""A printed storm sewer, line by line, as a study that the command runs: areas, times, coefficients, intensities and flows.

Source: Ponce, Engineering Hydrology, table 4-2 (after ASCE and WPCF), read in its source.
"""
import math
import shutil
import unittest

import numpy as np

from support import CommandTest, class_folder, table, write_points, write_raster

# Line by its upper end: the end below, length ft, slope %, diameter in, then as printed: area that enters there, area of all above, ac; time at
# the upper end and in the section, min; mean C; i in/h; Q ft3/s; velocity ft/s.
LINES = {
    "1-6": ("1-5", 400, 0.85, 12, 2.64, 2.64, 20.0, 1.4, 0.30, 3.7, 2.93, 4.6),
    "1-5": ("1-4", 400, 0.75, 18, 3.61, 6.25, 21.4, 1.2, 0.30, 3.6, 6.75, 5.6),
    "1-4": ("1-3", 400, 0.45, 24, 3.88, 10.13, 22.6, 1.2, 0.42, 3.4, 14.50, 5.6),
    "3-2": ("3-1", 400, 1.00, 15, 5.55, 5.55, 20.0, 1.1, 0.30, 3.7, 6.16, 5.9),
    "3-1": ("1-3", 400, 0.60, 24, 6.43, 11.98, 21.1, 1.1, 0.30, 3.6, 12.92, 6.1),
    "1-3": ("1-2", 400, 0.30, 36, 3.92, 26.03, 23.8, 1.1, 0.39, 3.3, 33.60, 5.9),
    "2-1": ("1-2", 400, 0.90, 12, 2.52, 2.52, 20.0, 1.4, 0.30, 3.7, 2.80, 4.7),
    "1-2": ("1-1", 400, 0.24, 42, 3.86, 32.41, 24.9, 1.1, 0.41, 3.2, 42.50, 5.9),
    "1-1": (None, 125, 0.30, 42, 5.44, 37.85, 26.0, None, 0.44, 3.2, 53.20, 6.6),
}
INLET_MIN = 20
CELL = math.sqrt(0.01 * 4046.8564224)   # a hundredth of an acre
COLUMNS = 20                            # of a subarea's rectangle
CORNER = (500_000.0, 5_400_000.0)

STUDY = """report_units = "us"
[terrain]
elevation = "dem.tif"
[surface]
cover = "cover.tif"
book = "book.csv"
[points]
file = "points.geojson"
name = "name"
pipes = "pipes.csv"
[rain]
file = "rain.csv"
two_year_24_hour = "3 in"
return_periods = [10]
[timing]
overrides = "overrides.csv"
pipe_flow = "design flow"
[peaks]
conversion = "rounded"
frequency_factors = "none"
[output]
subareas = "all"
"""


def own_coefficients():
    """Those of the single inlets are not printed: they are what makes the printed means."""
    own = {}
    for name, line in LINES.items():
        above = sum(l[5] * l[8] for l in LINES.values() if l[0] == name)
        own[name] = (line[5] * line[8] - above) / line[4]
    return own


def write_sewershed(folder):
    """Each subarea on a rectangle of its own between voids, falling to the corner where its inlet is; only pipes join them."""
    ground = np.full((40, len(LINES) * (COLUMNS + 1)), -9999.0)
    points = []
    for number, (name, line) in enumerate(LINES.items()):
        left = number * (COLUMNS + 1)
        for cell in range(round(100 * line[4])):
            row, column = divmod(cell, COLUMNS)
            ground[row, left + column] = 100 + 0.2 * (row + column)
        points.append((name, (CORNER[0] + (left + 0.5) * CELL, CORNER[1] - 0.5 * CELL)))
    write_raster(folder / "dem.tif", ground, cell=CELL, nodata=-9999.0)
    write_raster(folder / "cover.tif", np.ones(ground.shape, np.uint8), cell=CELL, kind=1, unit=None)
    write_points(folder / "points.geojson", points)
    (folder / "book.csv").write_text("code,name,n_typical,shallow_type,c,source\n1,Town,0.2,pavement,0.3,test\n")
    pipes = [f"{name},{line[0]},{line[1]} ft,{line[3]} in,0.013,{line[2] / 100:g}\n" for name, line in LINES.items() if line[0]]
    (folder / "pipes.csv").write_text("from,to,length,diameter,n,slope\n" + "".join(pipes))
    intensities = {line[6]: line[9] for line in LINES.values()}
    intensities[40.0] = 2.5  # beyond what is printed, where pipes make the last line's time a little longer
    rows = [f"{minutes},{i}\n" for minutes, i in sorted(intensities.items())]
    (folder / "rain.csv").write_text("duration_min,intensity_10yr_in_h\n" + "".join(rows))


def write_overrides(folder, with_sections):
    """Inlet times and coefficients, with the printed time of each section or with those of the pipes."""
    rows = [f"{name},{INLET_MIN} min,{f'{LINES[name][7]} min' if with_sections and LINES[name][0] else ''},{c!r}\n"
            for name, c in own_coefficients().items()]
    (folder / "overrides.csv").write_text("point,time,way_time,c\n" + "".join(rows))


class Sewer(CommandTest):
    @classmethod
    def setUpClass(cls):
        cls.kept = class_folder(cls, "sewer")
        write_sewershed(cls.kept)
        (cls.kept / "study.toml").write_text(STUDY)

    def tables(self, with_sections):
        shutil.copytree(self.kept, self.folder, dirs_exist_ok=True)
        write_overrides(self.folder, with_sections)
        self.repeated("run", "study.toml", "-q")
        return {name: {row[key]: row for row in table(self.folder / f"result/tables/{name}.csv")}
                for name, key in (("outlets", "name"), ("peaks", "point"), ("pipes", "from"))}

    def test_areas_and_every_time_are_the_printed_ones(self):
        tables = self.tables(with_sections=True)
        for name, line in LINES.items():
            self.assertAlmostEqual(float(tables["peaks"][name]["area_ac"]), line[5], places=4, msg=name)
            self.assertAlmostEqual(float(tables["peaks"][name]["time_of_concentration_min"]), line[6], places=3, msg=name)
            self.assertAlmostEqual(float(tables["outlets"][name]["time_used_min"]), line[6], places=3, msg=name)
            self.assertEqual(tables["outlets"][name]["network_next_point"], line[0] or "")
        self.assertEqual(tables["peaks"]["1-1"]["last_subarea"], "1-6")

    def test_every_coefficient_and_intensity_is_the_printed_one_and_every_flow_follows(self):
        peaks = self.tables(with_sections=True)["peaks"]
        for name, line in LINES.items():
            self.assertAlmostEqual(float(peaks[name]["runoff_coefficient_with_factor"]), line[8], places=5, msg=name)
            self.assertAlmostEqual(float(peaks[name]["intensity_in_per_h"]), line[9], places=3, msg=name)
            flow = float(peaks[name]["whole_area_peak_ft3_per_s"])
            self.assertAlmostEqual(flow, line[5] * line[8] * line[9], delta=2e-4 * flow, msg=name)
            # C and i are printed to two digits and C i to three: the flow to a hundredth of itself.
            self.assertAlmostEqual(flow / line[10], 1, delta=0.012, msg=name)
            self.assertGreaterEqual(float(peaks[name]["peak_ft3_per_s"]), flow)

    def test_pipes_timed_at_their_design_flow_give_the_printed_times_and_flows(self):
        """Velocities are printed from a chart to two digits, times to a tenth of a minute; n is not printed, and 0.013 fits."""
        tables = self.tables(with_sections=False)
        for name, line in LINES.items():
            self.assertAlmostEqual(float(tables["peaks"][name]["time_of_concentration_min"]), line[6], delta=0.25, msg=name)
            self.assertAlmostEqual(float(tables["peaks"][name]["whole_area_peak_ft3_per_s"]) / line[10], 1, delta=0.02, msg=name)
            if line[0]:
                pipe = tables["pipes"][name]
                self.assertAlmostEqual(float(pipe["velocity_ft_per_s"]) / line[11], 1, delta=0.06, msg=name)
                self.assertAlmostEqual(float(pipe["time_min"]), line[7], delta=0.1, msg=name)
                self.assertAlmostEqual(float(pipe["design_flow_ft3_per_s"]), float(tables["peaks"][name]["whole_area_peak_ft3_per_s"]), delta=0.01)


if __name__ == "__main__":
    unittest.main()
