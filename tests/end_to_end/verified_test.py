#!/usr/bin/python3
"""The demo town with rain zones, mapped sections and channels under the design storm, recomputed by the reader that shares no code."""
import json
import subprocess
import sys
import unittest

import numpy as np
from osgeo import gdal, ogr, osr

from support import DemoTest, VERIFY, demo_town

HILL = "duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n5,6.0,9.0\n60,2.0,3.0\n1440,0.25,0.4\n"
VALLEY = "duration_h,depth_2yr_mm,depth_10yr_mm\n0.1,11,16\n1,38,58\n24,76,122\n"
FORMULA = 'formula = "i[mm/h] = 500 T^0.2 / (t[min] + 10)^0.8"\nreturn_periods = [2, 10, 50]\n'
RUNOFF = {1: 0.9, 2: 0.9, 3: 0.2, 4: 0.2, 5: 0.3, 6: 0.15, 7: "", 8: 0.6}
STEPS = {0: (-1, 0), 45: (-1, 1), 90: (0, 1), 135: (1, 1), 180: (1, 0), 225: (1, -1), 270: (0, -1), 315: (-1, -1)}
LEFT_OF_TOWN = 0.55   # share of the width that the western zone has


class Verified(DemoTest):
    def setUp(self):
        super().setUp()
        self.town = self.folder / "town"
        demo_town(self.folder / "town")
        self.dem = gdal.Open(str(self.town / "dem.tif"))

    def study(self, *changes):
        text = (self.town / "study.toml").read_text()
        for before, after in changes:
            self.assertIn(before, text)
            text = text.replace(before, after)
        (self.town / "changed.toml").write_text(text)

    def verify(self, *claims):
        self.done("run", "town/changed.toml", "--replace")
        said = self.said_by_reader(0)
        for claim in claims:
            self.assertIn(claim, said)

    def said_by_reader(self, status):
        done = subprocess.run([sys.executable, "-B", VERIFY, self.town / "result", self.town / "dem.tif", "--study", self.town / "changed.toml"],
                              capture_output=True, text=True, check=False)
        self.assertEqual(done.returncode, status, done.stdout + done.stderr)
        return done.stdout

    def zones(self):
        """Two halves of the town with a rain file each."""
        (self.town / "hill.csv").write_text(HILL)
        (self.town / "valley.csv").write_text(VALLEY)
        left, width, _, top, _, height = self.dem.GetGeoTransform()
        right, bottom = left + width * self.dem.RasterXSize, top + height * self.dem.RasterYSize
        middle = left + LEFT_OF_TOWN * (right - left)
        file = ogr.GetDriverByName("GPKG").CreateDataSource(str(self.town / "zones.gpkg"))
        layer = file.CreateLayer("zones", osr.SpatialReference(wkt=self.dem.GetProjection()), ogr.wkbPolygon)
        layer.CreateField(ogr.FieldDefn("rain", ogr.OFTString))
        for name, west, east in (("hill.csv", left - 5, middle), ("valley.csv", middle, right + 5)):
            feature = ogr.Feature(layer.GetLayerDefn())
            feature.SetField("rain", name)
            feature.SetGeometry(ogr.CreateGeometryFromWkt(
                f"POLYGON(({west} {top + 5},{east} {top + 5},{east} {bottom - 5},{west} {bottom - 5},{west} {top + 5}))"))
            layer.CreateFeature(feature)
        del file

    def brook(self, *sections):
        """Lines along the longest channel of the town as it flows without them, as many of equal length as there are sections."""
        rasters = self.kept / "town/result/rasters"
        azimuth, area = (gdal.Open(str(rasters / f"{name}.tif")).ReadAsArray() for name in ("flow_azimuth", "contributing_area"))
        row, column = max((self.way(azimuth, cell) for cell in self.heads(azimuth, area)), key=len)[0]
        way = self.way(azimuth, (row, column))
        left, width, _, top, _, height = self.dem.GetGeoTransform()
        file = ogr.GetDriverByName("GPKG").CreateDataSource(str(self.town / "brook.gpkg"))
        layer = file.CreateLayer("brook", osr.SpatialReference(wkt=self.dem.GetProjection()), ogr.wkbLineString)
        for name in sorted({name for section in sections for name in section}):
            layer.CreateField(ogr.FieldDefn(name, ogr.OFTReal))
        ends = np.linspace(0, len(way) - 1, len(sections) + 1).astype(int)
        for section, first, last in zip(sections, ends[:-1], ends[1:]):
            feature = ogr.Feature(layer.GetLayerDefn())
            for name, value in section.items():
                feature.SetField(name, value)
            # Beside the centres, so that no line goes through a corner, where rounding would say which cell it passes.
            places = [f"{left + (c + 0.63) * width} {top + (r + 0.79) * height}" for r, c in way[first:last + 1]]
            feature.SetGeometry(ogr.CreateGeometryFromWkt(f"LINESTRING({','.join(places)})"))
            layer.CreateFeature(feature)
        del file

    @staticmethod
    def heads(azimuth, area, least_m2=60_000):
        """Cells that drain so much and into which no such cell drains."""
        large = area >= least_m2
        fed = np.zeros(area.shape, bool)
        for row, column in zip(*np.nonzero(large)):
            if azimuth[row, column] in STEPS:
                fed[row + STEPS[azimuth[row, column]][0], column + STEPS[azimuth[row, column]][1]] = True
        return list(zip(*np.nonzero(large & ~fed)))

    @staticmethod
    def way(azimuth, cell):
        cells = [cell]
        while azimuth[cells[-1]] in STEPS:
            step = STEPS[azimuth[cells[-1]]]
            cells.append((cells[-1][0] + step[0], cells[-1][1] + step[1]))
        return cells

    def with_runoff(self):
        lines = (self.town / "cover-book.csv").read_text().strip().splitlines()
        (self.town / "cover-book.csv").write_text(lines[0] + ",c\n" + "".join(
            f"{line},{RUNOFF[code]}\n" for code, line in enumerate(lines[1:], 1)))

    def test_rain_zones_give_each_point_its_depth(self):
        self.zones()
        # Without points of their own, where each way out of the town is the last point on some way down.
        self.study(('two_year_24_hour = "62 mm"', 'zones = "zones.gpkg"'), ('file = "points.geojson"\nmove_within = "5 m"', 'auto_area = "0.5 %"'))
        self.verify("rain zones of the points: holds", "travel time to point 1 under the rain of its zone", "travel time to point 3 under the rain")
        rains = {outlet["rain_zone"]["rain"] for outlet in self.result("town/result")["outlets"]}
        self.assertEqual(rains, {"hill.csv", "valley.csv"})

    def test_rain_zones_give_each_point_its_storm(self):
        self.zones()
        self.study(('two_year_24_hour = "62 mm"', 'zones = "zones.gpkg"'), ('sheet = "nrcs"', 'sheet = "kinematic"'))
        self.verify("rain zones of the points: holds", "travel time to Weir")

    def test_a_wrong_zone_is_found(self):
        self.zones()
        self.study(('two_year_24_hour = "62 mm"', 'zones = "zones.gpkg"'))
        self.done("run", "town/changed.toml", "--replace")
        path = self.town / "result/result.json"
        result = json.loads(path.read_text())
        result["outlets"][0]["rain_zone"]["rain"] = {"hill.csv": "valley.csv", "valley.csv": "hill.csv"}[result["outlets"][0]["rain_zone"]["rain"]]
        path.write_text(json.dumps(result))
        self.assertIn("rain zones of the points: FAILS", self.said_by_reader(1))

    def test_mapped_channels_have_the_sections_of_their_lines(self):
        self.brook({"width_m": 1.2, "side_slope": 2.0, "depth_m": 0.4, "n": 0.03}, {"n": 0.02, "cross_fall": 0.03, "spread_m": 2.0}, {"n": 0.06}, {})
        self.study(('elevation = "dem.tif"', 'elevation = "dem.tif"\nchannels = "brook.gpkg"'))
        self.verify("water follows the mapped lines: holds", "spill elevation is the greater of the bed and that below", "travel time (", "regime: holds")
        # As they would be without the sections they are not.
        self.brook({})
        self.assertIn("travel time: FAILS", self.said_by_reader(1))

    def test_channels_run_as_the_design_storm_fills_them(self):
        self.with_runoff()
        self.study(('two_year_24_hour = "62 mm"', 'two_year_24_hour = "62 mm"\n' + FORMULA),
                   ('channel = { n = 0.045,', 'channel = { flow = "design storm", side_slope = 1.5, n = 0.045,'))
        self.verify("travel time (", "regime: holds")
        # As full to the brim they would not.
        text = (self.town / "changed.toml").read_text()
        (self.town / "changed.toml").write_text(text.replace('flow = "design storm", side_slope = 1.5, ', ""))
        self.assertIn("travel time: FAILS", self.said_by_reader(1))

    def test_mapped_sections_fill_with_the_design_storm_too(self):
        self.with_runoff()
        self.brook({"width_m": 1.2, "side_slope": 2.0, "depth_m": 0.4, "n": 0.03}, {"n": 0.02, "cross_fall": 0.03, "spread_m": 2.0}, {"n": 0.06})
        self.study(('two_year_24_hour = "62 mm"', 'two_year_24_hour = "62 mm"\n' + FORMULA),
                   ('elevation = "dem.tif"', 'elevation = "dem.tif"\nchannels = "brook.gpkg"'),
                   ('channel = { n = 0.045,', 'channel = { flow = "design storm", n = 0.045,'))
        self.verify("water follows the mapped lines: holds", "travel time (")


if __name__ == "__main__":
    unittest.main()
