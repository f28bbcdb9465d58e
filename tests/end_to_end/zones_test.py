#!/usr/bin/python3
"""Rain zones: polygons that name a rain file each; a point has the rain of the greatest share of its catchment."""
import json
import unittest

import numpy as np

from support import CommandTest, system_of, table, write_points
from osgeo import osr

HILL = "duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n5,6.0,9.0\n60,2.0,3.0\n1440,0.25,0.4\n"
VALLEY = "duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n5,4.8,6.9\n60,1.5,2.3\n1440,0.125,0.2\n"
ROWS, COLUMNS, LEFT, TOP = 60, 50, 500_000.0, 5_400_000.0


class Zones(CommandTest):
    """A plane falling to the south, so that the 49 cells of a point in row 48 are those above it in its column."""

    def setUp(self):
        super().setUp()
        y, _ = np.mgrid[0:ROWS, 0:COLUMNS]
        self.ground(values=200.0 - 0.08 * y)
        self.cover(values=np.ones((ROWS, COLUMNS), np.uint8))
        self.book()
        (self.folder / "hill.csv").write_text(HILL)
        (self.folder / "valley.csv").write_text(VALLEY)
        write_points(self.folder / "points.geojson", [("west", self.place(10.5, 48.5)), ("east", self.place(40.5, 48.5))])

    @staticmethod
    def place(column, row):
        return LEFT + 2 * column, TOP - 2 * row

    def zones(self, *parts):
        """Rectangles (first row, end row, first column, end column, rain file)."""
        to_wgs84 = osr.CoordinateTransformation(system_of(25832), system_of(4326))
        features = []
        for top, bottom, left, right, rain in parts:
            corners = [self.place(left, top), self.place(right, top), self.place(right, bottom), self.place(left, bottom)]
            ring = [list(to_wgs84.TransformPoint(x, y)[:2]) for x, y in [*corners, corners[0]]]
            features.append({"type": "Feature", "properties": {"rain": rain}, "geometry": {"type": "Polygon", "coordinates": [ring]}})
        (self.folder / "zones.geojson").write_text(json.dumps({"type": "FeatureCollection", "features": features}))

    def study(self, rain='zones = "zones.geojson"', timing=""):
        (self.folder / "study.toml").write_text(
            '[terrain]\nelevation = "dem.tif"\n[points]\nfile = "points.geojson"\nmove_within = "0 m"\n[surface]\ncover = "cover.tif"\n'
            f'book = "book.csv"\n[rain]\n{rain}\n[timing]\n{timing}\n')
        return "study.toml"

    def outlets(self, *statements):
        self.done("run", self.study(*statements), "--replace")
        return {outlet["name"]: outlet for outlet in self.result()["outlets"]}

    def test_each_point_has_the_rain_of_the_greatest_share_of_its_catchment(self):
        self.zones((0, 60, 0, 25, "hill.csv"), (0, 30, 25, 50, "valley.csv"), (30, 60, 25, 50, "hill.csv"))
        for timing in ("", 'sheet = "kinematic"'):
            zoned = self.outlets('zones = "zones.geojson"', timing)
            for name, rain, share in (("west", "hill.csv", 1.0), ("east", "valley.csv", 30 / 49)):
                self.assertEqual(zoned[name]["rain_zone"]["rain"], rain)
                self.assertAlmostEqual(zoned[name]["rain_zone"]["share_of_area"], share, places=5)
            rows = {row["name"]: row for row in table(self.folder / "result/tables/outlets.csv")}
            self.assertEqual(rows["east"]["rain_zone"], "valley.csv")
            for name, rain in (("west", "hill.csv"), ("east", "valley.csv")):
                alone = self.outlets(f'file = "{rain}"', timing)[name]
                self.assertEqual(zoned[name]["time_of_concentration_s"], alone["time_of_concentration_s"], (name, timing))
                self.assertEqual(zoned[name]["storms"], alone["storms"])
                self.assertEqual(zoned[name]["governing_path"], alone["governing_path"])
                self.assertEqual(zoned[name]["methods"], alone["methods"])
                self.assertEqual(zoned[name]["network"], alone["network"])

    def test_rasters_and_segments_are_under_the_rain_of_the_point(self):
        self.zones((0, 60, 0, 25, "hill.csv"), (0, 60, 25, 50, "valley.csv"))
        self.outlets()
        depths = {row["point"]: float(row["rain_2_year_24_hour_in"]) for row in table(self.folder / "result/tables/segments.csv")
                  if row["regime"] == "sheet"}
        self.assertEqual(depths, {"west": 6.0, "east": 3.0})
        zones = self.result()["parameters"]["rain"]["zones"]
        self.assertEqual([(zone["source"], zone["rain_2_year_24_hour_mm"]) for zone in zones], [("hill.csv", 152.4), ("valley.csv", 76.2)])
        self.assertEqual(sorted(f["file"] for f in self.result()["inputs"] if f["role"].startswith("rain")),
                         ["hill.csv", "valley.csv", "zones.geojson"])

    def test_no_share_above_half_is_told(self):
        self.zones((0, 20, 0, 50, "hill.csv"), (20, 36, 0, 50, "valley.csv"))
        self.assertEqual(self.outlets('zones = "zones.geojson"\nfile = "valley.csv"')["west"]["rain_zone"]["rain"], "hill.csv")
        notices = [n for n in self.result()["notices"] if n["notice"] == "rain-zone-minority"]
        self.assertEqual({n["point"] for n in notices}, {"west", "east"})
        self.assertAlmostEqual(notices[0]["value"], 20 / 49, places=5)

    def test_land_outside_has_the_rain_of_the_file_or_none(self):
        self.zones((0, 60, 0, 25, "hill.csv"))
        outside = self.outlets('zones = "zones.geojson"\nfile = "valley.csv"')
        self.assertEqual(outside["east"]["rain_zone"], {"rain": "valley.csv", "share_of_area": 1.0})
        self.done("run", "study.toml", "--replace")
        (self.folder / "result").rename(self.folder / "before")
        self.refused(1, "run", self.study(), says=("the catchment of the point 'east' lies outside of all rain zones", "state under [rain] a file"))

    def test_the_first_of_overlapping_zones_counts_and_is_told(self):
        self.zones((0, 60, 0, 50, "valley.csv"), (0, 60, 0, 25, "hill.csv"))
        self.assertEqual(self.outlets()["west"]["rain_zone"]["rain"], "valley.csv")
        self.assertIn("rain-zones-overlap", {n["notice"] for n in self.result()["notices"]})

    def test_zones_that_cannot_be_used_are_refused(self):
        self.zones((0, 60, 0, 25, ""))
        self.refused(1, "run", self.study(), says=("names no rain file in its field \"rain\"",))
        self.zones((0, 60, 0, 25, "none.csv"))
        self.refused(1, "run", self.study(), says=("none.csv",))
        self.zones((-600, -500, 0, 25, "hill.csv"))
        self.refused(1, "run", self.study(), says=("none of the rain zones", "reference system"))
        self.refused(1, "run", self.study('zones = "zones.geojson"\nzone_field = "station"'), says=('has no field "station"',))

    def test_a_check_tells_the_rain_of_each_zone(self):
        self.zones((0, 60, 0, 25, "hill.csv"), (0, 60, 25, 50, "valley.csv"))
        said = self.done("check", self.study())
        self.assertIn("rain zone: hill.csv: table", said)
        self.assertIn("rain zone: valley.csv: table", said)


if __name__ == "__main__":
    unittest.main()
