"""What the tests of the module share: the helpers of the end-to-end tests, and the command to compare with."""
import pathlib
import subprocess
import sys

import numpy as np
import pytest
from osgeo import gdal

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1] / "end_to_end"))
import support


@pytest.fixture
def command(tmp_path):
    """Runs the command on rasters written from arrays; gives the rasters of its result by name."""

    def run(ground, cover, *words, book="nlcd", rain="90 mm", study="", **raster):
        support.write_raster(tmp_path / "dem.tif", ground, **raster)
        support.write_raster(tmp_path / "cover.tif", cover, cell=raster.get("cell", 2.0), kind=gdal.GDT_Byte, unit=None)
        (tmp_path / "study.toml").write_text(study, encoding="utf-8")
        subprocess.run([support.COMMAND, "run", "study.toml", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", str(book), "--rain", rain,
                        "--replace", "--quiet", *words], cwd=tmp_path, check=True)
        return lambda name: gdal.Open(str(tmp_path / "result/rasters" / f"{name}.tif")).ReadAsArray()

    return run


@pytest.fixture(scope="session")
def town(tmp_path_factory):
    """The demo study's folder."""
    folder = tmp_path_factory.mktemp("demo") / "town"
    subprocess.run([support.COMMAND, "demo", str(folder)], check=True, capture_output=True)
    return folder


@pytest.fixture
def ground():
    return support.hills()


@pytest.fixture
def cover(ground):
    """Grass, street and wood of the NLCD legend in patches."""
    codes = np.array([71, 24, 41, 82], np.uint8)
    y, x = np.mgrid[0:ground.shape[0], 0:ground.shape[1]]
    return codes[(y // 7 + x // 11) % 4]
