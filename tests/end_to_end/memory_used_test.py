#!/usr/bin/python3
"""What `check` foretells of memory is no less than what the run then takes, and not much more, whatever is asked of it."""
import pathlib
import re
import subprocess
import sys
import unittest

import numpy as np
from osgeo import gdal

from support import COMMAND, CommandTest, class_folder, starts_within, write_points, write_raster

SIDE = 1500          # of the terrain, in cells
CELL = 2.0           # m
CORNER = (500_000.0, 5_400_000.0)
LEAST_CELLS = 300    # of a point's catchment
# Libraries, tiles and strips are told for data that fill them, at several times the size of these, and the heap may keep what was given back.
MOST_OVER = 2.2
BOOK = """code,name,n_low,n_typical,n_high,shallow_type,c,source
1,Grass,0.15,0.24,0.3,grassed waterway,0.3,test
2,Street,0.01,0.011,0.016,pavement,0.9,test
3,Wood,0.3,0.4,0.6,contour crops or woodland,0.2,test
"""
# A process counts as its own what the one that starts it took before: a small one stands between, and writes the bytes to a file.
BETWEEN = """import os, subprocess, sys
process = subprocess.Popen(sys.argv[2:])
_, status, usage = os.wait4(process.pid, 0)
open(sys.argv[1], "w").write(str(usage.ru_maxrss * 1024))
sys.exit(os.waitstatus_to_exitcode(status))
"""


def rough(seed, steepness):
    """A field of noise whose waves are the higher the longer they are, with a standard deviation of 1."""
    waves = np.hypot(np.fft.fftfreq(SIDE)[:, np.newaxis], np.fft.rfftfreq(SIDE))
    waves[0, 0] = np.inf
    field = np.fft.irfft2(np.fft.rfft2(np.random.default_rng(seed).standard_normal((SIDE, SIDE))) * waves**-steepness, s=(SIDE, SIDE))
    return field / field.std()


def bytes_of(text):
    number, unit = text.split()
    return float(number) * {"MB": 1e6, "GB": 1e9}[unit]


@unittest.skipUnless(starts_within(2 << 30), "the command does not start within 2 GiB of address space")
class MemoryUsed(CommandTest):
    @classmethod
    def setUpClass(cls):
        cls.data = class_folder(cls, "memory")
        ground = 200 + 15 * rough(1, 2.0) - 0.01 * np.arange(SIDE)[:, np.newaxis]
        write_raster(cls.data / "dem.tif", ground.astype(np.float32), cell=CELL, corner=CORNER, kind=gdal.GDT_Float32)
        patches = rough(2, 1.5)
        classes = (1 + (patches > 0) + (patches > 1)).astype(np.uint8)
        write_raster(cls.data / "cover.tif", classes, cell=CELL, corner=CORNER, kind=gdal.GDT_Byte, unit=None)
        # Another grid in another system, in one block of large values: what costs the most to read.
        gdal.Warp(str(cls.data / "wide.tif"), str(cls.data / "cover.tif"), dstSRS="EPSG:4326", outputType=gdal.GDT_Float64, dstNodata=-1,
                  creationOptions=["COMPRESS=DEFLATE", f"BLOCKYSIZE={2 * SIDE}"])
        (cls.data / "book.csv").write_text(BOOK)
        cls.plain_run()

    @classmethod
    def plain_run(cls):
        """Runs the data without points, which are then scattered over what drains enough of it."""
        study = cls.study()
        cls.plain = cls.foretold_and_used(study)
        area = gdal.Open(str(cls.data / "result/rasters/contributing_area.tif")).ReadAsArray()
        cls.drained = np.flatnonzero(area > LEAST_CELLS * CELL**2)

    @classmethod
    def study(cls, more="", rain="", cover="cover.tif"):
        path = cls.data / "study.toml"
        path.write_text(f"""[terrain]
elevation = "dem.tif"
[surface]
cover = "{cover}"
book = "book.csv"
fallback_class = 1
[rain]
two_year_24_hour = "90 mm"
{rain}
[timing]
channel_from = "5 ha"
{more}
""")
        return path

    @classmethod
    def foretold_and_used(cls, study):
        said = subprocess.run([COMMAND, "check", study], capture_output=True, text=True, check=True).stdout
        taken = cls.data / "taken"
        subprocess.run([sys.executable, "-c", BETWEEN, taken, COMMAND, "run", study, "--replace", "--quiet", "--threads", "2"],
                       check=True, capture_output=True)
        return bytes_of(re.search(r"cost: about ([0-9.]+ [MG]B) of memory", said)[1]), int(pathlib.Path(taken).read_text())

    def points(self, count):
        """Words of a study with so many points."""
        cells = np.random.default_rng(3).choice(self.drained, count, replace=False)
        places = [(f"P{cell}", (CORNER[0] + (cell % SIDE + 0.5) * CELL, CORNER[1] - (cell // SIDE + 0.5) * CELL)) for cell in cells]
        write_points(self.data / "points.geojson", places)
        return '[points]\nfile = "points.geojson"\n'

    def assert_foretold(self, foretold, used):
        self.assertLessEqual(used, foretold)
        self.assertLessEqual(foretold, MOST_OVER * used)

    def test_without_points(self):
        self.assert_foretold(*self.plain)

    def test_many_points(self):
        foretold, used = self.foretold_and_used(self.study(self.points(3000)))
        self.assert_foretold(foretold, used)
        self.assertGreater(used, self.plain[1] + 50e6, "points that take no memory show nothing")

    def test_land_cover_on_another_grid_adds_nothing(self):
        foretold, used = self.foretold_and_used(self.study(cover="wide.tif"))
        self.assert_foretold(foretold, used)
        self.assertEqual(foretold, self.plain[0])

    def test_uncertainty(self):
        foretold, used = self.foretold_and_used(self.study(self.points(400) + "[uncertainty]\ndraws = 20\n"))
        self.assert_foretold(foretold, used)
        self.assertGreater(used, self.plain[1] + 50e6, "draws that take no memory show nothing")

    def test_storms_of_their_own(self):
        rain = 'formula = "i[mm/h] = 900 T^0.2 / (t[min] + 12)^0.85"\nreturn_periods = [10]'
        foretold, used = self.foretold_and_used(self.study('sheet = "kinematic"\n' + self.points(100), rain=rain))
        self.assertLessEqual(used, foretold)

    def test_isochrones(self):
        foretold, used = self.foretold_and_used(self.study(self.points(20) + '[output]\nisochrones = "1 min"\n'))
        self.assertLessEqual(used, foretold)
        self.assertGreater(used, self.plain[1] + 50e6, "isochrones that take no memory show nothing")

    def test_peaks(self):
        rain = 'formula = "i[mm/h] = 900 T^0.2 / (t[min] + 12)^0.85"\nreturn_periods = [2, 10, 100]'
        self.assert_foretold(*self.foretold_and_used(self.study(self.points(200), rain=rain)))
        self.assertTrue((self.data / "result/tables/peaks.csv").exists())


if __name__ == "__main__":
    unittest.main()
