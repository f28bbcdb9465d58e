#!/usr/bin/python3
"""The section of peak flow on the calculation sheet: every figure recomputed from the text of the sheet alone, to its printed digits."""
import re
import subprocess
import unittest

import numpy as np
from sheet_test import CALCULATION, parts, value, whole_lines
from support import COMMAND, CommandTest, class_folder, table

HEADING = "Peak flow"
# Digits that a result has, by its label; those of CA n have the number left out.
DIGITS = {"CA of land": 9, "A": 8, "CA": 8, "C before Cf": 6, "C with Cf": 6, "C uncut": 6, "i": 7, "Q": 5, "end of the stretch": 8, "share of CA": 6}
RAIN = "duration_min,intensity_2yr_in_h,intensity_10yr_in_h,intensity_100yr_in_h\n5,4.83,6.91,10.3\n15,2.9,4.4,6.7\n60,1.3,1.9,3.1\n1440,0.13,0.2,0.31\n"


def unit_of_last_digit(number, digits):
    """What one more in the last of so many digits is worth."""
    return 10.0 ** (int(np.floor(np.log10(abs(number)))) - digits + 1) if number else 1e-12


def number(text, pattern):
    found = re.search(pattern, text)
    assert found, (pattern, text)
    return float(found[1])


class Section:
    """A section as a reviewer reads it: {return period: [lines]}, and what stands before the first and after the last."""

    def __init__(self, text):
        self.lines = parts(whole_lines(text))[HEADING]
        self.text = "\n".join(self.lines)
        self.periods, years = {}, None
        for line in self.lines:
            if found := re.match(r"^\* Peak of ([0-9.]+) years?: (.*)$", line):
                years = float(found[1])
                self.periods[years] = [line]
            elif years is not None and line.startswith("    "):
                self.periods[years].append(line)


def fact(lines, label):
    return next(line for line in lines if line.startswith(f"    {label}: "))


class PeakSheet(CommandTest):
    """What tests of the section share."""

    def check_line(self, line, where):
        """Recomputes a calculation; gives its label, numbers and result."""
        label, expression, result, _ = CALCULATION.match(line).groups()
        digits = DIGITS[re.sub(r"^CA \d+$", "CA of land", label)]
        got = value(expression)
        self.assertLessEqual(abs(got - float(result)), unit_of_last_digit(got, digits) * (1 + 1e-6), f"{where}: {line}, but it is {got}")
        return label, expression, float(result)

    def check_land(self, lines, where):
        """Products and composites follow from the rows of land; gives CA and the composites."""
        rows = [line for line in lines if re.match(r"^    \d+\. ", line)]
        products = [line for line in lines if re.match(r"^    CA \d+ = ", line)]
        self.assertEqual(len(rows), len(products), where)
        areas, plain, used = [], [], []
        for row, product in zip(rows, products):
            areas.append(number(row, r"\bA = ([0-9.]+)"))
            plain.append(number(row, r"\bC = ([0-9.]+)"))
            rest = "means by area" in row
            used.append(number(row, r"Cf C = ([0-9.]+)") if rest else min(1.0, number(row, r"Cf = ([0-9.]+)") * plain[-1]))
            self.assertAlmostEqual(self.check_line(product, where)[2] / max(used[-1] * areas[-1], 1e-30), 1 if used[-1] else 0, delta=1e-8)
        said = {label: (expression, result) for label, expression, result in
                (self.check_line(line, where) for line in lines if re.match(r"^    (A|CA|C before Cf|C with Cf|C uncut) = ", line))}
        self.assertAlmostEqual(said["A"][1] / sum(areas), 1, delta=1e-7)
        self.assertAlmostEqual(said["CA"][1] / np.dot(areas, used), 1, delta=1e-7)
        self.assertAlmostEqual(said["C before Cf"][1] / (np.dot(areas, plain) / sum(areas)), 1, delta=1e-5)
        self.assertAlmostEqual(said["C with Cf"][1] / (np.dot(areas, used) / sum(areas)), 1, delta=1e-5)
        self.assertEqual(len(re.findall(r" \+ ", said["CA"][0])), len(rows) - 1)
        if "C uncut" in said:
            self.assertGreater(said["C uncut"][1], said["C with Cf"][1])
        return said["CA"][1]

    def check_flow(self, lines, ca, us, rounded, where):
        """i of its line, CA as told and the factor of the units make Q; gives it."""
        intensity = self.check_line(next(line for line in lines if line.startswith("    i = ")), where)[2]
        _, expression, flow = self.check_line(next(line for line in lines if line.startswith("    Q = ")), where)
        self.assertEqual([float(x) for x in expression.split(" x ")[:1]], [intensity])
        self.assertEqual(float(re.match(r"[0-9.]+ x ([0-9.]+)", expression)[1]), ca, where)
        factor = 43560 / 43200 if us and not rounded else 1 if us else 1 / 363 if rounded else 1 / 360
        self.assertAlmostEqual(flow / (intensity * ca * factor), 1, delta=1e-4)
        return flow

    def check_period(self, lines, lands, us, rounded, where):
        """One return period; `lands`: CA by return periods before, to which a later one may refer. Gives what a table should say too."""
        for line in lines:
            if " = " in line and CALCULATION.match(line):
                self.check_line(line, where)
        same = next((line for line in lines if line.startswith("    land: ")), None)
        if same:
            ca = lands[number(same, r"those of ([0-9.]+) year")]
            self.assertEqual(number(same, r"([0-9.]+) \w+ of CA in all"), ca)
        else:
            ca = self.check_land(lines, where)
        begin = next(i for i, line in enumerate(lines) if line.startswith("    whole area: "))
        middle = next(i for i, line in enumerate(lines) if line.startswith("    partial area: "))
        whole = self.check_flow(lines[begin:middle], ca, us, rounded, where)
        told = {"ca": ca, "whole": whole, "peak": whole, "time": number(lines[begin], r"after ([0-9.]+) min"),
                "used": number(lines[begin], r"used ([0-9.]+) min")}
        self.assertGreaterEqual(told["used"], told["time"])
        if "no shorter rain makes more" not in lines[middle]:
            told["peak"] = self.check_part(lines[middle:], ca, us, rounded, where)
            self.assertGreater(told["peak"], whole)
        self.assertEqual(number(lines[0], r": ([0-9.]+) "), told["peak"])
        bounds = fact(lines, "if times were not binned")
        self.assertLessEqual(number(bounds, r"at least ([0-9.]+)"), told["peak"])
        self.assertGreaterEqual(number(bounds, r"at most ([0-9.]+)"), told["peak"])
        makers = [number(line, r": ([0-9.]+) % of the CA") for line in lines if line.startswith("    made by the subarea of ")]
        more = any(line.startswith("    and by: ") for line in lines)
        self.assertTrue(0 < sum(makers) < 100.01 if more else abs(sum(makers) - 100) < 0.01, where)
        self.assertEqual(makers, sorted(makers, reverse=True))
        told["alone"] = number(fact(lines, "shortcut of the handbooks"), r"alone ([0-9.]+)")
        return told

    def check_part(self, lines, ca, us, rounded, where):
        duration = number(lines[0], r"rain of ([0-9.]+) min")
        begins = number(lines[0], r"from ([0-9.]+) min")
        within = number(lines[0], r"first water: ([0-9.]+) ")
        _, expression, _ = self.check_line(next(line for line in lines if line.startswith("    end of the stretch = ")), where)
        self.assertEqual([float(x) for x in expression.split(" + ")], [begins, duration])
        _, expression, share = self.check_line(next(line for line in lines if line.startswith("    share of CA = ")), where)
        self.assertEqual([float(x) for x in expression.split(" / ")], [within, ca])
        self.assertLess(share, 1)
        return self.check_flow(lines, within, us, rounded, where)

    def check_point(self, text, rows, us, rounded=False):
        """The section of a point against itself, and what it says against the rows of peaks.csv."""
        section = Section(text)
        lands, told = {}, {}
        for years, lines in section.periods.items():
            told[years] = self.check_period(lines, lands, us, rounded, (rows[0]["point"], years))
            lands[years] = told[years]["ca"]
        unit = "ft3_per_s" if us else "m3_per_s"
        self.assertEqual(sorted(told), [float(row["return_period_years"]) for row in rows])
        for row in rows:
            said = told[float(row["return_period_years"])]
            for mine, column in (("whole", "whole_area_peak_" + unit), ("peak", "peak_" + unit), ("alone", "handbook_part_alone_" + unit)):
                self.assertAlmostEqual(said[mine] / float(row[column]), 1, delta=2e-4)
            self.assertAlmostEqual(said["time"], float(row["time_of_concentration_min"]), delta=1e-4)
        self.assertLessEqual(max(map(len, text.splitlines())), 100)
        return section


class Demo(PeakSheet):
    """The demo's own study with peaks, in units and conversions of either kind."""
    WAYS = {"si": ("si", "exact"), "us": ("us", "exact"), "rounded": ("si", "rounded")}

    @classmethod
    def setUpClass(cls):
        cls.kept = class_folder(cls, "sheets")
        subprocess.run([COMMAND, "demo", cls.kept / "town"], check=True, capture_output=True)
        plain = (cls.kept / "town/study-with-peaks.toml").read_text().split("[output]")[0]
        for name, (units, conversion) in cls.WAYS.items():
            study = cls.kept / f"town/{name}.toml"
            study.write_text(plain.replace('report_units = "si"', f'report_units = "{units}"') + f'[peaks]\nconversion = "{conversion}"\n')
            subprocess.run([COMMAND, "run", study, "--out", cls.kept / name, "--quiet"], check=True, capture_output=True)

    def sheets(self, name):
        """(text, rows of peaks.csv) of each point: what `explain` prints stands in its file as Markdown, whose lines are longer."""
        rows = table(self.kept / name / "tables/peaks.csv")
        for point in dict.fromkeys(row["point"] for row in rows):
            yield self.done("explain", self.kept / name, point), [row for row in rows if row["point"] == point]

    def test_every_line_of_every_point_recomputes_to_its_last_digit(self):
        for name, (units, conversion) in self.WAYS.items():
            sections = [self.check_point(text, rows, units == "us", conversion == "rounded") for text, rows in self.sheets(name)]
            self.assertEqual(len(sections), 11)
            said = "".join(section.text for section in sections)
            self.assertEqual(said.count("* Peak of "), 33)
            for part in ("CA of every class are those of 2 years", "C uncut = ", "partial area: rain of", "conversion: " + conversion, "Kuichling, 1889"):
                self.assertTrue(part in said, part)

    def test_what_was_noticed_of_peaks_stands_in_the_section(self):
        said = {rows[0]["point"]: Section(text).text for text, rows in self.sheets("si")}
        for row in table(self.kept / "si/tables/review.csv"):
            if row["notice"] == "coefficient-cut":
                self.assertIn(row["text"].split(" would be ")[0], " ".join(said[row["point"]].split()))
        self.assertIn("was cut to 1", " ".join(" ".join(said.values()).split()))


class Small(PeakSheet):
    """The small study with rain of a table."""

    def run_small(self, book, codes, more="", rain=RAIN):
        self.ground()
        self.cover(values=codes)
        self.book(book)
        (self.folder / "rain.csv").write_text(rain)
        (self.folder / "study.toml").write_text(f'''report_units = "us"
[terrain]
elevation = "dem.tif"
[surface]
cover = "cover.tif"
book = "book.csv"
soil_group = "B"
[rain]
file = "rain.csv"
two_year_24_hour = "3.6 in"
return_periods = [2, 100]
{more}''')
        self.done("run", "study.toml")
        rows = table(self.folder / "result/tables/peaks.csv") if (self.folder / "result/tables/peaks.csv").exists() else []
        names = [row["name"] for row in table(self.folder / "result/tables/outlets.csv")]
        return {name: (self.done("explain", "result", name), [row for row in rows if row["point"] == name]) for name in names}

    def test_many_kinds_of_land_are_bounded_and_still_add_up(self):
        codes = (np.random.default_rng(5).permutation(2000) % 40 + 1).reshape(40, 50).astype(np.uint8)
        book = "code,name,n_typical,shallow_type,c,source\n" + "".join(f"{code},Kind {code},0.1,pavement,{0.2 + code / 50:g},test\n" for code in range(1, 41))
        said = ""
        for text, rows in self.run_small(book, codes, '[peaks]\nconversion = "rounded"\nleast_time = "7.5 min"\n').values():
            said += self.check_point(text, rows, True, True).text
            self.assertEqual(len(re.findall(r"(?m)^    CA \d+ = ", said)) % 25, 0)
        self.assertIn("25. 16 more kinds of land: A = ", said)
        self.assertIn("partial area: no shorter rain makes more", said)
        self.assertIn("No intensity is read below 7.5 min.", said)

    def test_coefficients_by_soil_and_slope_are_told_with_both_and_have_no_factor(self):
        codes = np.ones((40, 50), np.uint8)
        codes[:, 25:] = 2
        book = "code,name,n_typical,shallow_type,c,land_use,source\n1,Common,0.2,short-grass pasture,,pasture,test\n2,Street,0.011,pavement,0.95,,test\n"
        said = "".join(self.check_point(text, rows, True).text for text, rows in self.run_small(book, codes).values())
        self.assertRegex(said, r"\d+\. Common, soil B, slope (to 2|2 to 6|above 6) %: A = [0-9.]+ ac, C = 0\.\d+, Cf = 1\n")
        self.assertRegex(said, r"\d+\. Street: A = [0-9.]+ ac, C = 0.95, Cf = 1.25\n")
        self.assertIn("min(1, 1.25 x 0.95) x ", said)

    def test_without_coefficients_or_beyond_the_rain_a_sentence_says_so(self):
        codes = np.ones((40, 50), np.uint8)
        bare = "code,name,n_typical,shallow_type,source\n1,Common,0.2,short-grass pasture,test\n"
        for text, _ in self.run_small(bare, codes).values():
            self.assertIn("No peak flows were computed, since no class of the cover book has a runoff coefficient: give it a column c",
                          " ".join(Section(text).text.split()))

    def test_where_the_rain_ends_too_soon_the_period_says_so(self):
        codes = np.ones((40, 50), np.uint8)
        book = "code,name,n_typical,shallow_type,c,source\n1,Common,0.4,short-grass pasture,0.3,test\n"
        said = self.run_small(book, codes, rain="duration_min,intensity_2yr_in_h,intensity_100yr_in_h\n1,7,12\n6,4.8,9\n", more="")
        lacking = [name for name, (_, rows) in said.items() if any(row["why_not"] for row in rows)]
        self.assertTrue(lacking)
        for name in lacking:
            self.assertRegex(" ".join(Section(said[name][0]).text.split()), r"Peak of 2 years: none, since the rain ends before [0-9.]+ min")

    def test_without_rain_by_duration_a_sentence_says_what_to_state(self):
        self.done("run", *self.small_study())
        name = table(self.folder / "result/tables/outlets.csv")[0]["name"]
        said = " ".join(Section(self.done("explain", "result", name)).text.split())
        for part in ("no rain by duration", "file or formula and return_periods under [rain]", "a column c, c_a to c_d or land_use", "impervious_percent"):
            self.assertIn(part, said)


if __name__ == "__main__":
    unittest.main()
