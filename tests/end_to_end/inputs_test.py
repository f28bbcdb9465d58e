#!/usr/bin/python3
"""Inputs that are wrong: each is refused with a status and one sentence that names the file, the fault and what mends it."""
import pathlib
import unittest

import numpy as np
from osgeo import gdal
from pyproj import Geod, Transformer

from support import BOOK, CommandTest, hills, table, write_points

WORDS = ["--cover", "cover.tif", "--book", "book.csv", "--rain", "90 mm"]


class Elevations(CommandTest):
    def setUp(self):
        super().setUp()
        self.cover()
        self.book()

    def refused_dem(self, name, *parts, status=1, words=()):
        return self.refused(status, "run", "--elevation", name, *WORDS, *words, says=(name, *parts))

    def test_a_file_that_is_not_there(self):
        self.refused_dem("missing.tif", "does not exist")

    def test_a_folder(self):
        (self.folder / "tiles").mkdir()
        self.refused_dem("tiles", "is a folder")

    def test_a_text_under_a_rasters_name(self):
        (self.folder / "dem.tif").write_text("These are not the elevations you are looking for.\n")
        self.refused_dem("dem.tif", "it is a text")

    def test_an_empty_file(self):
        (self.folder / "dem.tif").touch()
        self.refused_dem("dem.tif", "0 bytes")

    def test_a_file_that_was_cut_short(self):
        path = self.ground(values=hills(400, 500), options=["COMPRESS=DEFLATE", "TILED=YES"])
        content = path.read_bytes()
        path.write_bytes(content[:len(content) // 2])
        self.refused_dem("dem.tif", "cut short")

    def test_nothing_but_void(self):
        self.ground(values=np.full((40, 50), -9999.0), nodata=-9999.0)
        self.refused_dem("dem.tif", "every cell is void")

    def test_no_reference_system(self):
        self.ground(epsg=None)
        self.refused_dem("dem.tif", "no reference system", "gdal_edit.py -a_srs EPSG:nnnnn dem.tif")

    def test_a_rotated_grid(self):
        self.ground(transform=(500_000.0, 2.0, 0.3, 5_400_000.0, 0.3, -2.0))
        self.refused_dem("dem.tif", "rotated", "gdalwarp")

    def test_web_mercator_gives_lengths_areas_and_times_of_the_ground(self):
        """A plane falling by columns of the map, beside the same numbers on a plane grid with cells of the true size (pyproj)."""
        plane = 200 - 0.1 * np.add.outer(np.arange(40.0), 0.03 * np.arange(50.0))
        self.book()
        geodesic = Geod(ellps="WGS84")
        for latitude in (12.0, 47.3, 63.0):
            _, y = Transformer.from_crs(4326, 3857, always_xy=True).transform(9.0, latitude)
            corner = (1_000_000.0, round(y / 2) * 2.0)
            self.ground(values=plane, epsg=3857, corner=corner)
            self.cover(epsg=3857, corner=corner)
            self.done("run", "--elevation", "dem.tif", *WORDS, "--replace")
            web = self.result()
            self.assertIn("web-mercator", {notice["notice"] for notice in web["notices"]})
            to_degrees = Transformer.from_crs(3857, 4326, always_xy=True)
            west, south = to_degrees.transform(corner[0] + 50, corner[1] - 42)
            east, north = to_degrees.transform(corner[0] + 52, corner[1] - 40)
            sides = (geodesic.inv(west, (north + south) / 2, east, (north + south) / 2)[2], geodesic.inv(west, south, west, north)[2])
            self.ground(values=plane, cell=sides)
            self.cover(cell=sides)
            self.done("run", "--elevation", "dem.tif", *WORDS, "--replace")
            ground = self.result()
            for of_web, of_ground in zip(web["outlets"], ground["outlets"]):
                for key in ("area_m2", "time_of_concentration_s"):
                    self.assertAlmostEqual(of_web[key] / of_ground[key], 1, delta=2e-4, msg=(latitude, key))
                for path in ("governing_path", "longest_path"):
                    self.assertAlmostEqual(of_web[path]["length_m"] / of_ground[path]["length_m"], 1, delta=2e-5)

    def test_several_bands(self):
        self.ground(values=np.stack([hills(), hills(seed=4)]))
        self.refused_dem("dem.tif", "several bands", "band = 1")

    def test_a_grid_in_feet_that_does_not_say_how_high_is_measured(self):
        self.ground(epsg=2277, corner=(3_100_000.0, 10_100_000.0), unit=None)
        self.refused_dem("dem.tif", "does not say in what unit", 'elevation_unit = "ft"')

    def test_units_that_contradict_each_other(self):
        self.ground(unit="m")
        (self.folder / "study.toml").write_text(
            '[terrain]\nelevation = "dem.tif"\nelevation_unit = "ft"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n'
            '[rain]\ntwo_year_24_hour = "90 mm"\n')
        self.refused(1, "run", "study.toml", says=("dem.tif", "contradictory", "foot", "metre"))

    def test_a_picture_with_a_palette(self):
        path = self.ground(values=np.ones((40, 50), np.uint8), kind=gdal.GDT_Byte, unit=None)
        file = gdal.Open(str(path), gdal.GA_Update)
        colours = gdal.ColorTable()
        colours.SetColorEntry(1, (200, 100, 0))
        file.GetRasterBand(1).SetColorTable(colours)
        file = None
        self.refused_dem("dem.tif", "palette")

    def test_a_mosaic_that_lacks_a_tile(self):
        self.ground("left.tif")
        self.ground("right.tif", corner=(500_100.0, 5_400_000.0))
        gdal.BuildVRT(str(self.folder / "all.vrt"), [str(self.folder / "left.tif"), str(self.folder / "right.tif")]).FlushCache()
        self.done("run", "--elevation", "all.vrt", *WORDS, "--fallback-class", "1", "--out", "whole")
        (self.folder / "right.tif").unlink()
        self.refused_dem("all.vrt", "right.tif", words=["--fallback-class", "1"])

    def test_relief_that_cannot_be_brings_a_notice_that_names_units_first(self):
        self.ground(values=hills() * 1000.0)
        run = self.rillclock("run", "--elevation", "dem.tif", *WORDS)
        self.assertEqual(run.returncode, 0, run.stderr)
        first = next(line for line in run.stderr.splitlines() if line.startswith("notice: "))
        self.assertIn("check the vertical unit first", first)
        self.assertIn("Check this first. The ground falls", run.stdout)
        notices = self.result()["notices"]
        self.assertEqual(notices[0]["notice"], "relief-cannot-be")
        self.assertEqual(notices[0]["threshold"], 20)


class Cover(CommandTest):
    def setUp(self):
        super().setUp()
        self.ground()
        self.book()

    def refused_cover(self, *parts):
        return self.refused(1, "run", "--elevation", "dem.tif", *WORDS, says=parts)

    def test_cover_of_another_place(self):
        self.cover(corner=(700_000.0, 5_400_000.0))
        self.refused_cover("cover.tif", "does not overlap")

    def test_unknown_classes_are_listed_with_their_counts_and_accepted_with_a_fallback(self):
        codes = np.ones((40, 50), np.uint8)
        codes[:3, :4], codes[10, 10], codes[30:, 40:] = 77, 250, 0
        self.cover(values=codes, nodata=0)
        sentence = self.refused_cover("cover.tif", "class 77 (12 cells)", "class 250 (1 cell)", "no cover at all (100 cells)",
                                      "--fallback-class")
        self.assertIn("fallback_class = ", sentence)
        self.done("run", "--elevation", "dem.tif", *WORDS, "--fallback-class", "2")
        notice = next(n for n in self.result()["notices"] if n["notice"] == "cover-unknown")
        self.assertIn("class 77 (12 cells)", notice["text"])

    def test_a_fallback_must_be_in_the_book(self):
        self.cover()
        self.refused(1, "run", "--elevation", "dem.tif", *WORDS, "--fallback-class", "99", says=("99", "book.csv"))
        self.refused(1, "run", "--elevation", "dem.tif", *WORDS, "--fallback-class", "grass", says=("grass",))

    def test_rows_of_a_book_that_are_wrong(self):
        self.cover()
        good = BOOK.splitlines()
        for row, parts in (("5,Bare,-0.1,nearly bare,,test", ("line 6", "n_typical")),
                           ("5,Bare,,nearly bare,,test", ("line 6", "n_typical")),
                           ("five,Bare,0.1,nearly bare,,test", ("line 6", "code", "five")),
                           ("1,Bare,0.1,nearly bare,,test", ("1",)),
                           ("5,Bare,0.1,neary bare,,test", ("line 6", "did you mean nearly bare?")),
                           ("5,Bare,0.1,nearly bare,,", ("line 6", "source")),
                           ("5,Bare,0.1", ("line 6",))):
            self.book("\n".join([*good, row]) + "\n")
            self.refused(1, "run", "--elevation", "dem.tif", *WORDS, says=("book.csv", *parts))

    def test_a_book_that_is_not_there(self):
        self.cover()
        (self.folder / "book.csv").unlink()
        self.refused_cover("book.csv")
        self.refused(1, "run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "NLCD2", "--rain", "90 mm", says=("NLCD2",))


class Points(CommandTest):
    def setUp(self):
        super().setUp()
        ground = hills()
        ground[16:27, 0:12] = -9999.0
        self.words = self.small_study()
        self.ground(values=ground, nodata=-9999.0)

    def run_points(self, points):
        write_points(self.folder / "points.geojson", points)
        return self.rillclock("run", *self.words, "--points", "points.geojson")

    def at(self, row, column):
        return 500_000 + 2 * column + 1, 5_400_000 - 2 * row - 1

    def test_points_that_cannot_be_used_are_told_one_by_one(self):
        run = self.run_points([("good", self.at(30, 25)), ("twin", self.at(30, 25)), ("hole", self.at(21, 5)), ("far", (600_000, 5_400_000))])
        self.assertEqual(run.returncode, 0, run.stderr)
        self.assertEqual([outlet["name"] for outlet in self.result()["outlets"]], ["good"])
        told = {row["point"]: (row["notice"], row["text"]) for row in table(self.folder / "result/tables/review.csv")
                if row["notice"].startswith("point-o")}
        self.assertEqual({name: code for name, (code, _) in told.items()},
                         {"twin": "point-on-taken-cell", "hole": "point-on-void", "far": "point-off-data"})
        self.assertIn("'good'", told["twin"][1])

    def test_no_point_that_can_be_used_is_an_error(self):
        run = self.run_points([("hole", self.at(21, 5)), ("far", (600_000, 5_400_000))])
        self.assertEqual(run.returncode, 1)
        self.assertIn("no design point lies on the data", run.stderr)

    def test_one_name_for_two_points_is_an_error(self):
        run = self.run_points([("inlet", self.at(30, 25)), ("inlet", self.at(10, 25))])
        self.assertEqual(run.returncode, 1)
        self.assertIn('"inlet" (2 times)', run.stderr)

    def test_a_file_of_points_that_is_not_there(self):
        self.refused(1, "run", *self.words, "--points", "points.gpkg", says=("points.gpkg", "does not exist"))


class Studies(CommandTest):
    SMALLEST = ('[terrain]\nelevation = "dem.tif"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n'
                '[rain]\ntwo_year_24_hour = "90 mm"\n')

    def setUp(self):
        super().setUp()
        self.small_study()

    def refused_study(self, text, *parts):
        (self.folder / "study.toml").write_text(text)
        self.refused(1, "run", "study.toml", says=("study.toml", *parts))

    def test_the_smallest_study_runs(self):
        (self.folder / "study.toml").write_text(self.SMALLEST)
        self.done("run", "study.toml")

    def test_a_study_that_is_not_there(self):
        self.refused(1, "run", "missing.toml", says=("missing.toml",))

    def test_no_rain(self):
        self.refused(1, "run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", says=("rain", "3.6 in"))
        self.refused_study(self.SMALLEST.replace('two_year_24_hour = "90 mm"\n', ""), "rain", "3.6 in")

    def test_rain_without_a_unit(self):
        self.refused(1, "run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "90",
                     says=("--rain", "90", "3.6 in"))

    def test_rain_in_a_unit_of_something_else(self):
        self.refused(1, "run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "90 ha",
                     says=("--rain", "90 ha"))

    def test_an_unknown_key_is_told_with_its_place_and_the_nearest_right_one(self):
        self.refused_study(self.SMALLEST.replace("cover =", "covr ="), "line 4", "surface.covr", "surface.cover")
        self.refused_study(self.SMALLEST + "[timing]\nslope_window = \"20 m\"\n", "line 9", "terrain.slope_window")

    def test_a_key_of_another_version_is_not_passed_over(self):
        self.refused_study(self.SMALLEST.replace("[rain]\n", "[rain]\ntable = \"r.csv\"\n"), "rain.table", "remove it")

    def test_a_text_that_is_no_toml(self):
        self.refused_study("[terrain]\nelevation = dem.tif\n", "line 2")

    def test_check_finds_all_that_is_wrong_at_once(self):
        self.ground(epsg=None)
        (self.folder / "study.toml").write_text(self.SMALLEST.replace("book.csv", "missing.csv"))
        run = self.rillclock("check", "study.toml")
        self.assertEqual(run.returncode, 1)
        problems = [line for line in run.stderr.splitlines() if line.startswith("would stop the run: ")]
        self.assertEqual(len(problems), 2, run.stderr)
        self.assertIn("no reference system", problems[0])
        self.assertIn("missing.csv", problems[1])

    def test_check_writes_nothing(self):
        (self.folder / "study.toml").write_text(self.SMALLEST)
        before = sorted(pathlib.Path(self.folder).iterdir())
        said = self.done("check", "study.toml")
        self.assertIn("cost: about", said)
        self.assertIn("Nothing was found that would stop the run.", said)
        self.assertEqual(sorted(pathlib.Path(self.folder).iterdir()), before)


if __name__ == "__main__":
    unittest.main()
