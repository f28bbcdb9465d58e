#!/usr/bin/python3
"""What is another from storm to storm stands in peaks.csv, and what is not does not: rough sheet flow, which hangs on the intensity, beside a
long way of shallow flow, which does not."""
import unittest

import numpy as np

from support import CommandTest, table, write_points, write_raster

CELL = 2.0
WOOD, STREET = 1, 2
LEFT, RIGHT = 14, 130          # cells on either side of the mouth: 28 m of sheet flow alone, and 260 m of mostly shallow flow
BOOK = """code,name,n_typical,shallow_k_m_s,c,source
1,Wood,0.8,0.767,0.9,test
2,Lane,0.011,0.767,0.9,test
"""
RAIN = """duration_min,intensity_2yr_mm_h,intensity_100yr_mm_h
5,22,{0}
30,20,{1}
60,18,{2}
240,12,{3}
"""
STUDY = """report_units = "si"
[terrain]
elevation = "dem.tif"
[surface]
cover = "cover.tif"
book = "book.csv"
[points]
file = "points.geojson"
name = "name"
move_within = "0.1 m"
[rain]
file = "rain.csv"
return_periods = [2, 100]
two_year_24_hour = "60 mm"
[timing]
sheet = "{sheet}"
sheet_limit_rule = "stated"
raster_return_period = 2
[output]
subareas = "all"
"""


class StormsDiffer(CommandTest):
    def run_strip(self, sheet="kinematic", rare=(120, 110, 100, 60)):
        """A strip one cell wide that falls from both ends to its mouth, with a point on either side of that."""
        x = np.arange(LEFT + 1 + RIGHT)
        write_raster(self.folder / "dem.tif", (100 + 0.02 * CELL * np.abs(x - LEFT))[np.newaxis], cell=CELL)
        write_raster(self.folder / "cover.tif", np.where(x < LEFT, WOOD, STREET).astype(np.uint8)[np.newaxis], cell=CELL, kind=1, unit=None)
        places = {"Grove": LEFT - 1, "Mouth": LEFT, "Lane": LEFT + 1}
        write_points(self.folder / "points.geojson", [(name, (500_000 + CELL * (at + 0.5), 5_400_000 - CELL / 2)) for name, at in places.items()])
        (self.folder / "book.csv").write_text(BOOK)
        (self.folder / "rain.csv").write_text(RAIN.format(*rare))
        (self.folder / "study.toml").write_text(STUDY.format(sheet=sheet))
        self.repeated("run", "study.toml", "-q")
        return {name: table(self.folder / f"result/tables/{name}.csv") for name in ("peaks", "storms", "subareas")}

    def differs(self, tables):
        return {(r["point"], r["return_period_years"]): r["differs_from_raster_storm"] for r in tables["peaks"]}

    def test_the_path_and_the_last_subarea_are_others_in_a_fiercer_storm_and_the_row_says_so(self):
        tables = self.run_strip()
        last = {r["return_period_years"]: r["last_subarea"] for r in tables["peaks"] if r["point"] == "Mouth"}
        self.assertEqual(last, {"2": "Grove", "100": "Lane"})
        heads = {r["return_period_years"]: r["governing_head_x"] for r in tables["storms"] if r["point"] == "Mouth"}
        self.assertNotEqual(heads["2"], heads["100"])
        differs = self.differs(tables)
        self.assertEqual(differs["Mouth", "100"], "governing path, last subarea")
        self.assertEqual({differs[name, years] for name in ("Grove", "Lane") for years in ("2", "100")} | {differs["Mouth", "2"]}, {""})

    def test_the_subareas_that_make_the_peak_are_others_where_short_rain_is_far_fiercer(self):
        tables = self.run_strip(rare=(400, 80, 45, 14))
        makers = {r["return_period_years"]: r["peak_subareas"] for r in tables["peaks"] if r["point"] == "Mouth"}
        self.assertNotEqual(makers["2"], makers["100"])
        self.assertIn("peak subareas", self.differs(tables)["Mouth", "100"])
        self.assertEqual(self.differs(tables)["Mouth", "2"], "")

    def test_where_no_time_hangs_on_the_storm_nothing_differs(self):
        tables = self.run_strip(sheet="nrcs")
        self.assertEqual(set(self.differs(tables).values()), {""})
        self.assertEqual(len({r["last_subarea"] for r in tables["peaks"] if r["point"] == "Mouth"}), 1)


if __name__ == "__main__":
    unittest.main()
