#!/usr/bin/python3
"""Checks the verification itself on terrain whose answers can be worked out by hand."""
import math
import pathlib
import subprocess
import sys
import tempfile
import types
import unittest

import numpy as np
from osgeo import gdal, osr

from verify_rain_and_channels import RainFormula, RainTable, corner_to_corner, normal_depths, prevailing_zone
from verify_result import FOOT, Forest, INCH, LEAVES, Travel, on_chart, spill_elevation

VERIFY = pathlib.Path(__file__).with_name("verify_result.py")


def strip(heights, cell, n=0.24, k=2.0, **changes):
    """Travel along a single row of cells that drain to the east; the last cell is a root."""
    count = len(heights)
    rules = {"window": 20.0, "vertical_step": 0.2, "pond_depth": 0.3, "pond_speed": 2.0, "rain": 4 * INCH, "is_kinematic": False,
             "sheet_limit": 100 * FOOT, "index_limit": 100 * FOOT, "floor_overland": 0.001, "floor_channel": 0.0001,
             "channel_from": math.inf, "channel_n": 0.05, "radius": lambda km2: np.full_like(km2, 0.5)}
    ground = types.SimpleNamespace(east=[cell], south=[cell], diagonal=[cell * math.sqrt(2)])
    forest = Forest(np.array([[90] * (count - 1) + [LEAVES]]), types.SimpleNamespace(
        east=np.array(ground.east), south=np.array(ground.south), diagonal=np.array(ground.diagonal)))
    surface = types.SimpleNamespace(n=np.full(count, n), k=np.full(count, k), depth=changes.pop("water", np.zeros(count)))
    surface.runoff, surface.shallow_speed = np.ones(count), lambda slope: surface.k * np.sqrt(slope)
    own = np.full(count, cell * cell)
    h = np.array(heights, float)
    z = h - changes.pop("pond", np.zeros(count))
    study = types.SimpleNamespace(**(rules | changes))
    return Travel(study, forest, surface, z, h, np.cumsum(own), own)


def plane(count, cell, slope):
    return [slope * cell * (count - 1 - i) for i in range(count)]


class Charts(unittest.TestCase):
    def test_a_chart_is_straight_on_log_log_paper_between_its_points_and_beyond(self):
        line = (np.array([0.01, 0.04, 0.16]), np.array([1.0, 2.0, 2.0 * 4 ** 0.25]))
        for slope, expected in ((0.01, 1.0), (0.0225, 1.5), (0.04, 2.0), (0.0025, 0.5), (0.64, 2.0 * 16 ** 0.25)):
            self.assertAlmostEqual(float(on_chart(line, np.array([slope]))[0]), expected)


class RainByDuration(unittest.TestCase):
    def read(self, text):
        with tempfile.TemporaryDirectory() as folder:
            path = pathlib.Path(folder) / "rain.csv"
            path.write_text(text)
            return RainTable(path)

    def test_a_table_is_straight_on_log_log_paper_and_level_before_its_first_duration(self):
        rain = self.read("duration_min,intensity_2yr_in_h\n10,4\n40,1\n1440,0.1\n")
        for minutes, expected in ((10, 4.0), (20, 2.0), (40, 1.0), (5, 4.0)):
            self.assertAlmostEqual(float(rain.intensity(minutes * 60.0, 2.0, 0.0)) * 3600 / INCH, expected)
        self.assertAlmostEqual(float(rain.intensity(60.0, 2.0, 1200.0)) * 3600 / INCH, 2.0)    # never below the least time
        self.assertTrue(np.isnan(rain.intensity(90_000.0, 2.0, 0.0)))
        self.assertAlmostEqual(rain.two_year_24_hour() / INCH, 2.4)

    def test_depths_are_read_over_their_durations(self):
        rain = self.read("duration_h,depth_2yr_mm\n1,30\n24,72\n")
        self.assertAlmostEqual(float(rain.intensity(3600.0, 2.0, 0.0)) * 3.6e6, 30.0)
        self.assertAlmostEqual(rain.two_year_24_hour(), 0.072)

    def test_a_formula_is_worked_out_with_its_units(self):
        rain = RainFormula("i[in/h] = 45 T^0.2 / (t[min] + 10)^0.8")
        self.assertAlmostEqual(float(rain.intensity(np.array(600.0), 10.0, 0.0)) * 3600 / INCH, 45 * 10 ** 0.2 / 20 ** 0.8)

    def test_the_greatest_part_of_a_catchment_gives_the_zone(self):
        zone, area, inside = np.array([1, 1, 2, 0, 0, 0]), np.ones(6), np.array([1, 1, 1, 1, 1, 1], bool)
        self.assertEqual(prevailing_zone(zone, area, ["a", "b"], inside, False), ("a", 2 / 6))
        self.assertEqual(prevailing_zone(zone, area, ["a", "b"], inside, True), (None, 3 / 6))


class Channels(unittest.TestCase):
    def test_a_line_goes_on_corner_to_corner(self):
        self.assertEqual(corner_to_corner([(0, 0), (0, 1), (1, 1), (1, 2), (2, 2)]), [(0, 0), (1, 1), (2, 2)])
        self.assertEqual(corner_to_corner([(0, 0), (1, 0), (2, 0)]), [(0, 0), (1, 0), (2, 0)])

    def test_a_wide_channel_runs_as_deep_as_manning_says(self):
        # 1000 m wide: R is the depth, within its share of the banks; q = y^(5/3) sqrt(S) / n.
        depth = normal_depths(np.array([1000.0]), np.array([1000.0]), np.array([0.0]), np.array([0.03]), np.array([0.01]))
        self.assertAlmostEqual(float(depth[0]), (0.03 / 0.1) ** 0.6, places=3)


class SlopeAhead(unittest.TestCase):
    def test_on_a_plane_it_is_the_planes_up_to_the_last_step(self):
        np.testing.assert_allclose(strip(plane(60, 2.0, 0.05), 2.0).slope[:-1], 0.05, rtol=1e-9)

    def test_a_flat_before_a_drop_has_the_step_over_its_length(self):
        # 50 m of flat, then 10 m down within 2 m: 0.2 m have been fallen after 50.04 m.
        slope = strip([10.0] * 26 + [0.0], 2.0).slope
        self.assertAlmostEqual(slope[0], 0.2 / 50.04, places=9)

    def test_a_flat_longer_than_the_search_lies_on_the_floor(self):
        slope = strip([10.0] * 126 + [0.0], 2.0).slope
        self.assertEqual(slope[0], 0.001)
        self.assertAlmostEqual(slope[30], 0.2 / 190.04, places=9)

    def test_the_window_ends_where_overland_turns_into_channel(self):
        # A channel from the sixth cell on; overland falls at 0.1, the channel at 0.01.
        heights = [1.5, 1.3, 1.1, 0.9, 0.7, 0.5, 0.48, 0.46, 0.44, 0.42, 0.40]
        travel = strip(heights, 2.0, channel_from=24.0)
        self.assertEqual(list(travel.is_channel), [i * 4 >= 80 for i in range(1, 12)])
        travel = strip(heights * 1, 2.0, water=np.array([0.0] * 5 + [1.0] * 6), window=6.0)
        self.assertAlmostEqual(travel.slope[3], 0.4 / 4, places=9)


class StepTimes(unittest.TestCase):
    def test_sheet_and_shallow_add_up_to_the_handbooks_numbers_at_any_cell_size(self):
        # n 0.24 on 0.05: the index ends sheet flow after 100 ft · √0.05 / 0.24 = 28.40 m; P = 4 in.
        sheet_m = 100 * FOOT * math.sqrt(0.05) / 0.24
        expected = 3600 * 0.007 * 100 ** 0.8 / math.sqrt(4) + (126 - sheet_m) / (2.0 * math.sqrt(0.05))
        for cell in (2.0, 7.0, 42.0):
            travel = strip(plane(int(126 / cell) + 1, cell, 0.05), cell)
            self.assertAlmostEqual(travel.step_s.sum(), expected, places=6)

    def test_the_stated_length_ends_sheet_flow_on_smooth_ground(self):
        expected = 3600 * 0.007 * (0.011 * 100 / math.sqrt(0.04)) ** 0.8 / 2 + (60 - 100 * FOOT) / (2.0 * 0.2)
        self.assertAlmostEqual(strip(plane(31, 2.0, 0.04), 2.0, n=0.011).step_s.sum(), expected, places=6)

    def test_a_channel_step_is_mannings(self):
        travel = strip(plane(31, 2.0, 0.04), 2.0, channel_from=4.0)
        self.assertAlmostEqual(travel.step_s[25], 2.0 * 0.05 / (0.5 ** (2 / 3) * 0.2), places=9)

    def test_a_ponded_cell_moves_at_the_capped_wave_speed(self):
        pond = np.zeros(31)
        pond[[10, 11]] = 0.35, 0.9
        travel = strip(plane(31, 2.0, 0.001), 2.0, pond=pond)
        self.assertAlmostEqual(travel.step_s[10], 2.0 / math.sqrt(9.80665 * 0.35), places=9)
        self.assertAlmostEqual(travel.step_s[11], 2.0 / 2.0, places=9)

    def test_open_water_that_falls_is_a_river(self):
        water = np.ones(31)
        self.assertTrue(strip(plane(31, 2.0, 0.02), 2.0, water=water).is_channel[0])
        self.assertTrue(strip(plane(31, 2.0, 0.005), 2.0, water=water).is_water[0])


class Spill(unittest.TestCase):
    def test_a_depression_fills_to_its_lowest_pass(self):
        z = np.array([[5, 5, 5, 5, 5], [5, 1, 2, 1, 5], [5, 5, 5, 3, 5], [5, 5, 5, 5, 4]], float)
        expected = np.array([[5, 5, 5, 5, 5], [5, 4, 4, 4, 5], [5, 5, 5, 4, 5], [5, 5, 5, 5, 4]], float)
        np.testing.assert_array_equal(spill_elevation(z, np.zeros(z.shape, bool)), expected)

    def test_water_gets_out_beside_a_void(self):
        z = np.array([[5, 5, 5, 5], [5, 1, 0, 5], [5, 5, 5, 5]], float)
        void = z == 0
        np.testing.assert_array_equal(spill_elevation(z, void)[~void], z[~void])


class WholeResult(unittest.TestCase):
    """A plane of 3 × 4 cells that falls to the east, as a result folder."""

    def verdict(self, area_of_last=16.0):
        with tempfile.TemporaryDirectory() as folder:
            root = pathlib.Path(folder)
            (root / "rasters").mkdir()
            falling = np.tile(np.array([3, 2, 1, 0], np.float32), (3, 1))
            azimuth = np.tile(np.array([90, 90, 90, LEAVES], np.uint16), (3, 1))
            area = np.tile(np.array([4, 8, 12, 16], float), (3, 1))
            area[2, 3] = area_of_last
            self.write(root / "dem.tif", falling, gdal.GDT_Float32)
            self.write(root / "rasters/spill_elevation.tif", falling, gdal.GDT_Float32)
            self.write(root / "rasters/flow_azimuth.tif", azimuth, gdal.GDT_UInt16)
            self.write(root / "rasters/contributing_area.tif", area, gdal.GDT_Float64)
            self.write(root / "rasters/catchment.tif", np.zeros((3, 4), np.int32), gdal.GDT_Int32)
            done = subprocess.run([sys.executable, "-B", VERIFY, root, root / "dem.tif"], capture_output=True, text=True, check=False)
            return done.returncode, done.stdout

    @staticmethod
    def write(path, values, kind):
        crs = osr.SpatialReference()
        crs.ImportFromEPSG(25831)
        file = gdal.GetDriverByName("GTiff").Create(str(path), values.shape[1], values.shape[0], 1, kind)
        file.SetGeoTransform((500_000, 2, 0, 6_200_000, 0, -2))
        file.SetProjection(crs.ExportToWkt())
        file.GetRasterBand(1).WriteArray(values)
        file.FlushCache()

    def test_a_right_result_passes(self):
        status, said = self.verdict()
        self.assertEqual(status, 0, said)

    def test_a_wrong_area_fails_with_its_place(self):
        status, said = self.verdict(area_of_last=17.0)
        self.assertEqual(status, 1)
        self.assertIn("contributing area solves the linear system: FAILS: 1 of 12 cells differ, most at row 2, column 3", said)


if __name__ == "__main__":
    unittest.main()
