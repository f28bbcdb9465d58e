#!/usr/bin/python3
"""However the same cells lie in their files (strips, tiles, one block, a mosaic, packed), directions and all rasters are the same bytes."""
import os
import unittest

import numpy as np
from osgeo import gdal

from support import CommandTest

ROWS, COLUMNS = 530, 620   # of tiles of 256: whole ones and parts of them, both ways
NODATA = -9999.0
# What names the inputs, with their sums.
NAMES_INPUTS = ("result.json", "report.html", "sheets")


def ground():
    """A valley with noise; a quarter is level in steps, and there are voids, so that every stage has something to do."""
    random = np.random.default_rng(11)
    y, x = np.mgrid[0:ROWS, 0:COLUMNS]
    z = 300 + 20 * np.sin(x / 41.0) * np.cos(y / 57.0) - 0.08 * y + random.random((ROWS, COLUMNS))
    z[:, :COLUMNS // 4] = np.round(z[:, :COLUMNS // 4])
    z[200:260, 300:420] = NODATA
    z[random.random(z.shape) < 0.0005] = NODATA
    return z.astype(np.float32)


def cover():
    y, x = np.mgrid[0:ROWS, 0:COLUMNS]
    return (1 + (x // 37 + y // 23) % 3).astype(np.uint8)


class Layouts(CommandTest):
    def setUp(self):
        super().setUp()
        self.book()
        self.values = {"dem": ground(), "cover": cover()}

    def write(self, stem, layout, options, window=None):
        """One of the two rasters, or a window of it, as a GeoTIFF with creation options."""
        row, column, rows, columns = window or (0, 0, ROWS, COLUMNS)
        values = self.values[stem][row:row + rows, column:column + columns]
        corner = (500_000.0 + 2 * column, 5_400_000.0 - 2 * row)
        name = f"{stem}_{layout}.tif"
        if stem == "dem":
            return self.ground(name, values=values, corner=corner, kind=gdal.GDT_Float32, nodata=NODATA, options=options)
        return self.cover(name, values=values, corner=corner, options=options)

    def mosaic(self, stem):
        """Six parts with borders that are none of the engine's, each laid out in another way."""
        parts = []
        for row, rows in ((0, 201), (201, ROWS - 201)):
            for column, columns in ((0, 97), (97, 300), (397, COLUMNS - 397)):
                options = (["TILED=YES", "BLOCKXSIZE=32", "BLOCKYSIZE=48"], ["BLOCKYSIZE=7"], ["COMPRESS=LZW"])[len(parts) % 3]
                parts.append(str(self.write(stem, f"part{len(parts)}", options, (row, column, rows, columns))))
        path = self.folder / f"{stem}_mosaic.vrt"
        mosaic = gdal.BuildVRT(str(path), parts)
        mosaic.GetRasterBand(1).SetUnitType("m" if stem == "dem" else "")   # which mosaics do not take over
        mosaic.FlushCache()

    def run_layout(self, layout, **more):
        suffix = "vrt" if layout == "mosaic" else "tif"
        self.done("run", "--elevation", f"dem_{layout}.{suffix}", "--cover", f"cover_{layout}.{suffix}", "--book", "book.csv", "--rain", "90 mm",
                  "--out", layout, env={**os.environ, **more})
        return {str(path.relative_to(self.folder / layout)): path.read_bytes() for path in sorted((self.folder / layout).rglob("*"))
                if path.is_file() and not set(path.parts) & set(NAMES_INPUTS)}

    def block_of(self, name):
        return tuple(gdal.Open(str(self.folder / name)).GetRasterBand(1).GetBlockSize())

    def test_all_files_are_the_same_bytes_from_five_layouts(self):
        layouts = {"strips": ["BLOCKYSIZE=3"], "tiles": ["TILED=YES", "BLOCKXSIZE=80", "BLOCKYSIZE=112"], "block": [f"BLOCKYSIZE={ROWS}", "COMPRESS=LZW"],
                   "packed": ["TILED=YES", "BLOCKXSIZE=128", "BLOCKYSIZE=128", "COMPRESS=DEFLATE"]}
        for layout, options in layouts.items():
            for stem, predictor in (("dem", 3), ("cover", 2)):
                self.write(stem, layout, options + ([f"PREDICTOR={predictor}"] if layout == "packed" else []))
        for stem in ("dem", "cover"):
            self.mosaic(stem)
            self.assertEqual(self.block_of(f"{stem}_strips.tif"), (COLUMNS, 3))
            self.assertEqual(self.block_of(f"{stem}_tiles.tif"), (80, 112))
            self.assertEqual(self.block_of(f"{stem}_block.tif"), (COLUMNS, ROWS))
            packed = gdal.Open(str(self.folder / f"{stem}_packed.tif"))
            self.assertEqual(packed.GetMetadataItem("COMPRESSION", "IMAGE_STRUCTURE"), "DEFLATE")
            self.assertEqual(packed.GetMetadataItem("PREDICTOR", "IMAGE_STRUCTURE"), "3" if stem == "dem" else "2")
            np.testing.assert_array_equal(gdal.Open(str(self.folder / f"{stem}_mosaic.vrt")).ReadAsArray(), self.values[stem])
        expected = self.run_layout("strips")
        rasters = {name for name in expected if name.startswith("rasters/") and name.endswith(".tif")}
        self.assertEqual(len(rasters), 6)
        directions = gdal.Open(str(self.folder / "strips/rasters/flow_azimuth.tif")).ReadAsArray()
        self.assertEqual(len(np.unique(directions)), 10)   # eight ways, roots, voids
        # Two of them are read and written through a cache that does not hold the elevations.
        for layout, cache in (("tiles", "1"), ("block", ""), ("mosaic", "1"), ("packed", "")):
            found = self.run_layout(layout, **({"GDAL_CACHEMAX": cache} if cache else {}))
            self.assertEqual(set(found), set(expected), layout)
            differing = [name for name in expected if found[name] != expected[name]]
            self.assertEqual(differing, [], layout)


if __name__ == "__main__":
    unittest.main()
