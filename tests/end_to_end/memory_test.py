#!/usr/bin/python3
"""A run that needs more memory than there is is refused with numbers before it begins; no more cells are taken than can be numbered."""
import unittest

from support import CommandTest, starts_within, system_of, within_address_space

GIB = 1 << 30


def header(rows, columns, kind="Float32"):
    """A raster of any size in a few lines: a mosaic without sources, all of it void."""
    return (f'<VRTDataset rasterXSize="{columns}" rasterYSize="{rows}"><SRS>{system_of(25832).ExportToWkt().replace(chr(34), "&quot;")}</SRS>'
            f"<GeoTransform>500000, 1, 0, 5400000, 0, -1</GeoTransform>"
            f'<VRTRasterBand dataType="{kind}" band="1"><NoDataValue>-9999</NoDataValue><UnitType>m</UnitType></VRTRasterBand></VRTDataset>')


class Memory(CommandTest):
    @staticmethod
    def limited():
        """Options of a process with 2 GiB of address space."""
        return within_address_space(2 * GIB)

    def setUp(self):
        super().setUp()
        self.words = self.small_study()
        if not starts_within(2 * GIB):
            self.skipTest("the command does not start within 2 GiB of address space")

    def huge(self, *form):
        (self.folder / "dem.vrt").write_text(header(*form))
        return ["--elevation", "dem.vrt", *self.words[2:]]

    def test_a_run_beyond_the_memory_is_refused_with_numbers_before_it_begins(self):
        # 16 bytes a cell, 350 MB, and 34 MB for points that may be found: 900 million cells need 14.78 GB.
        self.refused(3, "run", *self.huge(30_000, 30_000), **self.limited(),
                     says=("900 million cells", "14.8 GB", "2.15 GB", "ulimit -v", "gdal_translate -projwin"))
        self.assertFalse((self.folder / "result").exists())

    def test_wide_elevations_need_more(self):
        self.refused(3, "run", *self.huge(30_000, 30_000, "Float64"), **self.limited(), says=("22 GB",))

    def test_check_says_it_too(self):
        run = self.rillclock("check", *self.huge(30_000, 30_000), **self.limited())
        self.assertEqual(run.returncode, 3, run.stderr)
        self.assertIn("cost: about 14.8 GB of memory (the limit set for the process (ulimit -v) allows 2.15 GB)", run.stdout)
        self.assertIn("would stop the run here: a run over 900 million cells needs about 14.8 GB", run.stderr)

    def test_what_fits_runs_within_its_limit(self):
        self.done("run", *self.words, "--threads", "2", **self.limited())

    def test_more_cells_than_can_be_numbered_are_refused(self):
        # 65536² is 2³², two more than the greatest number of cells.
        self.refused(1, "run", *self.huge(65_536, 65_536), says=("dem.vrt", "65536 x 65536 cells", "at most 4294967294", "gdal_translate -projwin"))


if __name__ == "__main__":
    unittest.main()
