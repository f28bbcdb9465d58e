#!/usr/bin/python3
"""Worked examples of handbooks, rebuilt as terrain and run through the command.

USDA SCS, Urban Hydrology for Small Watersheds, TR-55, 2nd ed., 1986, example 3-1 (values from memory): sheet flow over 100 ft of dense
grass (n 0.24) at slope 0.01, P2 = 3.6 in: 0.30 h; shallow concentrated flow over 1400 ft, unpaved, at slope 0.01: 0.24 h; a channel of
7300 ft, area 27 ft2, wetted perimeter 28.2 ft, slope 0.005, n 0.05: 0.99 h; together 1.53 h.
"""
import unittest

import numpy as np

from support import CommandTest, FOOT, table, write_points

SHEET_FT, SHALLOW_FT, CHANNEL_FT = 100, 1400, 7300
OVERLAND_SLOPE, CHANNEL_SLOPE = 0.01, 0.005
N_GRASS, N_CHANNEL, RADIUS_FT, RAIN_IN = 0.24, 0.05, 27 / 28.2, 3.6
BOOK = """code,name,n_typical,shallow_type,paved,source
1,Dense grass,0.24,grassed waterway,no,TR-55 example 3-1
"""
STUDY = """report_units = "us"
[terrain]
elevation = "dem.tif"
{vertical_step}
[surface]
cover = "cover.tif"
book = "book.csv"
[points]
file = "points.geojson"
move_within = "0.1 m"
[rain]
two_year_24_hour = "3.6 in"
[timing]
sheet_limit = "100 ft"
sheet_limit_rule = "stated"
shallow = "paved and unpaved"
channel_from = "{channel_from_m2:.3f} m2"
channel = {{ n = 0.05, hydraulic_radius = "{radius_ft:.12f} ft" }}
"""


class Example(CommandTest):
    def run_example(self, cell, vertical_step='vertical_step = "1 mm"'):
        """Three strips side by side that fall to the south, `cell` metres wide; the point is the last cell of the middle one."""
        overland = round((SHEET_FT + SHALLOW_FT) * FOOT / cell)
        channel = round(CHANNEL_FT * FOOT / cell)
        along = np.arange(overland + channel + 1) * cell
        turn = overland * cell
        z = 100 - OVERLAND_SLOPE * np.minimum(along, turn) - CHANNEL_SLOPE * np.maximum(along - turn, 0)
        self.ground(values=np.tile(z[:, None], (1, 3)), cell=cell)
        self.cover(values=np.ones((len(z), 3), np.uint8), cell=cell)
        self.book(BOOK)
        x, y = 500_000 + 1.5 * cell, 5_400_000 - (len(z) - 0.5) * cell
        write_points(self.folder / "points.geojson", [("end", (x, y))])
        (self.folder / "study.toml").write_text(STUDY.format(
            vertical_step=vertical_step, channel_from_m2=(overland + 1) * cell ** 2 - 0.001, radius_ft=RADIUS_FT))
        self.done("run", "study.toml", "--replace")
        hours = {}
        for row in table(self.folder / "result/tables/segments.csv"):
            if row["path"] == "governing":
                hours[row["regime"]] = hours.get(row["regime"], 0.0) + float(row["time_s"]) / 3600
        return hours, turn / FOOT, channel * cell / FOOT, self.result()["outlets"][0]["time_of_concentration_s"] / 3600

    def test_it_gives_the_printed_digits_at_any_cell_size(self):
        for cell in (1, 2, 5):
            hours, _, _, total = self.run_example(cell)
            self.assertEqual({regime: f"{time:.2f}" for regime, time in hours.items()},
                             {"sheet": "0.30", "shallow": "0.24", "channel": "0.99"}, cell)
            self.assertEqual(f"{total:.2f}", "1.53", cell)

    def test_it_equals_the_formulas_at_the_lengths_the_grid_gives(self):
        for cell in (1, 2, 5):
            hours, overland_ft, channel_ft, total = self.run_example(cell)
            sheet = 0.007 * (N_GRASS * SHEET_FT) ** 0.8 / (RAIN_IN ** 0.5 * OVERLAND_SLOPE ** 0.4)
            shallow = (overland_ft - SHEET_FT) / (16.1345 * OVERLAND_SLOPE ** 0.5) / 3600
            channel = channel_ft / (FOOT ** (-1 / 3) / N_CHANNEL * RADIUS_FT ** (2 / 3) * CHANNEL_SLOPE ** 0.5) / 3600
            for regime, expected in (("sheet", sheet), ("shallow", shallow), ("channel", channel)):
                self.assertAlmostEqual(hours[regime] / expected, 1, delta=1e-3, msg=(cell, regime))
            self.assertAlmostEqual(total / (sheet + shallow + channel), 1, delta=1e-3, msg=cell)

    def test_the_default_step_gives_a_little_more(self):
        """Elevations trusted to 0.2 m only (0.5 m at cells of 5 m): the last metres before the channel are seen together with its flatter
        slope. The second number to know beside 1.53 h: 1.5325 h against 1.5301 h at cells of 1 m, 1.5346 h against 1.5290 h at 5 m."""
        for cell, expected in ((1, 1.5325), (2, 1.5334), (5, 1.5346)):
            _, _, _, total = self.run_example(cell, vertical_step="")
            self.assertAlmostEqual(total, expected, delta=5e-5, msg=cell)


class Lumps(CommandTest):
    """Examples that take a path as one lump, on strips of cells of the length that the example has."""

    def methods(self, z, cell, book, more):
        self.ground(values=np.tile(np.asarray(z)[:, None], (1, 3)), cell=cell)
        self.cover(values=np.ones((len(z), 3), np.uint8), cell=cell)
        self.book(book)
        write_points(self.folder / "points.geojson", [("end", (500_000 + 1.5 * cell, 5_400_000 - (len(z) - 0.5) * cell))])
        (self.folder / "study.toml").write_text(
            '[terrain]\nelevation = "dem.tif"\nvertical_step = "1 mm"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n'
            '[points]\nfile = "points.geojson"\nmove_within = "0.1 m"\n[rain]\ntwo_year_24_hour = "3.6 in"\n' + more)
        self.done("run", "study.toml")
        rows = table(self.folder / "result/tables/methods.csv")
        return {row["method"]: float(row["time_min"]) for row in rows if row["time_min"]}

    def test_kerby_and_kirpich_of_the_texas_manual(self):
        """Roussel et al., 2005, in the Texas Hydraulic Design Manual: 500 ft of average grass (N 0.40) at 0.02, main channel of 5280 ft
        that falls 50 ft: 25 + 32 = 57 min as printed. Cells of 10 ft."""
        cell = 10 * FOOT
        feet_along = np.arange(529) * 10.0
        z_ft = 750 - 0.02 * np.minimum(feet_along, 500) - 40 / 4780 * np.maximum(feet_along - 500, 0)
        times = self.methods(z_ft * FOOT, cell, BOOK, f'[timing]\nchannel_from = "{51 * cell ** 2 - 0.001:.3f} m2"\n[methods]\nkerby_n = 0.40\n')
        self.assertEqual(f"{times['lump-kerby-kirpich']:.0f}", "57")
        self.assertAlmostEqual(times["lump-kerby-kirpich"], 24.65 + 31.94, delta=0.02)

    def test_one_plot_by_several_formulas(self):
        """The plot of Troy University's GEM 4409 (inputs as printed, answers by arithmetic): 300 ft at 0.02, C 0.85, Kerby's N 0.02."""
        z = 100 - 0.02 * 2.5 * FOOT * np.arange(121)
        book = "code,name,n_typical,shallow_type,c,source\n1,Pavement,0.011,pavement,0.85,GEM 4409\n"
        times = self.methods(z, 2.5 * FOOT, book, '[timing]\nchannel_from = "mapped only"\n[methods]\nkerby_n = 0.02\n')
        for method, expected in (("lump-kirpich", "2.84"), ("lump-faa", "6.19"), ("lump-kerby", "4.79")):
            self.assertEqual(f"{times[method]:.2f}", expected, method)


if __name__ == "__main__":
    unittest.main()
