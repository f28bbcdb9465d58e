#!/usr/bin/python3
"""Soil groups from a raster: cells counted by cover, soil and slope of the land; curve number and runoff coefficient from them."""
import unittest

import numpy as np
from osgeo import gdal

from support import CommandTest, table, write_points, write_raster

BOOK = """code,name,n_typical,shallow_type,source,cn_a,cn_b,cn_c,cn_d,c,c_a,c_b,c_c,c_d
1,Grass,0.24,grassed waterway,test,39,61,74,80,,0.1,0.15,0.2,0.25
2,Street,0.011,pavement,test,98,98,98,98,0.9,,,,
"""
ROWS, COLUMNS = 40, 50
CURVE = {1: dict(zip("ABCD", (39, 61, 74, 80))), 2: dict.fromkeys("ABCD", 98)}
RUNOFF = {1: dict(zip("ABCD", (0.1, 0.15, 0.2, 0.25))), 2: dict.fromkeys("ABCD", 0.9)}


class Soils(CommandTest):
    """A plane that falls to the south by 4 % but for its eastern 10 columns, by 12 %; everything drains along columns, so that the
    cells of a point are those above it in its column."""

    def setUp(self):
        super().setUp()
        y, x = np.mgrid[0:ROWS, 0:COLUMNS]
        self.ground(values=np.where(x < 40, 200.0, 300.0) - np.where(x < 40, 0.08, 0.24) * y)
        self.cover_codes = np.where(y < 15, 1, 2).astype(np.uint8)
        self.cover(values=self.cover_codes)
        self.book(BOOK)
        self.soil = (1 + (y // 5) % 4).astype(np.uint8)
        write_points(self.folder / "points.geojson", [("west", (500_000 + 2 * 20 + 1, 5_400_000 - 2 * 38 - 1)),
                                                      ("east", (500_000 + 2 * 45 + 1, 5_400_000 - 2 * 38 - 1))])

    def study(self, surface=""):
        (self.folder / "study.toml").write_text(
            '[terrain]\nelevation = "dem.tif"\n[points]\nfile = "points.geojson"\nname = "name"\nmove_within = "0 m"\n'
            '[rain]\ntwo_year_24_hour = "90 mm"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n' + surface)
        return "study.toml"

    def soils(self, values=None, **options):
        write_raster(self.folder / "soils.tif", self.soil if values is None else values,
                     **({"kind": gdal.GDT_Byte, "unit": None} | options))

    def run_soils(self, surface='soil_group = "soils.tif"'):
        self.done("run", self.study(surface), "--replace")
        return self.result()["outlets"], table(self.folder / "result/tables/land.csv")

    def counted(self, soil, column):
        """Cells by cover and soil letter above row 38 of a column, from the arrays themselves."""
        counts = {}
        for cover, group in zip(self.cover_codes[:39, column], soil[:39, column]):
            key = (int(cover), " ABCD"[group].strip())
            counts[key] = counts.get(key, 0) + 1
        return counts

    def test_cells_are_counted_by_cover_soil_and_slope(self):
        self.soils()
        outlets, rows = self.run_soils()
        for name, column, slope in (("west", 20, "2 to 5 %"), ("east", 45, "10 to 30 %")):
            own = [row for row in rows if row["point"] == name]
            self.assertEqual({(int(row["cover_code"]), row["soil_group"]): int(row["cells"]) for row in own},
                             self.counted(self.soil, column))
            self.assertEqual({row["land_slope"] for row in own}, {slope})
            self.assertEqual([row["cells"] for row in own], [row["own_cells"] for row in own])
            land = next(outlet for outlet in outlets if outlet["name"] == name)["land"]
            self.assertEqual(sum(kind["area_m2"] for kind in land), 39 * 4)

    def test_curve_number_and_runoff_coefficient_follow_from_the_counts(self):
        self.soils()
        outlets, _ = self.run_soils()
        counts = self.counted(self.soil, 20)
        measures = outlets[0]["methods"]["measures"]
        for measure, book in (("curve_number", CURVE), ("runoff_coefficient", RUNOFF)):
            mean = sum(cells * book[cover][group] for (cover, group), cells in counts.items()) / 39
            self.assertAlmostEqual(measures[measure], mean, places=4)

    def test_a_raster_of_one_group_says_what_that_group_stated_for_all_says(self):
        self.soils(np.full((ROWS, COLUMNS), 3, np.uint8))
        from_raster, rows = self.run_soils()
        stated, stated_rows = self.run_soils('soil_group = "C"')
        self.assertEqual(from_raster, stated)
        self.assertEqual(rows, stated_rows)

    def test_cells_without_a_group_are_told_and_leave_their_catchment_without_curve_number(self):
        soil = self.soil.copy()
        soil[3, 20] = 0
        soil[4, 20] = 13
        self.soils(soil, nodata=0)
        outlets, _ = self.run_soils()
        notice = next(n for n in self.result()["notices"] if n["notice"] == "soil-unknown")
        self.assertIn("no value (1 cell), value 13 (1 cell)", notice["text"])
        west, east = outlets
        self.assertIsNone(west["methods"]["measures"]["curve_number"])
        self.assertIsNotNone(east["methods"]["measures"]["curve_number"])
        lag = next(time for time in west["methods"]["times"] if time["method"] == "lump-nrcs-lag")
        self.assertIn("2 cells of the catchment have no soil group", lag["why_not"])
        groups = {g["group"]: g["cells"] for g in self.result()["data"]["soil_groups"]}
        self.assertEqual(groups, {None: 2, "A": 498, "B": 500, "C": 500, "D": 500})

    def test_values_get_their_meaning_from_the_study_and_the_fallback_stands_in(self):
        soil = np.where(self.soil == 4, 14, self.soil).astype(np.uint8)
        soil[3, 20] = 0
        self.soils(soil)
        outlets, rows = self.run_soils('soil_group = "soils.tif"\nfallback_soil_group = "A"\n'
                                       'soil_classes = { 1 = "A", 2 = "B", 3 = "C", 14 = "D" }')
        self.assertEqual(outlets[0]["land"][0]["soil_group"], "A")
        west = {(int(row["cover_code"]), row["soil_group"]): int(row["cells"]) for row in rows if row["point"] == "west"}
        self.assertEqual(west, self.counted(self.soil, 20))
        notice = next(n for n in self.result()["notices"] if n["notice"] == "soil-unknown")
        self.assertIn("The soil group A was taken", notice["text"])

    def test_a_soil_raster_in_degrees_is_seen_through_the_grid_of_the_elevations(self):
        write_raster(self.folder / "plain.tif", self.soil, kind=gdal.GDT_Byte, unit=None)
        gdal.Warp(str(self.folder / "soils.tif"), str(self.folder / "plain.tif"), dstSRS="EPSG:4326", xRes=2e-6, yRes=2e-6, resampleAlg="near", dstNodata=0)
        _, rows = self.run_soils()
        west = {(int(row["cover_code"]), row["soil_group"]): int(row["cells"]) for row in rows if row["point"] == "west"}
        self.assertEqual(west, self.counted(self.soil, 20))
        self.assertIn("soil-transformed", {n["notice"] for n in self.result()["notices"]})

    def test_a_check_says_the_memory_of_a_soil_raster(self):
        self.soils()
        self.assertIn("soil groups: 40 rows × 50 columns", self.done("check", self.study('soil_group = "soils.tif"')))
        self.assertIn("soil group: B everywhere", self.done("check", self.study('soil_group = "B"')))

    def test_a_raster_that_knows_no_soil_is_refused(self):
        self.soils(np.full((ROWS, COLUMNS), 9, np.uint8))
        self.refused(1, "run", self.study('soil_group = "soils.tif"'),
                     says=("'soils.tif' gives no cell a soil group", "value 9 (2000 cells)", "soil_classes"))
        self.soils(np.stack([self.soil, self.soil]))
        self.refused(1, "run", self.study('soil_group = "soils.tif"'), says=("several bands", "soil_band = 1"))


if __name__ == "__main__":
    unittest.main()
