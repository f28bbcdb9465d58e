#!/usr/bin/python3
"""The calculation sheet, read as a reviewer reads it: every line is recomputed from the numbers that stand on it, to 0.1 %."""
import ast
import contextlib
import hashlib
import json
import math
import operator
import re
import sqlite3
import unittest

from support import CommandTest, FOOT, INCH, SOURCE, demo_town, table

TOLERANCE = 1e-3
CALCULATION = re.compile(r"^ {4}(\w[\w ]*?) = (.+) = (-?[0-9.]+)(?: ([\w/]+))?$")
OPERATORS = {ast.Add: operator.add, ast.Sub: operator.sub, ast.Mult: operator.mul, ast.Div: operator.truediv, ast.Pow: operator.pow}
FUNCTIONS = {"sqrt": math.sqrt, "ln": math.log, "min": min}
RAIN = """duration_min,intensity_2yr_mm_h,intensity_10yr_mm_h
5,110,175
15,70,112
60,28,45
360,7.5,12
1440,2.6,4.1
"""


def value(expression):
    """What a hand calculator makes of an expression; nothing but numbers, brackets, + - x / ^, sqrt, ln and min is understood."""
    def of(node):
        if isinstance(node, ast.Constant):
            return float(node.value)
        if isinstance(node, ast.UnaryOp) and isinstance(node.op, ast.USub):
            return -of(node.operand)
        if isinstance(node, ast.BinOp):
            return OPERATORS[type(node.op)](of(node.left), of(node.right))
        if isinstance(node, ast.Call) and len(node.args) == (2 if node.func.id == "min" else 1):
            return FUNCTIONS[node.func.id](*map(of, node.args))
        raise ValueError(expression)
    return of(ast.parse(expression.replace(" x ", " * ").replace("^", " ** "), mode="eval").body)


def whole_lines(text):
    """Lines of a sheet with those that were broken for width joined again."""
    lines = []
    for line in text.splitlines():
        if re.match(r"^ {6,}\S", line) and lines and lines[-1].startswith("    "):
            lines[-1] += " " + line.strip()
        elif re.match(r"^  \S", line) and lines and lines[-1].startswith("* "):
            lines[-1] += " " + line.strip()
        else:
            lines.append(line)
    return lines


def calculations(text):
    return [match.groups() for match in map(CALCULATION.match, whole_lines(text)) if match]


def number_after(symbol, line):
    return float(re.search(rf"\b{symbol} = ([0-9.]+)", line).group(1))


def parts(lines):
    """Heading of each part of a sheet → its lines."""
    found, heading = {}, ""
    for line, below in zip(lines, lines[1:] + [""]):
        if line and below == "-" * len(line):
            heading = line
        found.setdefault(heading, []).append(line)
    return found


def segments(lines):
    """Of the lines of a path: (item line, {label: (expression, result)}) of each segment."""
    found = []
    for line in lines:
        if re.match(r"^\* \d+\. ", line):
            found.append((line, {}))
        match = CALCULATION.match(line)
        if match and found:
            found[-1][1][match[1]] = (match[2], float(match[3]))
    return found


class Sheets(CommandTest):
    SAID = {}   # what `explain` says, by result and point

    def run_demo(self, units, extra="", sheet="nrcs"):
        """Runs the demo into a folder called as the units are."""
        if not (self.folder / "town").exists():
            demo_town(self.folder / "town")
        text = (self.folder / "town/study.toml").read_text().replace('report_units = "si"', f'report_units = "{units}"')
        text = text.replace('sheet = "nrcs"', f'sheet = "{sheet}"').replace("[rain]", "[rain]\n" + extra)
        (self.folder / "town/rain.csv").write_text(RAIN)
        (self.folder / "town/own.toml").write_text(text)
        self.repeated("run", "town/own.toml", "--out", units)
        return [row["name"] for row in table(self.folder / units / "tables/outlets.csv")]

    def sheet(self, point, out="us"):
        """What `explain` says; asked once of the same result."""
        key = hashlib.sha256((self.folder / out / "result.json").read_bytes()).digest(), point
        if key not in self.SAID:
            self.SAID[key] = self.done("explain", out, point)
        return self.SAID[key]

    def check_every_line(self, text, where):
        lines = calculations(text)
        for label, expression, result, unit in lines:
            got = value(expression)
            self.assertLess(abs(got - float(result)), TOLERANCE * abs(float(result)) + 5.1e-5 * (label == "sum"),
                            f"{where}: {label} = {expression} = {result} {unit}, but it is {got}")
        # Nothing looks like a calculation and escapes the check.
        likely = [line for line in whole_lines(text) if re.match(r"^ {4}(T|T ponded|V|Q|u|x|i|sum|A|CA|CA \d+|C \w+ Cf|C uncut|end of the stretch|share of CA) = ", line)]
        self.assertEqual(len(likely), len(lines), where)
        self.assertLessEqual(max(map(len, text.splitlines())), 100, where)
        return lines

    def check_segments(self, text, us, kinematic_rain=None):
        """The numbers at the head of each segment give its time by the published formula."""
        by_heading = parts(whole_lines(text))
        rows = segments(by_heading["Governing path, segment by segment"])
        for item, lines in rows:
            length, regime = number_after("L", item), re.match(r"^\* \d+\. (\w+)", item)[1]
            if length == 0:
                continue
            if regime == "sheet":
                surface = number_after("n", item) / math.sqrt(number_after("S", item))
                expression, end = lines["u" if kinematic_rain is None else "x"]
                begin = float(expression.split(" + ")[0])
                self.assertAlmostEqual(begin + (surface if kinematic_rain is None else 1) * length, end, delta=1e-3 * end)
                u0, u1 = (begin, end) if us else (begin / FOOT, end / FOOT)
                minutes = (60 * 0.007 * (u1 ** 0.8 - u0 ** 0.8) / (0.062 / INCH) ** 0.5 if kinematic_rain is None else
                           0.933 * surface ** 0.6 * (u1 ** 0.6 - u0 ** 0.6) / (kinematic_rain if us else kinematic_rain / 25.4) ** 0.4)
            elif regime == "shallow":
                minutes = length / number_after("k", item) / math.sqrt(number_after("S", item)) / 60
            elif regime == "channel":
                factor = FOOT ** (-1 / 3) if us else 1
                minutes = length * number_after("n", item) / (factor * number_after("R", item) ** (2 / 3) * number_after("S", item) ** 0.5) / 60
            else:
                minutes = length / math.sqrt((9.80665 / FOOT if us else 9.80665) * number_after("depth", item)) / 60
            self.assertAlmostEqual(lines["T"][1] / minutes, 1, delta=TOLERANCE, msg=item)
        return rows

    def test_every_line_holds_for_every_point_in_both_units(self):
        for units in ("us", "si"):
            names = self.run_demo(units)
            self.assertEqual(len(names), 11)
            for name in names:
                text = self.sheet(name, units)
                self.assertGreater(len(self.check_every_line(text, (units, name))), 15)
                self.check_segments(text, units == "us")

    def test_rows_are_those_of_the_table_and_add_up_to_the_points_time(self):
        self.run_demo("us")
        for outlet in self.result("us")["outlets"]:
            rows = self.check_segments(self.sheet(outlet["name"]), True)
            stated = [r for r in table(self.folder / "us/tables/segments.csv")
                      if r["point"] == outlet["name"] and r["path"] == "governing"]
            self.assertEqual(len(rows), len(stated))
            self.assertAlmostEqual(rows[-1][1]["sum"][1], outlet["time_of_concentration_min"], delta=1e-4)
            for (_, lines), row in zip(rows, stated):
                self.assertAlmostEqual(lines["sum"][1], float(row["running_time_min"]), delta=6e-4)

    def test_kinematic_rounds_hold_with_a_table_of_rain(self):
        for units in ("si", "us"):
            names = self.run_demo(units, 'file = "rain.csv"\nreturn_periods = [2, 10]', "kinematic")
            storms = {(r["point"], r["return_period_years"]): r for r in table(self.folder / units / "tables/storms.csv")}
            rounds = 0
            for name in names:
                text = self.sheet(name, units)
                self.check_every_line(text, (units, name))
                unit = "in_per_h" if units == "us" else "mm_per_h"
                self.check_segments(text, units == "us", float(storms[name, "10"]["intensity_" + unit]))
                rain = "\n".join(parts(whole_lines(text))["Rain"])
                rounds += rain.count("* round ")
                for period in ("2", "10"):
                    self.assertIn(f"* {period}-year storm", rain)
            self.assertEqual(rounds, len(table(self.folder / units / "tables/iterations.csv")))

    def test_kinematic_rounds_hold_with_formulas_of_rain(self):
        formula = 'formula = "i[mm/h] = 900 T^0.2 / (t[min] + 10)^0.8"\nreturn_periods = [2, 25]'
        for name in self.run_demo("us", formula, "kinematic"):
            lines = self.check_every_line(self.sheet(name), name)
            self.assertGreater(sum(label == "i" for label, *_ in lines), 1, name)

    def test_other_methods_are_those_of_the_table(self):
        for name in self.run_demo("us", 'file = "rain.csv"'):
            text = self.sheet(name)
            self.check_every_line(text, name)
            stated = [r for r in table(self.folder / "us/tables/methods.csv") if r["point"] == name]
            times = {r["name"]: float(r["time_min"]) for r in stated if r["time_min"]}
            shown, method = {}, None
            for line in parts(whole_lines(text))["Other methods beside it"]:
                if line.startswith("* "):
                    method = line[2:].split(", not applicable")[0]
                match = CALCULATION.match(line)
                if match and match[4] == "min":
                    shown[method] = float(match[3])
            self.assertEqual(shown.keys(), times.keys())
            for method, minutes in shown.items():
                self.assertAlmostEqual(minutes / times[method], 1, delta=2e-4 + 5e-4 / times[method], msg=method)

    def test_open_water_and_ponded_ground_have_lines_that_hold(self):
        self.run_with_pond()
        text = "".join(self.sheet(row["name"], "result") for row in table(self.folder / "result/tables/outlets.csv"))
        self.check_every_line(text, "pond")
        self.assertIn("water over Pond", text)
        self.assertIn("T ponded", text)

    def test_the_sheet_says_sources_cautions_and_what_was_noticed(self):
        self.run_demo("si")
        text = " ".join(self.sheet("Weir", "si").split())
        for part in ("TR-55, 2nd ed., 1986, equation 3-3", "read in its source", "value from memory", "licensed engineer",
                     "median", "Kirpich, Time of concentration", "edge of the data"):
            self.assertIn(part, text)

    def test_the_file_of_a_point_holds_the_same_calculations(self):
        names = self.run_demo("us")
        files = sorted((self.folder / "us/tables/sheets").iterdir())
        self.assertEqual(len(files), len(names))
        for number, name in enumerate(names, 1):
            own = [file for file in files if file.name.startswith(f"{number}-")]
            self.assertEqual(len(own), 1)
            text = own[0].read_text(encoding="utf-8")
            blocks = "\n".join(re.findall(r"(?ms)^  ```text\n(.*?)^  ```$", text))
            self.assertEqual(calculations(re.sub(r"(?m)^  ", "", blocks)), calculations(self.sheet(name)))


class Asking(CommandTest):
    def test_a_name_that_is_near_is_proposed(self):
        self.done("demo", "town")
        self.done("run", "town/study.toml")
        self.refused(1, "explain", "town/result", "Wier", says=("called 'Wier'", "did you mean Weir?", "tables/outlets.csv"))

    def test_a_folder_that_is_no_result_is_refused(self):
        self.refused(1, "explain", "nowhere", "Weir", says=("no folder 'nowhere'", "rillclock run"))
        (self.folder / "letters").mkdir()
        self.refused(1, "explain", "letters", "Weir", says=("'letters' is not a result", "result.json"))
        (self.folder / "letters/result.json").write_text('{"outlets": 3}')
        self.refused(1, "explain", "letters", "Weir", says=("letters/result.json", "no result of this version"))
        (self.folder / "letters/result.json").write_text('{"outlets": [{"name": "Weir"}], "report_units": "si", "parameters": {}}')
        self.refused(1, "explain", "letters", "Weir", says=("letters/result.json", "no whole result"))

    def test_both_words_are_needed(self):
        self.refused(2, "explain", "town/result", says=("POINT",))

    def test_names_cannot_steer_the_terminal_nor_become_markup_or_paths(self):
        self.small_study()
        evil = "../\x1b[2J<b>*x*</b>|`"
        (self.folder / "points.geojson").write_text(
            '{"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"EPSG:25832"}},"features":[{"type":"Feature",'
            '"properties":{"name":"../\\u001b[2J<b>*x*</b>|`"},"geometry":{"type":"Point","coordinates":[500050,5399930]}}]}')
        self.done("run", "--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "90 mm", "--points",
                  "points.geojson")
        self.assertNotIn("\x1b", self.done("explain", "result", evil))
        files = [file.name for file in (self.folder / "result/tables/sheets").iterdir()]
        self.assertEqual(files, ["1-_____2J_b__x___b___.md"])
        text = (self.folder / "result/tables/sheets" / files[0]).read_text(encoding="utf-8")
        self.assertIn(r"\<b\>\*x\*\</b\>\|\`", text)


class Many(CommandTest):
    def points_of(self, layer):
        with contextlib.closing(sqlite3.connect(self.folder / "result/study.gpkg")) as package:
            return [point for (point,) in package.execute(f"SELECT point FROM {layer}")]

    def test_of_many_points_the_largest_catchments_have_files_and_all_can_be_asked_for(self):
        self.small_study()
        rows, columns = 40, 50
        points = ",".join('{"type":"Feature","properties":{"name":"p%d"},"geometry":{"type":"Point","coordinates":[%f,%f]}}'
                          % (i, 500001 + 2 * (i % columns), 5399999 - 2 * (i // columns)) for i in range(0, rows * columns, 3))
        (self.folder / "points.geojson").write_text('{"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"EPSG:25832"}},'
                                                    f'"features":[{points}]}}')
        study = (self.folder / "study.toml")
        study.write_text('[terrain]\nelevation = "dem.tif"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n[points]\n'
                         'file = "points.geojson"\nmove_within = "0 m"\n[rain]\ntwo_year_24_hour = "90 mm"\n')
        said = self.done("check", "study.toml")
        self.assertIn("governing_paths.geojson and longest_paths.geojson hold the paths of the last points alone", said)
        self.assertIn("whole catchments in study.gpkg are those of the last points alone", said)
        self.done("run", "study.toml")
        rows = table(self.folder / "result/tables/outlets.csv")
        self.assertEqual(len(rows), 667)
        last = {row["subarea"] for row in table(self.folder / "result/tables/handover.csv") if not row["next_point"]}
        for name in ("governing_paths", "longest_paths"):
            features = json.loads((self.folder / f"result/{name}.geojson").read_text())["features"]
            self.assertEqual({feature["properties"]["point"] for feature in features}, last, name)
        for notice in ("paths-left-out", "catchments-left-out"):
            self.assertIn(notice, {row["notice"] for row in table(self.folder / "result/tables/review.csv")})
        self.assertEqual(set(self.points_of("catchments")), last)
        self.assertEqual(len(self.points_of("subareas")), 667)
        files = {file.name for file in (self.folder / "result/tables/sheets").iterdir()}
        largest = sorted(rows, key=lambda row: (-float(row["area_ac"]), int(row["number"])))[:500]
        self.assertEqual(len(files), 500)
        least_kept = float(largest[-1]["area_ac"])
        for row in rows:
            if float(row["area_ac"]) > least_kept:
                self.assertIn(f"{row['number']}-{row['name']}.md", files)
        study.write_text(study.read_text() + '[output]\ncatchments = "all"\n')
        self.assertNotIn("whole catchments", self.done("check", "study.toml"))
        self.done("run", "study.toml", "--replace")
        self.assertEqual(len(self.points_of("catchments")), 667)
        smallest = min(rows, key=lambda row: float(row["area_ac"]))
        self.assertIn("Calculation sheet: " + smallest["name"], self.done("explain", "result", smallest["name"]))


if __name__ == "__main__":
    unittest.main()
