#!/usr/bin/python3
"""Terrains at the limits of what may come, through the command: what stands in the result is what is known of them by construction."""
import collections
import subprocess
import sys
import unittest

import numpy as np
from osgeo import gdal

from support import CommandTest, FOOT, VERIFY, system_of, table

CELL = 2.0
AREA = CELL * CELL
VOID = -9999.0
LEAVES, NO_AZIMUTH = 65534, 65535
CHANNEL_FROM_KM2, CHANNEL_N = 0.05, 0.045   # 5 ha; as the study has them where it does not say
STEPS = {0: (-1, 0), 45: (-1, 1), 90: (0, 1), 135: (1, 1), 180: (1, 0), 225: (1, -1), 270: (0, -1), 315: (-1, -1)}


def spiral(size, with_pit):
    """A level way one cell wide that winds inwards between walls from the left edge; its middle is lower where `with_pit`."""
    z = np.full((size, size), 9.0)
    row, column, way = 1, 0, 0
    z[row, column] = 1.0
    ways = ((0, 1), (1, 0), (0, -1), (-1, 0))
    turns = 0
    while turns < 2:
        dr, dc = ways[way]
        to, after = (row + dr, column + dc), (row + 2 * dr, column + 2 * dc)
        is_inside = 0 <= after[0] < size and 0 <= after[1] < size
        if min(to) < 1 or max(to) > size - 2 or (is_inside and z[after] < 9.0):
            way, turns = (way + 1) % 4, turns + 1
            continue
        (row, column), turns = to, 0
        z[row, column] = 1.0
    if with_pit:
        z[row, column] = 0.0
    return z, (row, column)


def length_of_way(z, level, start, end):
    """Steps of the shortest way over cells no higher than a level, and how many of them are diagonal at least: each bend of the spiral has one."""
    before, waiting = {start: None}, collections.deque([start])
    while end not in before:
        row, column = waiting.popleft()
        for dr, dc in STEPS.values():
            to = (row + dr, column + dc)
            if 0 <= to[0] < z.shape[0] and 0 <= to[1] < z.shape[1] and z[to] <= level and to not in before:
                before[to] = (row, column)
                waiting.append(to)
    straight = diagonal = 0
    while before[end] is not None:
        is_diagonal = end[0] != before[end][0] and end[1] != before[end][1]
        straight, diagonal, end = straight + (not is_diagonal), diagonal + is_diagonal, before[end]
    return CELL * (straight + diagonal * np.sqrt(2))


class Limits(CommandTest):
    def run_on(self, z, more="", verified=True, **options):
        """Runs a study of a terrain, all of it grass, and gives its rasters by name."""
        self.ground(values=z, cell=CELL, **({"kind": gdal.GDT_Float32} | options))
        self.cover(values=np.ones(z.shape, np.uint8), cell=CELL)
        self.book()
        (self.folder / "study.toml").write_text('report_units = "si"\n[terrain]\nelevation = "dem.tif"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n'
                                                '[rain]\ntwo_year_24_hour = "90 mm"\n' + more)
        self.done("run", "study.toml", "--replace", "--quiet")
        if verified:
            said = subprocess.run([sys.executable, "-B", VERIFY, self.folder / "result", self.folder / "dem.tif", "--study", self.folder / "study.toml"],
                                  capture_output=True, text=True, check=False)
            self.assertEqual(said.returncode, 0, said.stdout + said.stderr)
        return {name: gdal.Open(str(self.folder / f"result/rasters/{name}.tif")).ReadAsArray()
                for name in ("flow_azimuth", "spill_elevation", "contributing_area", "catchment", "regime", "travel_time")}

    def roots(self, rasters):
        return list(zip(*np.nonzero(rasters["flow_azimuth"] == LEAVES)))

    def sole_outlet(self):
        (outlet,) = self.result()["outlets"]
        return outlet

    def test_one_flat_drains_from_each_cell_to_the_nearest_edge(self):
        rows, columns = 120, 150
        rasters = self.run_on(np.full((rows, columns), 7.0), '[points]\nauto_area = "0.001 %"\n')
        row, column = np.indices((rows, columns))
        to_edge = np.minimum.reduce([row, column, rows - 1 - row, columns - 1 - column])
        np.testing.assert_array_equal(rasters["flow_azimuth"] == LEAVES, to_edge == 0)
        for azimuth, (dr, dc) in STEPS.items():
            here = rasters["flow_azimuth"] == azimuth
            np.testing.assert_array_equal(to_edge[row[here] + dr, column[here] + dc], to_edge[here] - 1)
        self.assertEqual(set(np.unique(rasters["spill_elevation"])), {7.0})
        outlets = self.result()["outlets"]
        self.assertEqual(len(outlets), 2 * (rows + columns) - 4)   # every cell of the edge
        self.assertAlmostEqual(sum(outlet["area_m2"] for outlet in outlets), rows * columns * AREA)
        self.assertGreaterEqual(max(outlet["longest_path"]["length_m"] for outlet in outlets), CELL * to_edge.max())
        self.assertEqual(table(self.folder / "result/tables/depressions.csv"), [])

    def test_a_spiral_one_cell_wide_is_run_through_from_its_middle_to_its_mouth(self):
        size = 101
        for with_pit in (False, True):
            z, middle = spiral(size, with_pit)
            rasters = self.run_on(z)
            self.assertEqual(self.roots(rasters), [(1, 0)])
            outlet = self.sole_outlet()
            self.assertAlmostEqual(outlet["area_m2"], size * size * AREA)
            self.assertEqual(rasters["contributing_area"][1, 0], size * size * AREA)
            # The head is a wall beside the middle, a straight or a diagonal step from the way.
            way = length_of_way(z, 1.0, (1, 0), middle)
            self.assertAlmostEqual(outlet["longest_path"]["length_m"], way, delta=CELL * np.sqrt(2) + 1e-3)
            self.assertGreater(outlet["longest_path"]["length_m"], size * size / 2 * CELL * 0.9)
            self.assertEqual(set(np.unique(rasters["spill_elevation"])), {1.0, 9.0})
            rows = table(self.folder / "result/tables/depressions.csv")
            self.assertEqual([(float(row["depth_m"]), row["cells"]) for row in rows], [(1.0, "1")] if with_pit else [])

    def test_a_comb_between_walls_fills_and_leaves_by_one_place(self):
        rows, columns = 120, 121
        z = np.full((rows, columns), 5.0)
        z[1:-1, 1:-1:2] = z[rows // 2, 1:-1] = 2.0
        rasters = self.run_on(z)
        self.assertEqual(len(self.roots(rasters)), 1)
        self.assertEqual(set(np.unique(rasters["spill_elevation"])), {5.0})
        self.assertAlmostEqual(self.sole_outlet()["area_m2"], rows * columns * AREA)
        (depression,) = table(self.folder / "result/tables/depressions.csv")
        cells = np.count_nonzero(z == 2.0)
        self.assertEqual((float(depression["depth_m"]), int(depression["cells"]), depression["on_governing_path"]), (3.0, cells, "yes"))
        self.assertAlmostEqual(float(depression["volume_m3"]) / (3.0 * cells * AREA), 1, delta=1e-4)   # five digits

    def test_all_water_around_one_pit_leaves_by_the_lowest_of_the_edge(self):
        side, middle = 1001, 500
        row, column = np.mgrid[0:side, 0:side]
        z = np.hypot(row - middle, column - (middle + 0.3)).astype(np.float32)
        rasters = self.run_on(z, verified=False)
        self.assertEqual(self.roots(rasters), [(middle, side - 1)])   # 499.7 from the pit; the left end of its row is 500.3 away
        np.testing.assert_array_equal(rasters["flow_azimuth"][middle, middle:-1], 90)
        self.assertAlmostEqual(self.sole_outlet()["area_m2"], side * side * AREA)
        np.testing.assert_array_equal(rasters["spill_elevation"], np.maximum(z, z[middle, -1]).astype(float))
        (depression,) = table(self.folder / "result/tables/depressions.csv")
        self.assertEqual(int(depression["cells"]), np.count_nonzero(z < z[middle, -1]))
        self.assertEqual(depression["on_governing_path"], "yes")

    def test_one_cell_among_a_million_voids_is_its_own_catchment(self):
        z = np.full((1000, 1000), VOID)
        z[777, 234] = 4.0
        rasters = self.run_on(z, verified=False, nodata=VOID)
        self.assertEqual(self.roots(rasters), [(777, 234)])
        self.assertEqual(np.count_nonzero(rasters["flow_azimuth"] == NO_AZIMUTH), 999_999)
        outlet = self.sole_outlet()
        self.assertEqual((outlet["area_m2"], outlet["time_of_concentration_s"], outlet["longest_path"]["length_m"]), (AREA, 0, 0))
        self.assertEqual((rasters["spill_elevation"][777, 234], rasters["travel_time"][777, 234]), (4.0, 0.0))
        self.assertEqual(np.count_nonzero(rasters["catchment"] == 1), 1)

    def test_a_million_cells_in_one_row_and_in_one_column_are_one_slope(self):
        cells = 1_000_000
        line = (cells - 1 - np.arange(cells)) / 128   # exact in single precision
        found = {}
        for name, z in (("row", line[np.newaxis]), ("column", line[:, np.newaxis])):
            rasters = {key: values.ravel() for key, values in self.run_on(z, verified=False).items()}
            outlet = self.sole_outlet()
            self.assertAlmostEqual(outlet["area_m2"], cells * AREA)
            self.assertAlmostEqual(outlet["longest_path"]["length_m"], (cells - 1) * CELL)
            np.testing.assert_array_equal(rasters["contributing_area"], AREA * np.arange(1, cells + 1))
            np.testing.assert_array_equal(rasters["spill_elevation"], line)
            np.testing.assert_array_equal(rasters.pop("flow_azimuth")[:-1], 90 if name == "row" else 180)
            self.assertAlmostEqual(outlet["time_of_concentration_s"] / self.time_of_slope(cells), 1, delta=1e-4)
            self.assertAlmostEqual(rasters["travel_time"][0] * 60 / outlet["time_of_concentration_s"], 1, delta=1e-6)
            found[name] = rasters
        for name, values in found["row"].items():
            np.testing.assert_array_equal(values, found["column"][name], name)

    @staticmethod
    def time_of_slope(cells):
        """Sheet flow for 100 ft, shallow to where a channel begins, then a channel by contributing area, as the methods print them."""
        slope = 1 / 128 / CELL
        reaches = np.arange(1, cells) * AREA / 1e6                              # km2 that drain through the cell a step begins in
        is_channel = reaches >= CHANNEL_FROM_KM2
        width, depth = 2.70 * reaches ** 0.352, 0.30 * reaches ** 0.213
        radius = width * depth / (width + 2 * depth)
        channel = np.sum(CELL * CHANNEL_N / (radius ** (2 / 3) * np.sqrt(slope)), where=is_channel)
        overland_m = CELL * np.count_nonzero(~is_channel)
        # n L / sqrt(S) reaches 100 ft after this length of grass.
        sheet_m = 100 * FOOT * np.sqrt(slope) / 0.24
        sheet_s = 3600 * 0.007 * 100 ** 0.8 / np.sqrt(90 / 25.4)
        return sheet_s + (overland_m - sheet_m) / (16.135 * FOOT * np.sqrt(slope)) + channel

    def test_a_level_river_parts_in_its_middle_and_its_steep_tributaries_keep_their_slope(self):
        rows, columns = 21, 1000
        z = np.abs(np.arange(rows)[:, np.newaxis] - 10.0) + np.zeros(columns)
        rasters = self.run_on(z, '[timing]\nchannel_from = "40 m2"\n')
        self.assertEqual(self.roots(rasters), [(10, 0), (10, columns - 1)])
        np.testing.assert_array_equal(rasters["flow_azimuth"][:10], 180)
        np.testing.assert_array_equal(rasters["flow_azimuth"][11:], 0)
        np.testing.assert_array_equal(rasters["flow_azimuth"][10, 1:-1], [270] * 499 + [90] * 499)
        outlets = self.result()["outlets"]
        self.assertEqual([outlet["area_m2"] for outlet in outlets], [rows * 500 * AREA] * 2)
        for outlet in outlets:
            self.assertAlmostEqual(outlet["longest_path"]["length_m"], (10 + 499) * CELL)
            river = [segment for segment in table(self.folder / "result/tables/segments.csv")
                     if segment["point"] == outlet["name"] and segment["path"] == "governing" and segment["regime"] == "channel"]
            self.assertEqual({float(segment["slope_equivalent"]) for segment in river if float(segment["length_m"]) > 30}, {0.0001})   # the floor

    def test_more_cells_than_can_be_numbered_are_refused_by_the_header_alone(self):
        for rows, columns in ((65_537, 65_536), (1_000_000, 4_295)):
            file = gdal.GetDriverByName("GTiff").Create(str(self.folder / "huge.tif"), columns, rows, 1, gdal.GDT_Byte,
                                                        ["SPARSE_OK=TRUE", "TILED=YES", "BLOCKXSIZE=4096", "BLOCKYSIZE=4096", "BIGTIFF=YES"])
            file.SetGeoTransform((500_000, 2, 0, 5_400_000, 0, -2))
            file.SetProjection(system_of(25832).ExportToWkt())
            file.GetRasterBand(1).SetUnitType("m")
            file = None
            self.cover(values=np.ones((4, 4), np.uint8))
            self.book()
            words = ("--elevation", "huge.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "90 mm")
            self.refused(1, "run", *words, says=("huge.tif", f"{columns} x {rows} cells", "at most 4294967294"))
            checked = self.rillclock("check", *words)
            self.assertEqual(checked.returncode, 1, checked.stderr)
            self.assertIn("at most 4294967294", checked.stderr)


if __name__ == "__main__":
    unittest.main()
