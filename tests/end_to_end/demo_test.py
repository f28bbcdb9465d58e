#!/usr/bin/python3
"""The demo study from its files to its result folder: what is there, in what form, and how it is asked for."""
import filecmp
import json
import os
import shutil
import signal
import subprocess
import sys
import unittest

import numpy as np
from osgeo import gdal, osr

from support import COMMAND, DemoTest, VERIFY, system_of, table

DEMO_POINTS = ["Spring_wood_ford", "Mill_pond_outlet", "Side_valley_mouth", "Market_footbridge", "Tramway_bank", "Mill_bridge", "Weir",
               "School_inlet", "Market_inlet", "Orchard_inlet", "Mill_Lane_inlet"]
RESULT_FILES = {
    "governing_paths.geojson", "longest_paths.geojson", "depressions.geojson", "result.json", "tables/outlets.csv", "tables/segments.csv",
    "tables/methods.csv", "tables/review.csv", "tables/subareas.csv", "tables/handover.csv", "tables/depressions.csv", "tables/land.csv",
    "rasters/travel_time.tif", "rasters/flow_azimuth.tif", "rasters/contributing_area.tif",
    "rasters/catchment.tif", "rasters/catchment.tif.aux.xml", "rasters/regime.tif", "rasters/regime.tif.aux.xml",
    "rasters/spill_elevation.tif", "rasters/travel_time.sld", "rasters/regime.sld", "rasters/flow_azimuth.sld",
    "rasters/contributing_area.sld", "rasters/catchment.sld", "report.html", "study.gpkg", "isochrones.geojson"} | {f"tables/sheets/{number}-{name}.md" for number, name in enumerate(
        DEMO_POINTS, 1)}


def files_under(folder):
    return {str(path.relative_to(folder)) for path in folder.rglob("*") if path.is_file()}


class Demo(DemoTest):
    """Each test has a copy of the demo in its own folder."""

    with_isochrones = True

    def setUp(self):
        super().setUp()
        shutil.copytree(self.kept / "town", self.folder / "town")
        self.result_folder = self.folder / "town/result"
        self.opened = []

    def raster(self, name):
        # A band lives no longer than its file: all stay open until the test is over.
        self.opened.append(gdal.Open(str(self.result_folder / "rasters" / name)))
        return self.opened[-1]


class Folder(Demo):
    def test_the_result_holds_every_file_and_no_other(self):
        self.assertEqual(files_under(self.result_folder), RESULT_FILES)
        self.assert_nothing_left(self.kept / "town")

    def test_stages_are_told_on_stderr_and_the_answer_on_stdout(self):
        for stage in ("reading elevations", "reading land cover", "flow directions", "travel times", "design points", "writing rasters"):
            self.assertRegex(self.said.stderr, rf"(?m)^{stage} +[0-9.]+ s +[0-9.]+ (million )?cells/s$")
        self.assertIn("Weir", self.said.stdout)
        self.assertNotIn("cells/s", self.said.stdout)

    def test_the_cautions_stand_in_output_and_result(self):
        cautions = json.loads((self.result_folder / "result.json").read_text())["cautions"]
        self.assertEqual(len(cautions), 5)
        for caution in cautions:
            self.assertIn(caution, self.said.stdout)
        for word in ("planning-level", "scatter", "Local drainage criteria", "life-safety", "licensed engineer"):
            self.assertIn(word, " ".join(cautions))

    def test_two_runs_give_the_same_bytes(self):
        self.done("run", "town/study.toml", "--out", "again")
        same, differ, odd = filecmp.cmpfiles(self.result_folder, self.folder / "again", sorted(RESULT_FILES), shallow=False)
        self.assertEqual((differ, odd), ([], []))
        self.assertEqual(len(same), len(RESULT_FILES))

    def test_one_thread_gives_the_same_bytes_as_many(self):
        self.done("run", "town/study.toml", "--out", "alone", "--threads", "1")
        same, differ, odd = filecmp.cmpfiles(self.result_folder, self.folder / "alone", sorted(RESULT_FILES), shallow=False)
        self.assertEqual((differ, odd), ([], []))
        self.assertEqual(len(same), len(RESULT_FILES))

    def test_the_independent_verification_finds_the_same_answer(self):
        done = subprocess.run([sys.executable, "-B", VERIFY, self.result_folder, self.folder / "town/dem.tif", "--study",
                               self.folder / "town/study.toml"], capture_output=True, text=True, check=False)
        self.assertEqual(done.returncode, 0, done.stdout + done.stderr)
        for claim in ("spill elevation", "contributing area", "travel time", "regime"):
            self.assertIn(claim, done.stdout)


class Asking(Demo):
    def test_a_result_that_is_there_is_kept_unless_replace_is_said(self):
        before = (self.result_folder / "result.json").read_bytes()
        self.refused(1, "run", "town/study.toml", "--rain", "100 mm", says=("exists already", "--replace"))
        self.assertEqual((self.result_folder / "result.json").read_bytes(), before)
        self.done("run", "town/study.toml", "--rain", "100 mm", "--replace")
        self.assertNotEqual((self.result_folder / "result.json").read_bytes(), before)

    def test_a_folder_that_is_no_result_is_never_replaced(self):
        other = self.folder / "other"
        other.mkdir()
        (other / "letter.txt").write_text("keep me")
        self.refused(1, "run", "town/study.toml", "--out", "other", "--replace", says=("other", "not a result"))
        self.assertEqual((other / "letter.txt").read_text(), "keep me")

    def test_json_puts_one_document_on_stdout(self):
        said = self.done("run", "town/study.toml", "--replace", "--json")
        self.assertEqual(json.loads(said), json.loads((self.result_folder / "result.json").read_text()))

    def test_quiet_says_where_the_result_is_and_nothing_else(self):
        run = self.rillclock("run", "town/study.toml", "--replace", "-q")
        self.assertEqual((run.returncode, run.stderr), (0, ""))
        self.assertEqual(run.stdout.strip(), str(self.result_folder))

    def test_a_reader_that_goes_away_is_no_fault(self):
        for words in ("methods", "check --keys", "run town/study.toml --replace --json"):
            piped = subprocess.run(["bash", "-c", f"set -o pipefail; {COMMAND} {words} 2>stderr.txt | head -1"], cwd=self.folder,
                                   capture_output=True, text=True, check=False,
                                   preexec_fn=lambda: signal.signal(signal.SIGPIPE, signal.SIG_DFL))
            self.assertEqual(piped.returncode, 0, words)
            self.assertEqual(len(piped.stdout.splitlines()), 1)
            self.assertNotIn("rillclock:", (self.folder / "stderr.txt").read_text())

    def test_a_full_standard_output_is_a_fault_of_the_machine(self):
        with open("/dev/full", "w", encoding="utf-8") as full:
            run = subprocess.run([COMMAND, "methods"], stdout=full, stderr=subprocess.PIPE, text=True, check=False)
        self.assertEqual(run.returncode, 3)
        self.assertIn("standard output", run.stderr)

    def test_demo_writes_into_no_folder_that_holds_something(self):
        self.refused(1, "demo", "town", says=("town", "not an empty folder"))
        (self.folder / "empty").mkdir()
        self.done("demo", "empty")
        self.assertEqual(files_under(self.folder / "empty"),
                         {"README.md", "study.toml", "study-with-peaks.toml", "dem.tif", "cover.tif", "cover-book.csv", "cover-book-with-c.csv",
                          "points.geojson"})

    def test_a_study_runs_from_any_folder(self):
        os.mkdir(self.folder / "elsewhere")
        self.done("run", "../town/study.toml", "--replace", cwd=self.folder / "elsewhere")
        self.assertEqual(list((self.folder / "elsewhere").iterdir()), [])


class Rasters(Demo):
    DESCRIBED = {  # name: (type, nodata, unit, word of the description)
        "travel_time.tif": ("Float32", -9999.0, "min", "travel time"),
        "flow_azimuth.tif": ("UInt16", 65535.0, "degree", "azimuth"),
        "contributing_area.tif": ("Float64", -9999.0, "m2", "contributing area"),
        "catchment.tif": ("UInt32", 4294967295.0, "", "design point"),
        "regime.tif": ("Byte", 0.0, "", "water moves"),
        "spill_elevation.tif": ("Float32", -9999.0, "metre", "water gets out")}

    def test_they_lie_on_the_grid_of_the_elevations(self):
        dem = gdal.Open(str(self.folder / "town/dem.tif"))
        for name in self.DESCRIBED:
            raster = self.raster(name)
            self.assertEqual(raster.GetGeoTransform(), dem.GetGeoTransform(), name)
            self.assertEqual((raster.RasterXSize, raster.RasterYSize), (dem.RasterXSize, dem.RasterYSize), name)
            self.assertTrue(raster.GetSpatialRef().IsSame(dem.GetSpatialRef()), name)

    def test_they_are_tiled_packed_and_have_overviews(self):
        for name in self.DESCRIBED:
            raster = self.raster(name)
            structure = raster.GetMetadata("IMAGE_STRUCTURE")
            self.assertEqual(structure["COMPRESSION"], "ZSTD", name)
            x, y = raster.GetRasterBand(1).GetBlockSize()
            self.assertEqual(x, y, name)
            self.assertLess(x, 600, name)
            self.assertGreaterEqual(raster.GetRasterBand(1).GetOverviewCount(), 1, name)

    def test_they_say_what_they_hold_and_in_which_unit(self):
        for name, (kind, nodata, unit, word) in self.DESCRIBED.items():
            band = self.raster(name).GetRasterBand(1)
            self.assertEqual(gdal.GetDataTypeName(band.DataType), kind, name)
            self.assertEqual(band.GetNoDataValue(), nodata, name)
            self.assertEqual(band.GetUnitType(), unit, name)
            self.assertIn(word, band.GetDescription(), name)

    def test_classes_have_names(self):
        regime = self.raster("regime.tif").GetRasterBand(1)
        regime.GetMetadata()
        self.assertEqual(regime.GetCategoryNames(), ["none", "sheet", "shallow", "channel", "water"])
        catchment = self.raster("catchment.tif").GetRasterBand(1)
        catchment.GetMetadata()
        names = [outlet["name"] for outlet in self.result("town/result")["outlets"]]
        self.assertEqual(catchment.GetCategoryNames(), ["none"] + names)

    def test_overviews_of_classes_invent_no_class(self):
        for name in ("flow_azimuth.tif", "regime.tif", "catchment.tif"):
            band = self.raster(name).GetRasterBand(1)
            known = set(np.unique(band.ReadAsArray()))
            for level in range(band.GetOverviewCount()):
                self.assertLessEqual(set(np.unique(band.GetOverview(level).ReadAsArray())), known, name)

    def test_the_time_at_a_last_point_is_nought_and_its_storm_is_named(self):
        raster = self.raster("travel_time.tif")
        self.assertIn("62", raster.GetMetadata()["STORM"])
        left, width, _, top, _, height = raster.GetGeoTransform()
        times = raster.ReadAsArray()
        for outlet in self.result("town/result")["outlets"]:
            if outlet["next_point"] is None:
                x, y = outlet["place"]
                self.assertEqual(times[int((y - top) / height), int((x - left) / width)], 0.0, outlet["name"])

    def test_the_greatest_time_of_a_last_points_catchment_is_its_time_of_concentration(self):
        times, owner = self.raster("travel_time.tif").ReadAsArray(), self.raster("catchment.tif").ReadAsArray()
        outlets = self.result("town/result")["outlets"]
        names = {outlet["name"]: outlet for outlet in outlets}

        def last(outlet):
            return outlet if outlet["next_point"] is None else last(names[outlet["next_point"]])
        for end in (outlet for outlet in outlets if outlet["next_point"] is None):
            numbers = [outlet["number"] for outlet in outlets if last(outlet) is end]
            self.assertAlmostEqual(float(times[np.isin(owner, numbers)].max()), end["time_of_concentration_min"], places=4)


class Paths(Demo):
    def load(self, name):
        return json.loads((self.result_folder / name).read_text(encoding="utf-8"))

    def corner_longitudes_and_latitudes(self):
        dem = gdal.Open(str(self.folder / "town/dem.tif"))
        left, width, _, top, _, height = dem.GetGeoTransform()
        change = osr.CoordinateTransformation(dem.GetSpatialRef(), system_of(4326))
        dem.GetSpatialRef().SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
        right, bottom = left + width * dem.RasterXSize, top + height * dem.RasterYSize
        return np.array([change.TransformPoint(x, y)[:2] for x in (left, right) for y in (top, bottom)])

    def test_they_follow_rfc_7946(self):
        corners = self.corner_longitudes_and_latitudes()
        low, high = corners.min(axis=0), corners.max(axis=0)
        for name in ("governing_paths.geojson", "longest_paths.geojson"):
            paths = self.load(name)
            self.assertEqual(paths["type"], "FeatureCollection")
            self.assertNotIn("crs", paths)
            places = np.array([place for f in paths["features"] for place in f["geometry"]["coordinates"]])
            self.assertEqual(paths["bbox"], [*places.min(axis=0), *places.max(axis=0)])
            self.assertTrue((places >= low).all() and (places <= high).all(), name)
            for feature in paths["features"]:
                self.assertEqual((feature["type"], feature["geometry"]["type"]), ("Feature", "LineString"))
                self.assertGreaterEqual(len(feature["geometry"]["coordinates"]), 2)

    def test_general_purpose_readers_read_them(self):
        file = gdal.OpenEx(str(self.result_folder / "governing_paths.geojson"), gdal.OF_VECTOR)
        layer = file.GetLayer()
        self.assertEqual(layer.GetFeatureCount(), len(self.load("governing_paths.geojson")["features"]))
        self.assertEqual(layer.GetSpatialRef().GetAuthorityCode(None), "4326")

    def test_segments_follow_one_another_downstream_and_share_their_ends(self):
        features = self.load("governing_paths.geojson")["features"]
        for before, after in zip(features, features[1:]):
            if before["properties"]["point"] != after["properties"]["point"]:
                self.assertEqual(after["properties"]["segment"], 1)
                continue
            self.assertEqual(after["properties"]["segment"], before["properties"]["segment"] + 1)
            self.assertEqual(before["geometry"]["coordinates"][-1], after["geometry"]["coordinates"][0])
            self.assertGreater(after["properties"]["running_time_min"], before["properties"]["running_time_min"])

    def test_each_path_ends_at_its_point(self):
        dem = gdal.Open(str(self.folder / "town/dem.tif"))
        source = dem.GetSpatialRef()
        source.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
        change = osr.CoordinateTransformation(source, system_of(4326))
        for name in ("governing_paths.geojson", "longest_paths.geojson"):
            end_of = {f["properties"]["point"]: f["geometry"]["coordinates"][-1] for f in self.load(name)["features"]}
            for outlet in self.result("town/result")["outlets"]:
                expected = change.TransformPoint(*outlet["place"])[:2]
                np.testing.assert_allclose(end_of[outlet["name"]], expected, rtol=0, atol=1e-7)

    def test_no_vertex_stands_on_a_straight_line(self):
        for feature in self.load("longest_paths.geojson")["features"]:
            places = np.array(feature["geometry"]["coordinates"])
            steps = np.diff(places, axis=0) * [np.cos(np.radians(56.1)), 1.0]
            steps /= np.linalg.norm(steps, axis=1)[:, None]
            turns = np.abs(steps[:-1, 0] * steps[1:, 1] - steps[:-1, 1] * steps[1:, 0])
            self.assertGreater(turns.min(), 0.3)  # directions of a grid turn by 45 degrees at least


class Answer(Demo):
    def test_result_json_is_complete(self):
        result = self.result("town/result")
        for key in ("title", "versions", "headlines", "cautions", "inputs", "data", "parameters", "outlets", "notices"):
            self.assertTrue(result[key], key)
        self.assertEqual({file["role"] for file in result["inputs"]}, {"elevation", "cover", "book", "points"})
        for file in result["inputs"]:
            expected = subprocess.run(["sha256sum", self.folder / "town" / file["file"]], capture_output=True, text=True, check=True)
            self.assertEqual(file["sha256"], expected.stdout.split()[0])
        self.assertEqual(len(result["outlets"]), 11)
        self.assertEqual(len(result["headlines"]), 4)

    def test_the_table_of_outlets_says_what_result_json_says(self):
        outlets = {row["name"]: row for row in table(self.result_folder / "tables/outlets.csv")}
        for outlet in self.result("town/result")["outlets"]:
            row = outlets[outlet["name"]]
            self.assertAlmostEqual(float(row["time_of_concentration_min"]), outlet["time_of_concentration_min"], places=3)
            self.assertAlmostEqual(float(row["area_ha"]) * 1e4 / outlet["area_m2"], 1, places=4)
            self.assertEqual(row["next_point"], outlet["next_point"] or "")
            regimes = sum(float(row[f"{regime}_min"]) for regime in ("sheet", "shallow", "channel", "water"))
            self.assertAlmostEqual(regimes, outlet["governing_path"]["time_min"], places=2)

    def test_notices_in_table_and_json_are_the_same_and_by_effect(self):
        rows = table(self.result_folder / "tables/review.csv")
        notices = self.result("town/result")["notices"]
        self.assertEqual([row["text"] for row in rows], [notice["text"] for notice in notices])
        effects = [notice["effect_min"] for notice in notices]
        self.assertEqual(effects, sorted(effects, reverse=True))

    def test_places_are_printed_to_the_millimetre(self):
        for name, columns in (("outlets", ("x", "y", "governing_head_x")), ("segments", ("x_from", "y_to")), ("review", ("x", "y"))):
            rows = [row for row in table(self.result_folder / f"tables/{name}.csv") if row[columns[0]]]
            self.assertTrue(rows)
            for row in rows:
                for column in columns:
                    self.assertRegex(row[column], r"^\d+\.\d{3}$", name)

    def test_every_notice_is_a_sentence(self):
        for notice in self.result("town/result")["notices"]:
            self.assertRegex(notice["text"], r"^['A-Z].*[^.]\.$")

    def test_the_old_bank_without_its_culvert_is_noticed(self):
        found = {(row["point"], row["notice"]) for row in table(self.result_folder / "tables/review.csv")}
        self.assertIn(("Tramway bank", "path-ponded"), found)


if __name__ == "__main__":
    unittest.main()
