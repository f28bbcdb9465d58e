#!/usr/bin/python3
"""Real terrain in degrees: results against general-purpose libraries, and lengths against PROJ's own command."""
import pathlib
import subprocess
import sys
import unittest

import numpy as np
from osgeo import gdal
from scipy import ndimage

from support import BOOK, CommandTest, VERIFY, write_points

PACKAGE = "python-matplotlib-data"
STUDY = """[terrain]
elevation = "dem.tif"
[surface]
cover = "cover.tif"
book = "book.csv"
[points]
file = "points.geojson"
move_within = "300 m"
[rain]
two_year_24_hour = "3.6 in"
"""


def jacksboro():
    """Where the package of sample data lies: an elevation model of a fault in Tennessee; None where it is not installed."""
    files = subprocess.run(["dpkg", "-L", PACKAGE], capture_output=True, text=True, check=False).stdout.split()
    return next((f for f in files if f.endswith("jacksboro_fault_dem.npz") and pathlib.Path(f).exists()), None)


def patches(shape, classes, seed):
    """Land cover in patches: a smooth random field cut at its quantiles."""
    field = ndimage.gaussian_filter(np.random.default_rng(seed).random(shape), 6)
    levels = np.quantile(field, np.linspace(0, 1, classes + 1)[1:-1])
    return (1 + np.digitize(field, levels)).astype(np.uint8)


class Jacksboro(CommandTest):
    def setUp(self):
        super().setUp()
        found = jacksboro()
        if not found:
            self.skipTest(f"the Debian package {PACKAGE} is missing; scripts/run-tests installs it")
        with np.load(found) as data:
            z, west, north = data["elevation"], float(data["xmin"]), float(data["ymin"])  # its ymin is the top edge
            cell = float(data["dx"]), float(data["dy"])
        self.ground(values=z, cell=cell, corner=(west, north), epsg=4326, kind=gdal.GDT_Int16)
        rows, columns = z.shape
        # The cover lies on another grid, a little larger all round.
        cover_cell = cell[0] * 1.7
        self.cover(values=patches((int(rows * cell[1] / cover_cell) + 4, int(columns / 1.7) + 4), 4, seed=5), cell=cover_cell,
                   corner=(west - cover_cell, north + cover_cell), epsg=4326)
        self.book(BOOK)
        inside = [(0.5, 0.5), (0.25, 0.75), (0.8, 0.3), (0.7, 0.72)]
        write_points(self.folder / "points.geojson",
                     [(f"point {i}", (west + x * columns * cell[0], north - y * rows * cell[1])) for i, (x, y) in enumerate(inside, 1)], 4326)
        (self.folder / "study.toml").write_text(STUDY)

    def test_spill_elevation_area_and_time_equal_an_independent_computation(self):
        self.done("run", "study.toml")
        done = subprocess.run([sys.executable, "-B", VERIFY, self.folder / "result", self.folder / "dem.tif", "--study",
                               self.folder / "study.toml"], capture_output=True, text=True, check=False)
        self.assertEqual(done.returncode, 0, done.stdout + done.stderr)
        for claim in ("spill elevation equals the reconstruction", "contributing area solves", "travel time", "regime"):
            self.assertRegex(done.stdout, rf"(?m)^{claim}.*: holds$")

    def test_whole_metres_keep_their_type_and_their_step(self):
        self.done("run", "study.toml")
        spill = gdal.Open(str(self.folder / "result/rasters/spill_elevation.tif"))
        self.assertEqual(gdal.GetDataTypeName(spill.GetRasterBand(1).DataType), "Int16")
        parameters = self.result()["parameters"]["terrain"]
        self.assertAlmostEqual(parameters["vertical_step_m"], max(1.0, 0.1 * self.shorter_side()), places=6)

    def shorter_side(self):
        dem = gdal.Open(str(self.folder / "dem.tif"))
        left, width, _, top, _, height = dem.GetGeoTransform()
        middle = top + height * (dem.RasterYSize // 2 + 0.5)
        return min(geod(middle, left, middle, left + width), geod(middle, left, middle + height, left))


def geod(latitude, longitude, to_latitude, to_longitude):
    """Length of a geodesic on WGS 84 by PROJ's command."""
    said = subprocess.run(["geod", "+ellps=WGS84", "-I", "-F", "%.6f"], check=True, capture_output=True, text=True,
                          input=f"{latitude:.12f} {longitude:.12f} {to_latitude:.12f} {to_longitude:.12f}\n").stdout
    return float(said.split()[-1])


class Lengths(CommandTest):
    STEP = 0.0005

    def path_of(self, values, points, latitude=61.0):
        self.ground(values=values, cell=self.STEP, corner=(8.0, latitude), epsg=4326)
        self.cover(values=np.ones(values.shape, np.uint8), cell=self.STEP, corner=(8.0, latitude), epsg=4326)
        self.book()
        write_points(self.folder / "points.geojson", points, 4326)
        self.done("run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "3.6 in",
                  "--points", "points.geojson", "--replace")
        return self.result()["outlets"][0]

    def test_a_way_along_a_meridian_is_the_geodesic(self):
        count = 200
        last = 61.0 - (count - 0.5) * self.STEP
        outlet = self.path_of(np.linspace(400, 100, count)[:, None], [("end", (8.0 + self.STEP / 2, last))])
        self.assertAlmostEqual(outlet["longest_path"]["length_m"], geod(61.0 - self.STEP / 2, 8.0, last, 8.0), delta=2e-3)

    def test_a_way_along_a_parallel_is_made_of_geodesic_steps(self):
        count = 200
        middle = 61.0 - self.STEP / 2
        outlet = self.path_of(np.linspace(400, 100, count)[None, :], [("end", (8.0 + (count - 0.5) * self.STEP, middle))])
        self.assertAlmostEqual(outlet["longest_path"]["length_m"], (count - 1) * geod(middle, 8.0, middle, 8.0 + self.STEP), delta=2e-3)

    def test_a_diagonal_step_is_the_geodesic_between_the_centres(self):
        # One way down, across both axes: every other neighbour is void.
        count = 60
        z = np.where(np.eye(count, dtype=bool), np.linspace(400, 100, count)[:, None], -9999.0)
        self.ground(values=z, cell=self.STEP, corner=(8.0, 61.0), epsg=4326, nodata=-9999.0)
        self.cover(values=np.ones(z.shape, np.uint8), cell=self.STEP, corner=(8.0, 61.0), epsg=4326)
        self.book()
        centre = [(61.0 - (i + 0.5) * self.STEP, 8.0 + (i + 0.5) * self.STEP) for i in range(count)]
        write_points(self.folder / "points.geojson", [("end", centre[-1][::-1])], 4326)
        self.done("run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "3.6 in",
                  "--points", "points.geojson")
        expected = sum(geod(*here, *there) for here, there in zip(centre, centre[1:]))
        path = self.result()["outlets"][0]["longest_path"]
        self.assertAlmostEqual(path["length_m"], expected, delta=2e-3)


if __name__ == "__main__":
    unittest.main()
