#!/usr/bin/python3
"""Scenarios: what a changed study run alone gives, worked out beside the study on flow that is found once, and compared with it."""
import json
import re
import shutil
import subprocess
import unittest

import numpy as np
from osgeo import gdal, ogr, osr

from peaks_test import demo_with_peaks
from support import COMMAND, CommandTest, class_folder, system_of, table

CHANGED = """surface.cover = "cover-plan.tif"
rain.formula = "i[mm/h] = 1200 T^0.2 / (t[min] + 12)^0.85"
timing.sheet_limit = "50 ft"
"""
SMALL = """report_units = "si"
[terrain]
elevation = "dem.tif"
[surface]
cover = "cover.tif"
book = "book.csv"
[points]
auto_area = "3 %"
[rain]
two_year_24_hour = "80 mm"
[output]
folder = "result"
"""


def write_plan(path, polygons, epsg=25832, field="cover"):
    """Polygons, each a list of corners with what its field says."""
    source = ogr.GetDriverByName("GPKG").CreateDataSource(str(path))
    layer = source.CreateLayer("plan", system_of(epsg), ogr.wkbPolygon)
    layer.CreateField(ogr.FieldDefn(field, ogr.OFTString))
    for corners, text in polygons:
        feature = ogr.Feature(layer.GetLayerDefn())
        feature[field] = text
        ring = ",".join(f"{x} {y}" for x, y in [*corners, corners[0]])
        feature.SetGeometry(ogr.CreateGeometryFromWkt(f"POLYGON(({ring}))"))
        layer.CreateFeature(feature)


class BesideAStudyOfItsOwn(unittest.TestCase):
    """The demo with peaks; houses over its south-west in the scenario, more rain, and another sheet limit."""

    @classmethod
    def setUpClass(cls):
        folder = class_folder(cls, "test")
        demo_with_peaks(folder)
        town = folder / "town"
        shutil.copy(town / "cover.tif", town / "cover-plan.tif")
        plan = gdal.Open(str(town / "cover-plan.tif"), gdal.GA_Update)
        codes = plan.ReadAsArray()
        codes[codes.shape[0] // 2:, : codes.shape[1] // 2] = 2
        plan.GetRasterBand(1).WriteArray(codes)
        plan = None
        base = (town / "peaks.toml").read_text()
        (town / "both.toml").write_text(base.replace("[output]", '[output]\nfolder = "both"') + "[scenario.after]\n" + CHANGED)
        changed = base.replace('"cover.tif"', '"cover-plan.tif"').replace("= 1000 T", "= 1200 T").replace("100 ft", "50 ft")
        changed = changed.replace("raster_return_period", 'sheet_limit = "50 ft"\nraster_return_period').replace("[output]", '[output]\nfolder = "alone"')
        changed = changed.replace('i[mm/h] = 1000', 'i[mm/h] = 1200')
        (town / "alone.toml").write_text(changed)
        cls.said = subprocess.run([COMMAND, "run", town / "both.toml"], check=True, capture_output=True, text=True)
        subprocess.run([COMMAND, "run", town / "alone.toml"], check=True, capture_output=True)
        cls.town = town

    @staticmethod
    def files(folder):
        """What stands in each file; sheets without title, study file and place of the rain's formula, which are not the same."""
        def content(path):
            if path.suffix != ".md":
                return path.read_bytes()
            return re.sub(r" \\\(scenario after\\\)|\\\(\S+toml, line \d+, column \d+\\\)|scenario\.after\.", "", path.read_text()).encode()
        return {str(p.relative_to(folder)): content(p) for p in sorted(folder.rglob("*")) if p.is_file()}

    def test_the_scenario_is_the_changed_study_in_every_byte_of_tables_rasters_and_shapes(self):
        scenario, alone = self.files(self.town / "both/scenario-after"), self.files(self.town / "alone")
        self.assertEqual(scenario.keys(), alone.keys())
        with_names_of_inputs = {"result.json", "report.html"}   # title and scenario stand there
        for name, content in alone.items():
            if name not in with_names_of_inputs:
                self.assertEqual(scenario[name], content, name)

    def test_the_study_itself_is_what_it_is_without_the_scenario(self):
        both, base = self.files(self.town / "both"), self.files(self.town / "result")
        for name, content in base.items():
            if name != "result.json" and not name.endswith(".html"):
                self.assertEqual(both[name], content, name)

    def test_figures_of_the_scenario_stand_in_its_own_manifest(self):
        scenario, alone = (json.loads((self.town / f"{name}/result.json").read_text()) for name in ("both/scenario-after", "alone"))
        self.assertEqual(scenario["scenario"], "after")
        base = json.loads((self.town / "both/result.json").read_text())
        self.assertEqual((base["scenario"], base["scenarios"]), (None, ["after"]))
        for manifest in (scenario, alone):
            del manifest["parameters"]["rain"]["source"]   # which names the study file and its line
        for key in ("outlets", "parameters", "notices", "data"):
            self.assertEqual(scenario[key], alone[key], key)

    def test_flow_is_found_once_and_the_rest_for_each(self):
        stages = [line.split("  ")[0].strip() for line in self.said.stderr.splitlines()]
        self.assertEqual(sum("flow directions" in s for s in stages), 1)
        self.assertEqual(sum("reading elevations" in s for s in stages), 1)
        self.assertIn("travel times", stages)
        self.assertIn("after: travel times", stages)

    def test_the_comparison_is_the_one_that_compare_writes(self):
        run = subprocess.run([COMMAND, "compare", "both", "both/scenario-after", "--out", "by-hand"], cwd=self.town, check=False, capture_output=True, text=True)
        self.assertEqual(run.returncode, 4, run.stderr)
        beside, by_hand = self.files(self.town / "both/comparison-after"), self.files(self.town / "by-hand")
        self.assertEqual(beside.keys(), by_hand.keys())
        for name, content in by_hand.items():
            if name != "result.json":   # which names the folders
                self.assertEqual(beside[name], content, name)
        self.assertEqual(json.loads(beside["result.json"])["points"], json.loads(by_hand["result.json"])["points"])
        self.assertIn(str(self.town / "both"), json.loads(beside["result.json"])["before"])

    def test_the_run_says_how_the_scenario_compares(self):
        self.assertIn("Scenario 'after'", self.said.stdout)
        self.assertIn("comparison-after", self.said.stdout)

    def test_the_report_has_what_each_scenario_changes_and_its_figures_beside_the_study(self):
        report = (self.town / "both/report.html").read_text()
        section = report[report.index("Scenarios beside the study"):].split("</section>")[0]
        for change in ("surface.cover = cover-plan.tif", "rain.formula = i[mm/h] = 1200 T^0.2 / (t[min] + 12)^0.85", "timing.sheet_limit = 50 ft"):
            self.assertIn(f"<code>{change}</code>", section)
        rows = {r[0]: r for r in (re.findall(r"<td[^>]*>(.*?)</td>", row) for row in section.split("<tr>")[2:])}
        for row in table(self.town / "both/comparison-after/tables/comparison.csv"):
            shown = re.match(r"([\d.]+)\s→\s([\d.]+)\s\((.)([\d.]+)\s%\)$", rows[row["point"]][1])
            self.assertAlmostEqual(float(shown[1]), float(row["time_before_min"]), delta=6e-4 * float(row["time_before_min"]))
            self.assertAlmostEqual(float(shown[2]), float(row["time_after_min"]), delta=6e-4 * float(row["time_after_min"]))
            self.assertAlmostEqual((-1 if shown[3] == "−" else 1) * float(shown[4]), float(row["time_change_percent"]), delta=0.051)
            self.assertEqual(rows[row["point"]][-1], row["worse"])
        peaks = {(r["point"], r["return_period_years"]): r for r in table(self.town / "both/comparison-after/tables/compared_peaks.csv")}
        for place, years in enumerate(("2", "10", "100")):
            for point, row in rows.items():
                before, after = re.match(r"([\d.]+)\s→\s([\d.]+)\s", row[2 + place]).groups()
                self.assertAlmostEqual(float(before), float(peaks[point, years]["peak_before_m3_per_s"]), delta=6e-4 * float(before))
                self.assertAlmostEqual(float(after), float(peaks[point, years]["peak_after_m3_per_s"]), delta=6e-4 * float(after))
        self.assertIn("scenario-after/report.html", section)
        own = (self.town / "both/scenario-after/report.html").read_text()
        self.assertIn("../report.html", own)
        self.assertNotIn("Scenarios beside the study", own)

    def test_json_holds_the_scenarios_as_their_files_do(self):
        said = subprocess.run([COMMAND, "run", self.town / "both.toml", "--replace", "--json"], check=True, capture_output=True, text=True).stdout
        printed = json.loads(said)
        results = printed.pop("scenario_results")
        self.assertEqual(printed, json.loads((self.town / "both/result.json").read_text()))
        self.assertEqual([r["name"] for r in results], ["after"])
        self.assertEqual(results[0]["result"], json.loads((self.town / "both/scenario-after/result.json").read_text()))
        self.assertEqual(results[0]["comparison"], json.loads((self.town / "both/comparison-after/result.json").read_text()))
        self.assertEqual(results[0]["folder"], str(self.town / "both/scenario-after"))
        self.assertEqual(results[0]["changes"][-1], "timing.sheet_limit = 50 ft")

    def test_one_point_of_the_scenario_can_be_explained(self):
        run = subprocess.run([COMMAND, "explain", self.town / "both/scenario-after", "Weir"], check=True, capture_output=True, text=True)
        self.assertIn("Weir", run.stdout)

    def test_check_says_what_differs_and_what_it_costs(self):
        said = subprocess.run([COMMAND, "check", self.town / "both.toml"], check=True, capture_output=True, text=True).stdout
        self.assertIn("scenario after: differs in rain.formula, surface.cover, timing.sheet_limit", said)
        self.assertIn("scenario after: land cover: 'cover-plan.tif'", said)
        self.assertIn("scenario-after", said)


class CoverAreas(CommandTest):
    """Ground of 40 × 50 cells of 2 m whose north-west corner is at 500000, 5400000."""

    def setUp(self):
        super().setUp()
        self.small_study()

    def run_small(self, folder, more="", cover="cover.tif"):
        (self.folder / f"{folder}.toml").write_text(SMALL.replace('"result"', f'"{folder}"').replace('"cover.tif"', f'"{cover}"\n{more}'))
        self.done("run", f"{folder}.toml", "-q")

    @staticmethod
    def square(left, top, right, bottom):
        """By cells."""
        x, y = (lambda c: 500_000 + 2 * c), (lambda r: 5_400_000 - 2 * r)
        return [(x(left), y(top)), (x(right), y(top)), (x(right), y(bottom)), (x(left), y(bottom))]

    def burnt(self, *squares):
        codes = np.ones((40, 50), np.uint8)
        for (left, top, right, bottom), code in reversed(squares):
            codes[top:bottom, left:right] = code
        self.cover("burnt.tif", values=codes)

    def test_polygons_are_what_a_raster_with_their_classes_is(self):
        write_plan(self.folder / "plan.gpkg", [(self.square(5, 5, 25, 20), "2"), (self.square(30, 10, 45, 35), "Wood")])
        self.burnt(((5, 5, 25, 20), 2), ((30, 10, 45, 35), 3))
        self.run_small("areas", 'cover_areas = "plan.gpkg"')
        self.run_small("burnt", cover="burnt.tif")
        for name in ("tables/outlets.csv", "tables/segments.csv", "tables/land.csv", "rasters/travel_time.tif", "rasters/regime.tif"):
            self.assertEqual((self.folder / "areas" / name).read_bytes(), (self.folder / "burnt" / name).read_bytes(), name)

    def test_of_overlapping_polygons_the_first_counts_and_it_is_told(self):
        write_plan(self.folder / "plan.gpkg", [(self.square(5, 5, 25, 20), "2"), (self.square(20, 5, 45, 20), "3")])
        self.burnt(((5, 5, 25, 20), 2), ((20, 5, 45, 20), 3))
        self.run_small("areas", 'cover_areas = "plan.gpkg"')
        self.run_small("burnt", cover="burnt.tif")
        self.assertEqual((self.folder / "areas/rasters/travel_time.tif").read_bytes(), (self.folder / "burnt/rasters/travel_time.tif").read_bytes())
        told = {r["notice"]: r for r in table(self.folder / "areas/tables/review.csv")}
        self.assertEqual(float(told["cover-areas-overlap"]["value"]), 5 * 15)

    def test_polygons_in_a_scenario_with_another_field_and_reference_system(self):
        corners = self.square(5, 5, 25, 20)
        to_degrees = osr.CoordinateTransformation(system_of(25832), system_of(4326))
        places = [to_degrees.TransformPoint(x, y)[:2] for x, y in corners]
        write_plan(self.folder / "plan.gpkg", [(places, "2")], epsg=4326, field="use")
        (self.folder / "study.toml").write_text(SMALL + '[scenario.built]\nsurface = { cover_areas = "plan.gpkg", cover_field = "use" }\n')
        self.done("run", "study.toml", "-q")
        self.burnt(((5, 5, 25, 20), 2))
        self.run_small("burnt", cover="burnt.tif")
        self.assertEqual((self.folder / "result/scenario-built/tables/outlets.csv").read_bytes(), (self.folder / "burnt/tables/outlets.csv").read_bytes())

    def test_a_class_that_the_book_does_not_have_is_refused_with_those_that_it_has(self):
        write_plan(self.folder / "plan.gpkg", [(self.square(5, 5, 25, 20), "Strete")])
        (self.folder / "study.toml").write_text(SMALL.replace('"cover.tif"', '"cover.tif"\ncover_areas = "plan.gpkg"'))
        self.refused(1, "run", "study.toml", says=("Strete", "2 (Street)", "did you mean Street?"))

    def test_polygons_off_the_data_are_refused(self):
        write_plan(self.folder / "plan.gpkg", [(self.square(205, 5, 225, 20), "2")])
        (self.folder / "study.toml").write_text(SMALL.replace('"cover.tif"', '"cover.tif"\ncover_areas = "plan.gpkg"'))
        self.refused(1, "run", "study.toml", says=("cover areas", "plan.gpkg", "reference system"))


class Stating(CommandTest):
    def setUp(self):
        super().setUp()
        self.small_study()

    def refuse(self, scenario, *says):
        (self.folder / "study.toml").write_text(SMALL + scenario)
        self.refused(1, "run", "study.toml", says=says)

    def test_terrain_points_units_and_output_cannot_differ(self):
        for key, value in (("terrain.elevation", '"d.tif"'), ("points.auto_area", '"2 %"'), ("report_units", '"us"'), ("output.folder", '"o"')):
            self.refuse(f"[scenario.after]\n{key} = {value}\n", f"scenario.after.{key}", "line 14", "cannot differ", "rillclock compare")

    def test_an_unknown_key_is_told_with_its_scenario_and_the_nearest_right_one(self):
        self.refuse('[scenario.after]\nsurface.covr = "o.tif"\n', "line 14", "scenario.after", "surface.covr", "surface.cover")

    def test_a_bad_value_is_told_with_its_scenario(self):
        self.refuse('[scenario.after]\nrain.two_year_24_hour = "80"\n', "scenario.after.rain.two_year_24_hour", "line 14", "3.6 in")

    def test_a_scenario_that_states_nothing_is_refused(self):
        self.refuse("[scenario.after]\n", "scenario.after", "nothing that differs")

    def test_a_name_that_is_no_folder_is_refused(self):
        self.refuse('[scenario."../x"]\nsurface.cover = "o.tif"\n', "line 13", "../x", "letters, digits")

    def test_contradictions_name_the_scenario(self):
        self.refuse('[scenario.after]\ntiming.sheet = "kinematic"\n', "study.toml, scenario.after,", "rain by duration")

    def test_a_file_that_is_missing_stops_the_run_before_the_work(self):
        (self.folder / "study.toml").write_text(SMALL + '[scenario.after]\nsurface.cover = "nowhere.tif"\n')
        run = self.rillclock("run", "study.toml")
        self.assertEqual(run.returncode, 1)
        self.assertIn("nowhere.tif", run.stderr)
        self.assertNotIn("flow directions", run.stderr)

    def test_words_of_a_reviewer_stay_in_each_result(self):
        (self.folder / "study.toml").write_text(SMALL + '[scenario.after]\nrain.two_year_24_hour = "100 mm"\n')
        self.done("run", "study.toml", "-q")
        for part in ("", "scenario-after/"):
            path = self.folder / f"result/{part}tables/review.csv"
            lines = path.read_text().splitlines()
            self.assertGreater(len(lines), 1)
            path.write_text("\n".join([lines[0], lines[1] + f"seen {part or 'base'}", *lines[2:]]) + "\n")
        self.done("run", "study.toml", "-q", "--replace")
        for part in ("", "scenario-after/"):
            words = [r["reviewed"] for r in table(self.folder / f"result/{part}tables/review.csv")]
            self.assertEqual(words[0], f"seen {part or 'base'}")


if __name__ == "__main__":
    unittest.main()
