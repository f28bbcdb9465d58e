"""The time GDAL's own programs take for what io_floor does: the check that the floor is one.

    gdal_yardstick.py DEM COVER FOLDER-OF-RESULT-RASTERS SCRATCH-FOLDER

Reads the inputs into memory, and writes each raster anew with the command's options, statistics and overviews, from an uncompressed
copy that is made before the clock starts. Writes lines "name TAB seconds": read_seconds, translate_seconds, statistics_seconds,
overviews_seconds.
"""
import os
import pathlib
import subprocess
import sys
import time

from osgeo import gdal

gdal.UseExceptions()
gdal.SetConfigOption("GDAL_NUM_THREADS", "ALL_CPUS")

BLOCKS = ["-co", "TILED=YES", "-co", "BLOCKXSIZE=256", "-co", "BLOCKYSIZE=256", "-co", "BIGTIFF=IF_SAFER"]
OVERVIEWS = ["--config", "ZSTD_LEVEL_OVERVIEW", "1", "--config", "GDAL_TIFF_OVR_BLOCKSIZE", "256"]


def seconds_of(*words):
    begun = time.perf_counter()
    subprocess.run(words, check=True, stdout=subprocess.DEVNULL, env=os.environ | {"GDAL_NUM_THREADS": "ALL_CPUS"})
    return time.perf_counter() - begun


def read_seconds(raster):
    return seconds_of("gdal_translate", "-q", "-of", "MEM", raster, "memory")


def statistics_seconds(raster):
    """Computes anew what gdal_translate has copied along from the source."""
    begun = time.perf_counter()
    dataset = gdal.Open(str(raster), gdal.GA_Update)
    dataset.GetRasterBand(1).ComputeStatistics(False)
    del dataset    # closes the file
    return time.perf_counter() - begun


def write_seconds(raster, scratch):
    """Seconds to translate a raster, to make its statistics, and to make its overviews."""
    plain, packed = scratch / "plain.tif", scratch / "packed.tif"
    seconds_of("gdal_translate", "-q", *BLOCKS, raster, plain)
    dataset = gdal.Open(str(raster))    # bands live only as long as their dataset
    band = dataset.GetRasterBand(1)
    is_real = band.DataType in (gdal.GDT_Float32, gdal.GDT_Float64)
    options = ["-co", "COMPRESS=ZSTD", "-co", "ZSTD_LEVEL=1", "-co", f"PREDICTOR={3 if is_real else 2}"]
    translate = seconds_of("gdal_translate", "-q", *BLOCKS, *options, plain, packed)
    statistics = statistics_seconds(packed)
    levels = [str(2 << level) for level in range(band.GetOverviewCount())]
    way = "average" if is_real or raster.stem == "spill_elevation" else "nearest"
    overviews = seconds_of("gdaladdo", "-q", "-r", way, *OVERVIEWS, packed, *levels) if levels else 0.0
    for path in scratch.iterdir():
        path.unlink()
    return translate, statistics, overviews


def main():
    dem, cover, rasters, scratch = (pathlib.Path(word) for word in sys.argv[1:5])
    scratch.mkdir(parents=True, exist_ok=True)
    print(f"read_seconds\t{read_seconds(dem) + read_seconds(cover):.4g}")
    parts = zip(*(write_seconds(raster, scratch) for raster in sorted(rasters.glob("*.tif"))))
    for name, seconds in zip(("translate", "statistics", "overviews"), parts):
        print(f"{name}_seconds\t{sum(seconds):.4g}")
    scratch.rmdir()


main()
