#!/usr/bin/python3
"""The words of the command line, and that README and program say the same of them."""
import functools
import os
import re
import shutil
import subprocess
import sys
import unittest

from support import COMMAND, CommandTest, SOURCE, demo_town

README = (SOURCE / "README.md").read_text(encoding="utf-8")
COMMANDS = ("run", "check", "explain", "compare", "methods", "completion", "manual", "demo")


@functools.cache
def help_of(*words):
    return subprocess.run([COMMAND, *words, "--help"], capture_output=True, text=True, check=True).stdout


def options_in(text):
    """Every --word and -x of a text, apart from rows of dashes in tables."""
    return set(re.findall(r"(?<![\w-])(--[a-z][a-z-]*|-[a-z])(?![\w-])", text))


def section(title):
    """A section of the README, from its heading to the next of the same or a higher level."""
    found = re.search(rf"(?ms)^(#+) {re.escape(title)}\n(.*?)(?=^#{{1,2}} |\Z)", README)
    return found.group(2)


class CommandLine(CommandTest):
    def test_help_and_version_are_no_faults(self):
        for words in (["--help"], ["-h"], ["--version"]) + tuple([command, "--help"] for command in COMMANDS):
            run = self.rillclock(*words)
            self.assertEqual((run.returncode, run.stderr), (0, ""), words)
            self.assertTrue(run.stdout)

    def test_a_version_names_the_libraries_too(self):
        self.assertRegex(self.done("--version"), r"^rillclock \d+\.\d+\.\d+, GDAL \d\S+, PROJ \d\S+ \(its database opens\)\n$")

    def test_a_version_says_where_the_database_of_proj_does_not_open(self):
        (self.folder / "empty").mkdir()
        said = self.done("--version", env=os.environ | {"PROJ_LIB": str(self.folder / "empty"), "PROJ_DATA": str(self.folder / "empty")})
        self.assertIn("its database does not open", said)

    def test_completion_offers_every_command_and_option(self):
        for shell in ("bash", "zsh", "fish"):
            script = self.done("completion", shell)
            for command in COMMANDS:
                self.assertIn(command, script)
            for option in options_in(help_of("run")):
                self.assertIn(option if shell != "fish" else f" -{'l' if option.startswith('--') else 's'} {option.lstrip('-')}", script)
            if shutil.which(shell):
                (self.folder / "script").write_text(script)
                subprocess.run([shell, "-n", self.folder / "script"], check=True)
        self.refused(2, "completion", "csh", says=("csh",))

    def test_completion_works_in_bash(self):
        (self.folder / "script").write_text(self.done("completion", "bash"))
        ask = "source ./script; COMP_WORDS=(rillclock {0}); COMP_CWORD={1}; _rillclock; echo ${{COMPREPLY[*]}}"
        for words, place, answer in (("ex", 1, "explain"), ("run --el", 2, "--elevation"), ("run --rain", 2, "--rain --rain-file")):
            said = subprocess.run(["bash", "-c", ask.format(words, place)], cwd=self.folder, capture_output=True, text=True, check=True)
            self.assertEqual(said.stdout.strip(), answer)

    def test_the_manual_holds_every_command_and_option(self):
        page = self.done("manual").replace("\\-", "-")
        for command in COMMANDS:
            self.assertIn(f".SS {command}\n", page)
            for option in options_in(help_of(command)):
                self.assertIn(option, page)
        for heading in ("NAME", "SYNOPSIS", "EXIT STATUS", "ENVIRONMENT"):
            self.assertIn(f".SH {heading}\n", page)

    def test_verbose_says_every_notice(self):
        demo_town(self.folder / "town")
        full = self.rillclock("run", "town/study.toml", "-v").stderr.count("notice: ")
        self.assertEqual(full, len(self.result("town/result")["notices"]))

    def test_without_that_each_kind_is_said_once_with_how_many_more_points(self):
        demo_town(self.folder / "town")
        said = [line for line in self.rillclock("run", "town/study.toml").stderr.splitlines() if line.startswith("notice: ")]
        by_kind = {}
        for notice in self.result("town/result")["notices"]:
            by_kind.setdefault(notice["notice"] if notice["point"] else notice["text"], []).append(notice)
        self.assertGreater(max(map(len, by_kind.values())), 5)   # which alone would nearly fill the screen
        self.assertEqual(len(said), min(8, len(by_kind)))
        for line, notices in zip(said, by_kind.values()):
            self.assertTrue(line.startswith("notice: " + notices[0]["text"]), line)
            self.assertEqual(f"Likewise at {len(notices) - 1} more" in line, len(notices) > 1, line)

    def test_nothing_is_in_colour(self):
        demo_town(self.folder / "town")
        for name in ({}, {"NO_COLOR": "1"}):
            run = self.rillclock("run", "town/study.toml", "--replace", env=os.environ | name)
            self.assertNotIn("\x1b", run.stdout + run.stderr)

    def test_words_that_are_wrong_are_told_with_the_right_ones(self):
        for words, parts in (([], ("no command was given", "rillclock demo")),
                             (["rum", "x.toml"], ("'rum'", "did you mean run?")),
                             (["run", "x.toml", "--rane", "90 mm"], ("--rane", "did you mean --rain?")),
                             (["run", "x.toml", "y.toml"], ("y.toml",)),
                             (["run", "x.toml", "--out"], ("--out",)),
                             (["demo"], ("FOLDER",)),
                             (["run"], ("no study was named", "--elevation")),
                             (["methods", "all"], ("all",))):
            self.refused(2, *words, says=parts)

    def test_check_lists_every_method_and_key_without_a_study(self):
        self.assertIn("sheet-nrcs", self.done("methods"))
        self.assertIn("two_year_24_hour", self.done("check", "--keys"))


class Readme(unittest.TestCase):
    def test_every_option_of_every_command_stands_in_its_table(self):
        described = section("Every command and option")
        offered = options_in(help_of())
        for command in COMMANDS:
            offered |= options_in(help_of(command))
        self.assertEqual(offered, options_in(described))

    def test_no_command_is_left_out(self):
        listed = re.findall(r"(?m)^  (\w+)  ", help_of().split("Subcommands:")[1])
        self.assertEqual(sorted(listed), sorted(COMMANDS))
        for command in COMMANDS:
            self.assertRegex(section("Every command and option"), rf"(?m)^### rillclock {command}\b")

    def test_options_named_anywhere_in_it_exist(self):
        offered = options_in(help_of()) | set.union(*(options_in(help_of(command)) for command in COMMANDS))
        for line in README.splitlines():
            if "rillclock" in line and "gdal" not in line:
                self.assertLessEqual(options_in(line), offered, line)

    def test_every_key_of_a_study_stands_in_its_table_with_its_default(self):
        text = subprocess.run([COMMAND, "check", "--keys"], capture_output=True, text=True, check=True).stdout
        known, name_of_section = {}, ""
        for comment, key, header in re.findall(r"(?m)^# (.*)\n([\w.]+) = |^\[(\w+)\]$", text):
            name_of_section = header or name_of_section
            if key:
                known[f"{name_of_section}.{key}".lstrip(".")] = re.search(r"\(default: (.*)\)$", comment).group(1)
        listed = dict(re.findall(r"(?m)^\| `([\w.]+)` \|.*\| ([^|]*) \|$", section("The study file")))
        self.assertEqual(listed, known)

    def test_every_table_of_roughness_is_named(self):
        text = subprocess.run([COMMAND, "methods"], capture_output=True, text=True, check=True).stdout
        tables = re.findall(r"(?m)^Manning's n of ([a-z ]+)", text)
        self.assertEqual(len(tables), 5)
        for name in tables:
            self.assertIn(name.split(" and ")[0].split(" less ")[0], README)
        self.assertIn("    0.016  asphalt pavement, rough\n", text)
        self.assertIn("    0.04  mountain: gravels, cobbles, few boulders (0.03 to 0.05)\n", text)

    def test_every_table_of_runoff_coefficients_is_named_and_every_land_use_of_the_readme_is_printed(self):
        text = subprocess.run([COMMAND, "methods"], capture_output=True, text=True, check=True).stdout
        tables = re.findall(r"(?m)^Runoff coefficients of ([^,\n]+)", text)
        self.assertEqual(len(tables), 6)
        for name in tables:
            self.assertIn(name, section("Peak flows"))
        self.assertIn("    asce roofs: 0.85 (0.75 to 0.95)\n", text)
        self.assertIn("    schwab pasture on tight clay: 0.4, 0.55, 0.6\n", text)
        self.assertIn("    cultivated, pasture, meadow,", text)
        for name in re.findall(r'`((?:asce|schwab|herpicc|everett|new york) [^`]+)`', README):
            self.assertRegex(text, rf"(?m)^    {name}: ")

    def test_every_method_is_named_with_its_formula_and_source(self):
        text = subprocess.run([COMMAND, "methods"], capture_output=True, text=True, check=True).stdout
        listed = re.findall(r"(?m)^\| `([a-z-]+)` \| (.*) \| `(.*)` \| (.*) \|$", section("Formulas and where they come from"))
        printed = re.findall(r"(?m)^([a-z-]+): (.*)\n    formula  (.*)\n(?:    (?:input|range) .*\n)+    source   (.*)$", text)
        self.assertGreaterEqual(len(printed), 9)
        self.assertEqual(listed, printed)

    def test_every_file_of_a_result_is_explained(self):
        explained = section("What you get")
        for name in ("result.json", "governing_paths.geojson", "longest_paths.geojson", "tables/outlets.csv", "tables/segments.csv",
                     "tables/review.csv", "tables/depressions.csv", "depressions.geojson", "own_paths.geojson", "tables/methods.csv", "tables/storms.csv", "tables/iterations.csv",
                     "tables/subareas.csv", "tables/handover.csv", "tables/peaks.csv", "tables/time_area.csv", "tables/pipes.csv", "rasters/travel_time.tif", "rasters/flow_azimuth.tif", "rasters/contributing_area.tif",
                     "rasters/catchment.tif", "rasters/regime.tif", "rasters/spill_elevation.tif"):
            self.assertIn(f"`{name}`", explained)

    def test_the_cautions_stand_there_word_for_word(self):
        source = (SOURCE / "include/rillclock/deliver/cautions.hpp").read_text(encoding="utf-8")
        cautions = re.findall(r'^    "(.*)",$', source, re.MULTILINE)
        self.assertEqual(len(cautions), 5)
        for caution in cautions:
            self.assertIn(caution, " ".join(section("Cautions").split()))

    def test_exit_statuses_are_listed(self):
        listed = section("Exit status")
        for status in ("0", "1", "2", "3", "130", "143"):
            self.assertRegex(listed, rf"(?m)^\| {status} \|")


class Developers(unittest.TestCase):
    TEXT = (SOURCE / "DEVELOPERS.md").read_text(encoding="utf-8")

    def test_every_file_it_names_is_there(self):
        named = re.findall(r"`((?:src|include|tests|scripts)/[\w./-]+)`", self.TEXT)
        self.assertGreater(len(named), 30)
        for name in named:
            self.assertTrue((SOURCE / name).exists(), name)

    def test_its_table_of_rooms_is_the_one_that_is_checked(self):
        sys.path.insert(0, str(SOURCE / "tests/layering"))
        import check_layering
        table = self.TEXT.split("## Rooms")[1].split("\n## ")[0]
        rooms = {room: sorted(set(may.split()) - {"nothing"})
                 for room, may in re.findall(r"(?m)^\| (\w+) \| .* \| ([a-z ]+) \|$", table) if room != "room"}
        self.assertEqual(rooms, {room: sorted(others) for room, others in check_layering.ROOMS.items()})


if __name__ == "__main__":
    unittest.main()
