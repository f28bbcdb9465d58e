#!/usr/bin/python3
"""One case stated in feet, inches and acres and in metres, millimetres and hectares: what comes out in SI is the same to the bit."""
import unittest

import numpy as np
from osgeo import gdal

from support import CommandTest, FOOT, INCH, hills, table, write_points

# Pairs whose two texts give the same double, which `test_the_inputs_convert_exactly` holds.
LENGTHS = {"slope_window": (100, 30.48), "vertical_step": (0.5, 0.1524), "pond_depth": (1, 0.3048), "sheet_limit": (200, 60.96),
           "shortest_segment": (125, 38.1), "hydraulic_radius": (1.25, 0.381), "move_within": (5, 1.524)}
RAIN_IN, RAIN_MM = 4.0, 101.6
RAIN = [(5, 5, 127), (60, 2, 50.8), (1440, 0.25, 6.35)]  # min, in/h, mm/h
AREA_FT2, AREA_M2 = 8_000, 743.22432


class Units(CommandTest):
    def setUp(self):
        super().setUp()
        self.ground(values=np.round(hills() * 64) / 64)
        codes = np.ones((40, 50), np.uint8)
        codes[10:20, 5:30], codes[25:, 20:] = 2, 3
        self.cover(values=codes)
        write_points(self.folder / "points.geojson", [("upper", (500_041, 5_399_961)), ("lower", (500_047, 5_399_925))])
        header = "code,name,n_typical,shallow_k_{unit},source\n"
        for unit, paved, grass in (("ft_s", 20, 16), ("m_s", 6.096, 4.8768)):
            (self.folder / f"{unit}.csv").write_text(
                header.format(unit=unit) + f"1,Grass,0.24,{grass},test\n2,Street,0.011,{paved},test\n3,Wood,0.4,{grass},test\n")
        for name, column in (("in_h", 1), ("mm_h", 2)):
            (self.folder / f"{name}.csv").write_text(
                f"duration_min,intensity_10yr_{name}\n" + "".join(f"{row[0]},{row[column]}\n" for row in RAIN))

    def study(self, us, sheet):
        length = {name: f'"{pair[0]} ft"' if us else f'"{pair[1]} m"' for name, pair in LENGTHS.items()}
        rain = f'two_year_24_hour = "{RAIN_IN} in"' if us else f'two_year_24_hour = "{RAIN_MM} mm"'
        text = f"""report_units = "{'us' if us else 'si'}"
[terrain]
elevation = "dem.tif"
slope_window = {length['slope_window']}
vertical_step = {length['vertical_step']}
pond_depth = {length['pond_depth']}
pond_speed = {'"5 ft/s"' if us else '"1.524 m/s"'}
[surface]
cover = "cover.tif"
book = "{'ft_s' if us else 'm_s'}.csv"
[points]
file = "points.geojson"
move_within = {length['move_within']}
[rain]
{rain}
file = "{'in_h' if us else 'mm_h'}.csv"
[timing]
sheet = "{sheet}"
sheet_limit = {length['sheet_limit']}
channel_from = {f'"{AREA_FT2} ft2"' if us else f'"{AREA_M2} m2"'}
channel = {{ n = 0.045, hydraulic_radius = {length['hydraulic_radius']} }}
shortest_segment = {length['shortest_segment']}
"""
        name = f"{sheet}-{'us' if us else 'si'}"
        (self.folder / f"{name}.toml").write_text(text)
        self.done("run", f"{name}.toml", "--out", name)
        return name

    def test_the_inputs_convert_exactly(self):
        for us, si in LENGTHS.values():
            self.assertEqual(us * FOOT, si)
        self.assertEqual(RAIN_IN * INCH, RAIN_MM / 1000)
        for _, us, si in RAIN:
            self.assertEqual(us * INCH / 3600, si / 3.6e6)
        self.assertEqual(AREA_FT2 * FOOT * FOOT, AREA_M2)
        for us, si in ((20, 6.096), (16, 4.8768), (5, 1.524)):
            self.assertEqual(us * FOOT, si)

    def test_what_comes_out_in_si_is_the_same_to_the_bit(self):
        for sheet in ("nrcs", "kinematic"):
            us, si = self.study(True, sheet), self.study(False, sheet)
            self.assertEqual(self.result(us)["outlets"], self.result(si)["outlets"])
            for name in ("travel_time", "contributing_area", "flow_azimuth", "catchment", "regime", "spill_elevation"):
                one, other = (gdal.Open(str(self.folder / f"{folder}/rasters/{name}.tif")).ReadAsArray() for folder in (us, si))
                np.testing.assert_array_equal(one, other, name)

    def test_the_tables_say_the_same_in_their_own_units(self):
        us, si = self.study(True, "nrcs"), self.study(False, "nrcs")
        rows = [table(self.folder / f"{folder}/tables/segments.csv") for folder in (us, si)]
        self.assertEqual(len(rows[0]), len(rows[1]))
        for one, other in zip(*rows):
            self.assertEqual(one["time_s"], other["time_s"])
            self.assertAlmostEqual(float(one["length_ft"]) * FOOT, float(other["length_m"]), delta=1e-3)


if __name__ == "__main__":
    unittest.main()
