#!/usr/bin/python3
"""Channel flow by the design storm: arrival, intensity, flow, normal depth, velocity, cell after cell, for each return period."""
import math
import unittest

import numpy as np
from scipy.optimize import brentq

from support import CommandTest, FOOT, INCH, table, write_points

CELL, SLOPE, CELLS, CHANNEL_FROM = 5.0, 0.01, 160, 30
SHEET_M, N, K, C = 30.0, 0.24, 16.135 * FOOT, 0.5
WIDTH, SIDE, CHANNEL_N = 1.5, 2.0, 0.035
LEFT, TOP = 500_000.0, 5_400_000.0
RAIN = 'formula = "i[in/h] = 45 T^0.2 / (t[min] + 10)^0.8"\nreturn_periods = [2, 10, 100]'
BOOK = f"code,name,n_typical,shallow_type,c,source\n1,Grass,{N},grassed waterway,{C},test\n"
STUDY = """report_units = "{units}"
[terrain]
elevation = "dem.tif"
vertical_step = "0.1 mm"
slope_window = "5 m"
[surface]
cover = "cover.tif"
book = "book.csv"
[points]
file = "points.geojson"
move_within = "0.1 m"
[rain]
two_year_24_hour = "3.6 in"
{rain}
[timing]
sheet_limit = "30 m"
sheet_limit_rule = "stated"
channel_from = "750 m2"
channel = {{ n = 0.035, width = "1.5 m", depth = "1 m", flow = "{flow}"{side} }}
{timing}
[peaks]
least_time = "0 min"
"""


def intensity(seconds, years):
    """The formula, in m/s."""
    return 45 * years ** 0.2 / (seconds / 60 + 10) ** 0.8 * INCH / 3600


def normal_depth(flow):
    def surplus(depth):
        area, perimeter = (WIDTH + SIDE * depth) * depth, WIDTH + 2 * depth * math.hypot(1, SIDE)
        return area * (area / perimeter) ** (2 / 3) * math.sqrt(SLOPE) / CHANNEL_N - flow
    return brentq(surplus, 1e-9, 100)


class DesignStorm(CommandTest):
    """Three strips side by side that fall to the south: each is a path of its own, along which every number can be found by hand."""

    def run_strip(self, flow="design storm", timing="", units="si", side=f", side_slope = {SIDE:g}", book=BOOK, rain=RAIN):
        z = 1000 - SLOPE * CELL * np.arange(CELLS + 1)
        self.ground(values=np.tile(z[:, None], (1, 3)), cell=CELL)
        self.cover(values=np.ones((CELLS + 1, 3), np.uint8), cell=CELL)
        self.book(book)
        write_points(self.folder / "points.geojson", [("end", (LEFT + 1.5 * CELL, TOP - (CELLS + 0.5) * CELL))])
        (self.folder / "study.toml").write_text(STUDY.format(units=units, flow=flow, timing=timing, side=side, rain=rain))

    def outlet(self, **choices):
        self.run_strip(**choices)
        self.done("run", "study.toml", "--replace")
        return self.result()["outlets"][0]

    @staticmethod
    def by_hand(years, sheet):
        """The time to the point: `sheet(i)` is the time of sheet flow under an intensity."""
        shallow = ((CHANNEL_FROM - 1) * CELL - SHEET_M) / (K * math.sqrt(SLOPE))
        channel = 0.0

        def time(rain):
            return sheet(rain) + shallow + channel
        for cell in range(CHANNEL_FROM - 1, CELLS):
            arrival = brentq(lambda t: time(intensity(t, years)) - t, 1, 1e6)
            flow = C * intensity(arrival, years) * (cell + 1) * CELL ** 2
            depth = normal_depth(flow)
            channel += CELL * (WIDTH + SIDE * depth) * depth / flow
        return brentq(lambda t: time(intensity(t, years)) - t, 1, 1e6)

    @staticmethod
    def nrcs(_):
        return 0.007 * 3600 * (N * SHEET_M / FOOT) ** 0.8 / (3.6 ** 0.5 * SLOPE ** 0.4)

    @staticmethod
    def kinematic(rain):
        return 60 * 0.933 * (N * SHEET_M / FOOT / math.sqrt(SLOPE)) ** 0.6 / (rain * 3600 / INCH) ** 0.4

    def test_times_are_those_of_a_pass_by_hand_for_each_return_period(self):
        for timing, sheet in (("", self.nrcs), ('sheet = "kinematic"', self.kinematic)):
            outlet = self.outlet(timing=timing)
            for storm in outlet["storms"]:
                expected = self.by_hand(storm["return_period"], sheet)
                self.assertAlmostEqual(storm["time_s"] / expected, 1, delta=1e-3, msg=(timing, storm["return_period"]))

    def test_a_rarer_storm_is_faster_and_its_time_is_the_same_whichever_storm_the_rasters_are_for(self):
        ten = self.outlet()
        times = [storm["time_s"] for storm in ten["storms"]]
        self.assertEqual(times, sorted(times, reverse=True))
        self.assertEqual(ten["time_of_concentration_s"], times[1])
        for place, years in ((0, 2), (2, 100)):
            other = self.outlet(timing=f"raster_return_period = {years}")
            self.assertEqual([storm["time_s"] for storm in other["storms"]], times)
            self.assertEqual(other["time_of_concentration_s"], times[place])

    def check_rows(self, units, m, ha, flow_unit, factor):
        self.outlet(units=units)
        rows = [row for row in table(self.folder / "result/tables/segments.csv") if row["regime"] == "channel"]
        self.assertGreater(len(rows), 2)
        square = 1e4 if units == "si" else 43560.0
        for row in rows:
            number = {name: float(row[name]) for name in row if row[name] and name.endswith(("_to_" + m, "_to_" + ha, "_to_" + flow_unit)) or
                      name in ("n", "slope_to", "side_slope_to", "arrival_to_min", "intensity_to_mm_per_h", "intensity_to_in_per_h")}
            rain = number.get("intensity_to_mm_per_h", 0) / 3.6e6 or number["intensity_to_in_per_h"] / 12 / 3600  # m/s or ft/s
            self.assertAlmostEqual(rain / (intensity(number["arrival_to_min"] * 60, 10) / (1 if units == "si" else FOOT)), 1, delta=1e-3)
            self.assertAlmostEqual(number[f"runoff_area_to_{ha}"] / (C * float(row[f"area_to_{ha}"])), 1, delta=1e-3)
            flow = rain * number[f"runoff_area_to_{ha}"] * square
            self.assertAlmostEqual(number[f"flow_to_{flow_unit}"] / flow, 1, delta=1e-3)
            depth, width, side = number[f"depth_to_{m}"], number[f"width_to_{m}"], number["side_slope_to"]
            area, perimeter = (width + side * depth) * depth, width + 2 * depth * math.hypot(1, side)
            carried = factor / number["n"] * area * (area / perimeter) ** (2 / 3) * math.sqrt(number["slope_to"])
            self.assertAlmostEqual(carried / flow, 1, delta=1e-3)
            seconds = float(row[f"length_{m}"]) * number["n"] / (factor * float(row[f"hydraulic_radius_{m}"]) ** (2 / 3) * math.sqrt(float(row["slope_equivalent"])))
            self.assertAlmostEqual(float(row["formula_time_s"]) / seconds, 1, delta=1e-3)

    def test_a_row_shows_the_flow_of_its_last_cell_and_recomputes_in_metres(self):
        self.check_rows("si", "m", "ha", "m3_per_s", 1.0)

    def test_a_row_shows_the_flow_of_its_last_cell_and_recomputes_in_feet(self):
        self.check_rows("us", "ft", "ac", "ft3_per_s", FOOT ** (-1 / 3))

    def test_runoff_goes_by_the_soil_of_each_cell(self):
        """Half the way to the last channel cell is of group A with C = 0.2, half of group B with 0.6: 0.4 together."""
        self.run_strip(book=BOOK.replace(",c,", ",c_a,c_b,").replace(f",{C},", ",0.2,0.6,"))
        soils = np.where(np.arange(CELLS + 1) < CELLS // 2, 1, 2).astype(np.uint8)
        self.cover("soils.tif", np.tile(soils[:, None], (1, 3)), cell=CELL)
        study = self.folder / "study.toml"
        study.write_text(study.read_text().replace("[surface]", '[surface]\nsoil_group = "soils.tif"'))
        self.done("run", "study.toml")
        last = [row for row in table(self.folder / "result/tables/segments.csv") if row["regime"] == "channel" and row["path"] == "governing"][-1]
        self.assertAlmostEqual(float(last["runoff_area_to_ha"]) / float(last["area_to_ha"]), 0.4, places=3)
        study.write_text(study.read_text().replace("[timing]", '[timing]\nsheet = "kinematic"\nsheet_rain = "runoff"'))
        self.refused(1, "run", "study.toml", says=("raster of soil groups", "state one soil_group"))

    def test_two_runs_and_any_threads_give_the_same_bytes(self):
        self.outlet()
        first = (self.folder / "result/result.json").read_bytes()
        self.done("run", "study.toml", "--replace", "--threads", "1")
        self.assertEqual((self.folder / "result/result.json").read_bytes(), first)

    def test_what_it_needs_is_asked_for(self):
        for choices, says in (({"rain": ""}, "needs rain by duration"), ({"flow": "bankfull"}, 'acts on flow = "design storm" only'),
                              ({"book": BOOK.replace(",c,", ",").replace(f",{C},", ",")}, "needs a runoff coefficient of every class"),
                              ({"book": BOOK.replace(f",{C},", ",0,")}, "needs runoff, and none reaches"),
                              ({"rain": 'formula = "i[in/h] = 45 T^0.2 / (t[min] + 10)^0.8"\nformula_to = "3 min"'}, "a channel is reached after")):
            self.run_strip(**choices)
            self.refused(1, "run", "study.toml", says=(says,))


if __name__ == "__main__":
    unittest.main()
