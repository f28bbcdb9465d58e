#!/usr/bin/python3
"""Choices of a study for how each step is timed: rainfall or runoff, charts and conveyance, published channel sizes, sections of mapped
channels."""
import csv
import math
import unittest

import numpy as np
from osgeo import ogr
from scipy.integrate import solve_ivp

from support import CommandTest, FOOT, INCH, system_of, table, write_points

CELL, LEFT, TOP = 0.5, 500_000.0, 5_400_000.0
GRASS = "code,name,n_typical,shallow_type,c,c_a,c_b,source\n1,Grass,0.24,grassed waterway,0.5,0.1,0.25,test\n"
STEADY = 'formula = { 10 = "i[in/h] = 5 / (t[min] + 0)^0.000001" }'
STUDY = """report_units = "{units}"
[terrain]
elevation = "dem.tif"
vertical_step = "0.1 mm"
slope_window = "{window}"
{terrain}
[surface]
cover = "cover.tif"
book = "book.csv"
{surface}
[points]
file = "points.geojson"
move_within = "0.1 m"
[rain]
{rain}
[timing]
{timing}
"""
NRCS, KINEMATIC = 'two_year_24_hour = "3.6 in"', f"two_year_24_hour = \"3.6 in\"\n{STEADY}"
NO_SHEET = 'sheet_limit = "1 mm"\n'


class Strip(CommandTest):
    """Three strips side by side that fall to the south; the point is the last cell of the middle one."""

    def run_strip(self, slopes, classes, book=GRASS, timing="", rain=NRCS, surface="", terrain="", units="us", cell=CELL, window=None):
        z = 1000 - np.concatenate([[0], np.cumsum(np.asarray(slopes) * cell)])
        self.ground(values=np.tile(z[:, None], (1, 3)), cell=cell)
        codes = np.append(classes, classes[-1]).astype(np.uint8)
        self.cover(values=np.tile(codes[:, None], (1, 3)), cell=cell)
        self.book(book)
        write_points(self.folder / "points.geojson", [("end", (LEFT + 1.5 * cell, TOP - (len(z) - 0.5) * cell))])
        (self.folder / "study.toml").write_text(STUDY.format(units=units, window=window or f"{cell} m", terrain=terrain, surface=surface, rain=rain,
                                                             timing=timing))
        self.done("run", "study.toml", "--replace")
        self.rows = [row for row in table(self.folder / "result/tables/segments.csv") if row["path"] == "governing"]
        return self.result()["outlets"][0]

    def refuse_strip(self, says, book=GRASS, timing="", rain=NRCS):
        self.ground()
        self.cover()
        self.book(book)
        write_points(self.folder / "points.geojson", [("end", (LEFT + 21, TOP - 21))])
        (self.folder / "study.toml").write_text(STUDY.format(units="us", window="20 m", terrain="", surface="", rain=rain, timing=timing))
        self.refused(1, "run", "study.toml", says=says)


class SheetFlow(Strip):
    TIMING = 'sheet = "kinematic"\nsheet_limit = "200 m"\nsheet_limit_rule = "stated"\nchannel_from = "mapped only"\n'
    FLAT_RAIN = 5.0 * INCH / 3600  # m/s

    def characteristic_s(self, planes):
        """Seconds that the wave from the divide takes down planes of (n, slope, length), by integration of dx/dt = 5/3 √S/n h^(2/3) and
        dh/dt = i. Where n or S changes the flow is the same on both sides, and so the depth is not."""
        # The printed constant 0.933 stands for a little more conveyance than √S/n in metres and seconds.
        theory = FOOT ** 0.6 * (INCH / 3600) ** -0.4 / 60
        ease = (theory / 0.933) ** (5 / 3)
        now, depth = 0.0, 0.0
        for n, slope, length in planes:
            alpha = ease * math.sqrt(slope) / n
            if depth:
                depth = (flow / alpha) ** 0.6
            end = lambda t, state, length=length: state[0] - length
            end.terminal = True
            way = solve_ivp(lambda t, s, a=alpha: [5 / 3 * a * max(s[1], 0) ** (2 / 3), self.FLAT_RAIN], (now, now + 1e5), [0.0, depth],
                            events=end, rtol=1e-9, atol=1e-12)
            now, depth = float(way.t_events[0][0]), float(way.y_events[0][0][1])
            flow = alpha * depth ** (5 / 3)
        return now

    def test_a_cascade_of_two_planes_takes_the_time_of_its_kinematic_characteristic(self):
        book = "code,name,n_typical,shallow_type,source\n1,Street,0.02,pavement,test\n2,Grass,0.2,grassed waterway,test\n"
        for upper, lower in (((1, 0.02, 0.01), (2, 0.2, 0.04)), ((2, 0.2, 0.02), (1, 0.02, 0.005)), ((1, 0.02, 0.05), (1, 0.02, 0.01))):
            lengths = [40, 60]  # cells
            slopes = [upper[2]] * lengths[0] + [lower[2]] * lengths[1]
            classes = [upper[0]] * lengths[0] + [lower[0]] * lengths[1]
            outlet = self.run_strip(slopes, classes, book, self.TIMING, KINEMATIC)
            expected = self.characteristic_s([(upper[1], upper[2], 40 * CELL), (lower[1], lower[2], 60 * CELL)])
            self.assertAlmostEqual(outlet["time_of_concentration_s"] / expected, 1, delta=1e-3, msg=(upper, lower))

    def test_sheet_flow_under_runoff_takes_c_i_in_place_of_i(self):
        """C = 0.5 whatever the soil, 0.25 in group B: times 0.5^-0.4 and 0.25^-0.4."""
        slopes, classes = [0.02] * 60, [1] * 60
        under_rain = self.run_strip(slopes, classes, GRASS, self.TIMING, KINEMATIC)["time_of_concentration_s"]
        for surface, c in (("", 0.5), ('soil_group = "B"', 0.25), ('soil_group = "C"', 0.5)):
            outlet = self.run_strip(slopes, classes, GRASS, self.TIMING + 'sheet_rain = "runoff"', KINEMATIC, surface)
            self.assertAlmostEqual(outlet["time_of_concentration_s"] / under_rain, c ** -0.4, places=5)
            self.assertEqual({row["runoff_coefficient"] for row in self.rows}, {f"{c:g}"})
            for name in ("storms", "iterations"):
                self.assertEqual({row["sheet_flow_under"] for row in table(self.folder / f"result/tables/{name}.csv")}, {"C i"})
            for row in self.rows:
                grown = float(row["distance_to_ft"]) ** 0.6 - float(row["distance_from_ft"]) ** 0.6
                i = float(row["rain_intensity_in_per_h"]) * float(row["runoff_coefficient"])
                seconds = 0.933 * 60 * (float(row["n"]) / math.sqrt(float(row["slope_equivalent"]))) ** 0.6 * grown / i ** 0.4
                self.assertAlmostEqual(float(row["formula_time_s"]) / seconds, 1, delta=1e-3)

    def test_runoff_without_a_coefficient_names_the_class(self):
        book = "code,name,n_typical,shallow_type,source\n1,Grass,0.24,grassed waterway,test\n"
        self.refuse_strip(("sheet_rain", "class 1 (Grass)", "column c"), book, self.TIMING + 'sheet_rain = "runoff"', KINEMATIC)
        self.refuse_strip(("has 0 for class 1",), book.replace(",source", ",c,source").replace(",test", ",0,test"),
                          self.TIMING + 'sheet_rain = "runoff"', KINEMATIC)
        self.refuse_strip(("kinematic sheet flow only",), book, 'sheet_rain = "runoff"')


class ShallowFlow(Strip):
    def test_conveyance_is_what_its_printed_n_and_radius_give(self):
        """(1.49 / 0.05) 0.4^(2/3) = 16.178 ft/s."""
        book = "code,name,n_typical,shallow_n,shallow_radius_ft,source\n1,Swale,0.24,0.05,0.4,test\n"
        self.run_strip([0.01] * 200, [1] * 200, book, NO_SHEET + 'channel_from = "mapped only"')
        rows = [row for row in self.rows if row["regime"] == "shallow"]
        self.assertTrue(rows)
        for row in rows:
            k = 1.49 / float(row["n"]) * float(row["hydraulic_radius_ft"]) ** (2 / 3)
            self.assertAlmostEqual(float(row["k_ft_per_s"]) / k, 1, delta=1e-4)
            self.assertAlmostEqual(k, 16.178, places=3)
            self.assertAlmostEqual(float(row["formula_time_s"]) * k * 0.1 / float(row["length_ft"]), 1, delta=1e-3)

    CHART = "slope_percent,turf_ft_s,paved_ft_s\n0.5,0.5,1.5\n2,1.2,2.8\n10,2.4,\n30,3.6,9\n"
    CHART_BOOK = "code,name,n_typical,shallow_type,chart_line,source\n1,Lawn,0.24,short-grass pasture,turf,test\n2,paved,0.011,pavement,,test\n"

    def read(self, name, slope):
        """A reading of the chart, in ft/s."""
        points = [(float(row["slope_percent"]) / 100, float(row[name])) for row in csv.DictReader(self.CHART.splitlines()) if row[name]]
        x, y = np.log(np.array(points).T)
        place = min(max(int(np.searchsorted(x, math.log(slope))), 1), len(x) - 1)
        return math.exp(y[place - 1] + (math.log(slope) - x[place - 1]) * (y[place] - y[place - 1]) / (x[place] - x[place - 1]))

    def test_a_row_by_a_chart_is_the_charts_reading_at_its_slope(self):
        (self.folder / "chart.csv").write_text(self.CHART)
        random = np.random.default_rng(5)
        slopes = np.exp(random.uniform(math.log(0.002), math.log(0.4), 40)).repeat(25)
        self.run_strip(slopes, np.repeat([1, 2], 500), self.CHART_BOOK, NO_SHEET + 'shallow = "chart"\nvelocity_chart = "chart.csv"\nchannel_from = "mapped only"')
        rows = [row for row in self.rows if row["regime"] == "shallow"]
        self.assertGreater(len(rows), 10)
        self.assertGreater(len({row["slope_exponent"] for row in rows}), 3)
        for row in rows:
            slope, length, seconds = (float(row[name]) for name in ("slope_equivalent", "length_ft", "formula_time_s"))
            name = {"Lawn": "turf_ft_s", "paved": "paved_ft_s"}[row["cover"]]
            self.assertAlmostEqual(seconds * self.read(name, slope) / length, 1, delta=1e-3, msg=row)
            self.assertAlmostEqual(seconds * float(row["k_ft_per_s"]) * slope ** float(row["slope_exponent"]) / length, 1, delta=1e-3, msg=row)

    def test_slopes_at_a_point_of_the_chart_make_one_row(self):
        (self.folder / "chart.csv").write_text(self.CHART)
        self.run_strip([0.02] * 400, [1] * 400, self.CHART_BOOK, NO_SHEET + 'shallow = "chart"\nvelocity_chart = "chart.csv"\nchannel_from = "mapped only"')
        self.assertEqual(len([row for row in self.rows if row["regime"] == "shallow"]), 1)

    def test_a_class_without_a_line_is_told_with_the_lines(self):
        (self.folder / "chart.csv").write_text(self.CHART)
        self.refuse_strip(("no line \"Grass\" for class 1", "turf, paved", "chart_line"), GRASS, 'shallow = "chart"\nvelocity_chart = "chart.csv"')

    def test_a_chart_and_the_rule_that_reads_it_go_together(self):
        self.refuse_strip(("velocity_chart = \"chart.csv\" under [timing]",), GRASS, 'shallow = "chart"')
        self.refuse_strip(("acts on shallow = \"chart\" only",), GRASS, 'velocity_chart = "chart.csv"')
        self.refuse_strip(("none.csv",), GRASS, 'shallow = "chart"\nvelocity_chart = "none.csv"')


class Channels(Strip):
    def lines(self, *features, kind=ogr.OFTReal):
        """Lines down the middle strip as (from row, to row, fields)."""
        file = ogr.GetDriverByName("GPKG").CreateDataSource(str(self.folder / "lines.gpkg"))
        layer = file.CreateLayer("lines", system_of(25832), ogr.wkbLineString)
        for name in sorted({name for _, _, fields in features for name in fields}):
            layer.CreateField(ogr.FieldDefn(name, kind))
        for first, last, fields in features:
            feature = ogr.Feature(layer.GetLayerDefn())
            for name, value in fields.items():
                feature.SetField(name, value)
            x = LEFT + 1.5 * CELL
            feature.SetGeometry(ogr.CreateGeometryFromWkt(f"LINESTRING({x} {TOP - (first + 0.5) * CELL},{x} {TOP - (last + 0.5) * CELL})"))
            layer.CreateFeature(feature)
        del file

    def channel_rows(self, slope=0.01, timing='channel_from = "mapped only"\nchannel = { n = 0.03 }', units="si"):
        self.run_strip([slope] * 200, [1] * 200, GRASS, timing, terrain='channels = "lines.gpkg"', units=units)
        return [row for row in self.rows if row["regime"] == "channel"]

    def test_a_trapezoid_runs_by_the_radius_of_its_wetted_part(self):
        """1 m wide, sides 2 to 1, 0.5 m deep: area 1 m2, perimeter 1 + √5 m, radius 0.30902 m."""
        self.lines((0, 200, {"n": 0.02, "width_m": 1, "side_slope": 2, "depth_m": 0.5}))
        rows = self.channel_rows()
        self.assertTrue(rows)
        for row in rows:
            self.assertEqual([row[name] for name in ("bottom_width_m", "side_slope", "flow_depth_m", "cross_fall")], ["1", "2", "0.5", ""])
            self.assertAlmostEqual(float(row["hydraulic_radius_m"]), 1 / (1 + math.sqrt(5)), places=5)
            velocity = float(row["hydraulic_radius_m"]) ** (2 / 3) * math.sqrt(float(row["slope_equivalent"])) / 0.02
            self.assertAlmostEqual(float(row["formula_time_s"]) * velocity / float(row["length_m"]), 1, delta=1e-3)

    def test_a_gutter_runs_at_the_velocity_of_its_spread(self):
        """HEC-22, example 4-1 (from memory): slope 0.010, cross-fall 0.020, n 0.016, spread 2.5 m carries 0.0395 m3/s; over its triangle of
        0.02·2.5²/2 = 0.0625 m2 that is 0.632 m/s."""
        self.lines((0, 200, {"n": 0.016, "cross_fall": 0.02, "spread_m": 2.5}))
        for row in self.channel_rows(0.01):
            self.assertEqual((row["cross_fall"], row["spread_m"], row["side_slope"]), ("0.02", "2.5", ""))
            velocity = 0.752 / 0.016 * math.sqrt(float(row["slope_equivalent"])) * (0.02 * 2.5) ** (2 / 3)
            self.assertAlmostEqual(float(row["velocity_m_per_s"]) / velocity, 1, delta=1e-3)
            self.assertAlmostEqual(float(row["velocity_m_per_s"]), 0.632, delta=0.006)

    def test_where_one_section_ends_a_row_ends_and_an_own_n_keeps_the_size_by_area(self):
        self.lines((0, 100, {"width_m": 1, "depth_m": 0.5}), (100, 200, {"n": 0.06}))
        rows = self.channel_rows()
        self.assertEqual({row["n"] for row in rows}, {"0.03", "0.06"})
        for row in rows:
            self.assertEqual(row["flow_depth_m"], "0.5" if row["n"] == "0.03" else "")

    def test_feet_are_as_good_as_metres(self):
        self.lines((0, 200, {"width_ft": 4, "depth_ft": 2}))
        for row in self.channel_rows(units="us"):
            self.assertAlmostEqual(float(row["hydraulic_radius_ft"]), 1, places=4)

    def test_fields_that_make_no_section_are_told_with_their_feature(self):
        for fields, says in (({"width_m": 1}, "without its depth"), ({"depth_m": 1}, "without a bottom"), ({"cross_fall": 0.02}, "half a gutter"),
                             ({"cross_fall": 0.02, "spread_m": 2, "depth_m": 1}, "both a trapezoid and a gutter"), ({"n": -1}, "n = -1"),
                             ({"n": 0}, "n = 0"), ({"depth_m": 1, "depth_ft": 3, "width_m": 1}, "both depth_m and depth_ft"),
                             ({"depth_m": float("inf"), "width_m": 1}, "depth_m = inf")):
            (self.folder / "lines.gpkg").unlink(missing_ok=True)
            self.lines((0, 100, {}), (0, 200, fields))
            self.refuse_strip(("feature 2 of the channels", says), timing='channel_from = "mapped only"')

    def refuse_strip(self, says, book=GRASS, timing="", rain=NRCS):
        z = 1000 - 0.01 * CELL * np.arange(201)
        self.ground(values=np.tile(z[:, None], (1, 3)), cell=CELL)
        self.cover(values=np.ones((201, 3), np.uint8), cell=CELL)
        self.book(book)
        write_points(self.folder / "points.geojson", [("end", (LEFT + 1.5 * CELL, TOP - 200.5 * CELL))])
        (self.folder / "study.toml").write_text(STUDY.format(units="us", window="20 m", terrain='channels = "lines.gpkg"', surface="", rain=rain,
                                                             timing=timing))
        self.refused(1, "run", "study.toml", says=says)

    def test_a_field_of_words_is_refused(self):
        self.lines((0, 200, {"n": "smooth"}), kind=ogr.OFTString)
        self.refuse_strip(("field n", "no numbers"))

    def test_a_region_has_its_own_width_and_depth_and_small_channels_are_told(self):
        """Interior Plains (from memory): W = 2.56 A^0.351, D = 0.38 A^0.191."""
        outlet = self.run_strip([0.01] * 200, [1] * 200, GRASS, 'channel_from = "10 m2"\nchannel = { region = "Interior Plains" }', units="si")
        channel = self.result()["parameters"]["channel"]
        self.assertEqual(channel["region"], "Interior Plains")
        for row in (row for row in self.rows if row["regime"] == "channel"):
            area = float(row["area_to_ha"]) / 100
            width, depth = 2.56 * area ** 0.351, 0.38 * area ** 0.191
            self.assertAlmostEqual(float(row["radius_to_m"]) / (width * depth / (width + 2 * depth)), 1, delta=1e-3)
        notices = {notice["notice"]: notice for notice in self.result()["notices"]}
        self.assertIn("channel-smaller-than-its-law", notices)
        self.run_strip([0.01] * 200, [1] * 200, GRASS, 'channel_from = "10 m2"\nchannel = { hydraulic_radius = "0.1 m" }')
        self.assertNotIn("channel-smaller-than-its-law", {notice["notice"] for notice in self.result()["notices"]})
        self.assertTrue(outlet)

    def test_a_region_that_is_not_there_is_told_with_those_that_are(self):
        self.lines((0, 200, {}))
        self.refuse_strip(('"Interior Planes"', '"Interior Plains"', "did you mean"), timing='channel = { region = "Interior Planes" }')
        self.refuse_strip(("both a region and a size",), timing='channel = { region = "Interior Plains", hydraulic_radius = "1 m" }')


if __name__ == "__main__":
    unittest.main()
