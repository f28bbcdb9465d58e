"""What the end-to-end tests share: running the command, and writing small rasters, books, points and studies."""
import csv
import hashlib
import json
import os
import pathlib
import resource
import shutil
import subprocess
import tempfile
import unittest

import numpy as np
from osgeo import gdal, ogr, osr

gdal.UseExceptions()
ogr.UseExceptions()

SOURCE = pathlib.Path(__file__).resolve().parents[2]
COMMAND = os.environ.get("RILLCLOCK_COMMAND") or str(SOURCE / "build/dev/rillclock")
VERIFY = SOURCE / "tests/reference/python/verify_result.py"
FOOT, INCH = 0.3048, 0.0254
ISOCHRONES = 'isochrones = "10 min"\n'   # as the demo's study states them

BOOK = """code,name,n_typical,shallow_type,water_depth_m,source
1,Grass,0.24,grassed waterway,,test
2,Street,0.011,pavement,,test
3,Wood,0.4,contour crops or woodland,,test
4,Pond,,,1.5,test
"""


RUNS = {}   # what CommandTest.repeated has run, by words and files
DEMOS = {}  # what DemoTest has run, by what is in its study
RUNS_FOLDER = tempfile.TemporaryDirectory(prefix="rillclock-runs-")


def system_of(code):
    """A reference system by its EPSG number or by a text that defines it."""
    system = osr.SpatialReference()
    system.SetFromUserInput(f"EPSG:{code}" if isinstance(code, int) else code)
    system.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
    return system


def write_raster(path, values, cell=2.0, corner=(500_000.0, 5_400_000.0), epsg=25832, kind=gdal.GDT_Float64, nodata=None,
                 unit="m", scale=None, offset=None, south_up=False, transform=None, options=()):
    """A GeoTIFF of one band or, where `values` has three axes, of several; row 0 of `values` is the northern one."""
    bands = values[np.newaxis] if values.ndim == 2 else values
    width, height = (cell, cell) if np.isscalar(cell) else cell
    _, rows, columns = bands.shape
    file = gdal.GetDriverByName("GTiff").Create(str(path), columns, rows, len(bands), kind, list(options))
    left, top = corner
    file.SetGeoTransform(transform or ((left, width, 0, top - rows * height, 0, height) if south_up
                                       else (left, width, 0, top, 0, -height)))
    if epsg:
        file.SetProjection(system_of(epsg).ExportToWkt())
    for number, band_values in enumerate(bands, 1):
        band = file.GetRasterBand(number)
        band.WriteArray(band_values[::-1] if south_up else band_values)
        if nodata is not None:
            band.SetNoDataValue(nodata)
        if unit:
            band.SetUnitType(unit)
        if scale is not None:
            band.SetScale(scale)
            band.SetOffset(offset or 0.0)
    file.FlushCache()
    return path


def write_points(path, points, epsg=25832):
    """GeoJSON of named places, {"name": (x, y)} or a list of pairs, in the given system."""
    to_wgs84 = osr.CoordinateTransformation(system_of(epsg), system_of(4326))
    features = []
    for name, (x, y) in points:
        longitude, latitude, _ = to_wgs84.TransformPoint(x, y)
        features.append({"type": "Feature", "properties": {"name": name},
                         "geometry": {"type": "Point", "coordinates": [longitude, latitude]}})
    pathlib.Path(path).write_text(json.dumps({"type": "FeatureCollection", "features": features}))


def hills(rows=40, columns=50, seed=3, relief=8.0):
    """Ground that falls to the south with hills on it; no two cells are level."""
    random = np.random.default_rng(seed)
    y, x = np.mgrid[0:rows, 0:columns]
    ground = 100 + relief * np.sin(x / 7.0) * np.cos(y / 9.0) - 0.5 * y + random.random((rows, columns)) * 0.05
    return np.round(ground, 3)


def table(path):
    with open(path, encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


def within_address_space(size):
    """Options of a process with so many bytes of address space."""
    return {"preexec_fn": lambda: resource.setrlimit(resource.RLIMIT_AS, (size, size))}


def starts_within(size):
    """Whether the command starts within so many bytes of address space. The sanitizers take more than any limit of use."""
    return subprocess.run([COMMAND, "--version"], capture_output=True, check=False, **within_address_space(size)).returncode == 0


def class_folder(test_class, name):
    """A folder for all tests of a class."""
    folder = pathlib.Path(tempfile.mkdtemp(prefix=f"rillclock-{name}-"))
    test_class.addClassCleanup(shutil.rmtree, folder, ignore_errors=True)
    return folder


def demo_town(town, with_isochrones=False):
    """The demo in the folder `town`. Its isochrones take as long as all the rest of its run: tests have them where they look at them."""
    subprocess.run([COMMAND, "demo", town], check=True, capture_output=True)
    if not with_isochrones:
        study = pathlib.Path(town) / "study.toml"
        text = study.read_text()
        assert ISOCHRONES in text
        study.write_text(text.replace(ISOCHRONES, ""))


class CommandTest(unittest.TestCase):
    """A test with a folder of its own, in which the command runs."""

    def setUp(self):
        self.folder = pathlib.Path(tempfile.mkdtemp(prefix="rillclock-test-"))
        self.addCleanup(shutil.rmtree, self.folder, ignore_errors=True)

    def rillclock(self, *words, **options):
        options = {"cwd": self.folder, "capture_output": True, "text": True, "check": False, "timeout": 120} | options
        return subprocess.run([COMMAND, *map(str, words)], **options)

    def done(self, *words, **options):
        """Runs what must succeed; gives its standard output."""
        run = self.rillclock(*words, **options)
        self.assertEqual(run.returncode, 0, run.stderr)
        return run.stdout

    def repeated(self, *words):
        """As `rillclock`, for what many tests of a file begin with: the same words over the same files are run once, and what they left is
        put there again."""
        files = [path for path in sorted(self.folder.rglob("*")) if path.is_file()]
        key = (words, *((str(path.relative_to(self.folder)), hashlib.sha256(path.read_bytes()).digest()) for path in files))
        if key not in RUNS:
            kept = pathlib.Path(RUNS_FOLDER.name) / str(len(RUNS))
            RUNS[key] = self.rillclock(*words), kept
            shutil.copytree(self.folder, kept)
        run, kept = RUNS[key]
        shutil.copytree(kept, self.folder, dirs_exist_ok=True)
        self.assertEqual(run.returncode, 0, run.stderr)
        return run

    def refused(self, status, *words, says=(), **options):
        """Runs what must fail with a status and one clear sentence that holds all of `says`; leaves no result behind."""
        run = self.rillclock(*words, **options)
        self.assertEqual(run.returncode, status, run.stdout + run.stderr)
        self.assertEqual(run.stdout, "")
        sentence = run.stderr.strip().splitlines()[-1]
        self.assertTrue(sentence.startswith("rillclock: "), run.stderr)
        for part in says:
            self.assertIn(part, sentence)
        self.assertNotIn("ERROR", sentence)
        self.assert_nothing_left()
        return sentence

    def assert_nothing_left(self, folder=None):
        leavings = [p.name for p in (folder or self.folder).iterdir() if "making" in p.name or "lock" in p.name or "aside" in p.name]
        self.assertEqual(leavings, [])

    def ground(self, name="dem.tif", values=None, **options):
        return write_raster(self.folder / name, hills() if values is None else values, **options)

    def cover(self, name="cover.tif", values=None, **options):
        codes = np.ones((40, 50), np.uint8) if values is None else values
        return write_raster(self.folder / name, codes, **({"kind": gdal.GDT_Byte, "unit": None} | options))

    def book(self, text=BOOK):
        (self.folder / "book.csv").write_text(text)

    def small_study(self):
        """Ground, cover and book in the test's folder; the words that run them."""
        self.ground()
        self.cover()
        self.book()
        return ["--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "90 mm"]

    def run_with_pond(self):
        """Runs the small study with open water in its middle, class 4 on level ground."""
        self.small_study()
        ground = hills()
        ground[15:25, 15:35] = ground[15:25, 15:35].min()
        self.ground(values=ground)
        codes = np.ones(ground.shape, np.uint8)
        codes[15:25, 15:35] = 4
        self.cover(values=codes)
        self.done("run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "3.6 in")

    def result(self, folder="result"):
        return json.loads((self.folder / folder / "result.json").read_text(encoding="utf-8"))


class DemoTest(CommandTest):
    """The demo, run once for all tests of a file that have the same study, in `kept`, which no test changes; with what a class adds to it."""

    more = ""
    with_isochrones = False

    @classmethod
    def setUpClass(cls):
        key = (cls.more, cls.with_isochrones)
        if key not in DEMOS:
            kept = pathlib.Path(RUNS_FOLDER.name) / f"demo-{len(DEMOS)}"
            kept.mkdir()
            demo_town(kept / "town", cls.with_isochrones)
            plain = (kept / "town/study.toml").read_text()
            (kept / "town/study.toml").write_text(plain + cls.more)
            DEMOS[key] = kept, plain, subprocess.run([COMMAND, "run", "town/study.toml"], cwd=kept, check=True, capture_output=True, text=True)
        cls.kept, cls.plain, cls.said = DEMOS[key]
