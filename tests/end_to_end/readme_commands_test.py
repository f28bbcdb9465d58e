#!/usr/bin/python3
"""Runs every command and reads every file that README shows, in a folder that holds what the text speaks of."""
import os
import re
import shlex
import shutil
import stat
import subprocess
import tomllib
import unittest

import numpy as np
from osgeo import gdal

from support import COMMAND, CommandTest, SOURCE

README = (SOURCE / "README.md").read_text(encoding="utf-8")
# Scripts build, and run these very tests: what they would run is put in place of it and looked at instead.
STAND_IN = """#!/bin/sh
echo "$(basename "$0") $*" >> "$CALLS"
"""


def blocks(language):
    return re.findall(rf"(?ms)^```{language}\n(.*?)^```", README)


def commands():
    lines = "".join(blocks("sh")).replace("\\\n", " ").splitlines()
    return [line.split(" #")[0].strip() for line in lines if line.strip() and not line.startswith("#")]


class Commands(CommandTest):
    def setUp(self):
        super().setUp()
        programs = self.folder / "bin"
        programs.mkdir()
        (programs / "rillclock").symlink_to(COMMAND)
        self.environment = os.environ | {"PATH": f"{programs}:/usr/bin:/bin:/usr/sbin:/sbin", "RILLCLOCK_COMMAND": COMMAND}

    def stand_in(self, *names):
        """Programs that only write down how they were called."""
        for name in names:
            program = self.folder / "bin" / name
            program.write_text(STAND_IN)
            program.chmod(program.stat().st_mode | stat.S_IXUSR)
        self.environment |= {"CALLS": str(self.folder / "calls")}

    def calls(self):
        return (self.folder / "calls").read_text().splitlines()

    def put_in_place_what_the_text_speaks_of(self):
        for name in ("points.geojson", "cover-book.csv"):
            shutil.copy(SOURCE / "data-demo" / name, self.folder)
        shutil.copy(SOURCE / "data-demo/dem.tif", self.folder)
        self.as_nlcd("cover.tif")
        for number, text in enumerate(blocks("toml")):
            (self.folder / f"study{number or ''}.toml").write_text(text, encoding="utf-8")
        for text in blocks("csv"):
            (self.folder / "town-cover.csv").write_text(text, encoding="utf-8")

    def as_nlcd(self, name):
        """The demo's land cover with codes of the NLCD legend."""
        file = gdal.GetDriverByName("GTiff").CreateCopy(str(self.folder / name), gdal.Open(str(SOURCE / "data-demo/cover.tif")))
        codes = np.arange(256, dtype=np.uint8)
        codes[1:9] = 24, 23, 21, 71, 82, 41, 11, 31
        file.GetRasterBand(1).WriteArray(codes[file.GetRasterBand(1).ReadAsArray()])
        file.FlushCache()

    def shell(self, line, cwd=None):
        return subprocess.run(["bash", "-c", line], cwd=cwd or self.folder, env=self.environment, capture_output=True, text=True,
                              check=False, timeout=200)

    def test_every_command_of_the_command_line_runs_as_shown(self):
        self.put_in_place_what_the_text_speaks_of()
        shown = [line for line in commands() if not line.startswith("scripts/")]
        self.assertGreaterEqual(len(shown), 8)
        for line in shown:
            run = self.shell(line)
            self.assertEqual(run.returncode, 0, line + "\n" + run.stdout + run.stderr)

    def test_the_scripts_it_names_are_there_and_are_the_only_ones(self):
        shown = {shlex.split(line)[0] for line in commands() if line.startswith("scripts/")}
        self.assertEqual(shown, {"scripts/run-demo", "scripts/run-tests", "scripts/build"})
        for script in shown:
            self.assertTrue(os.access(SOURCE / script, os.X_OK), script)

    def test_the_demo_runs_from_any_folder_again_and_again(self):
        for _ in range(2):
            run = self.shell(str(SOURCE / "scripts/run-demo"))
            self.assertEqual(run.returncode, 0, run.stdout + run.stderr)
            for part in ("  * 'Weir' drains", "tables/outlets.csv", "licensed engineer"):
                self.assertIn(part, run.stdout)
        self.assertEqual(sorted(p.name for p in self.folder.iterdir()), ["bin"])

    def test_build_configures_and_builds_the_kind_it_is_told(self):
        self.stand_in("cmake")
        for line in (line for line in commands() if line.startswith("scripts/build")):
            self.assertEqual(self.shell(f"{SOURCE}/{line}").returncode, 0)
            kind = line.split()[1]
            self.assertIn(f"cmake --build build/{kind}", self.calls())
            self.assertTrue(any(call.startswith(f"cmake -S . -B build/{kind} -G Ninja") for call in self.calls()))
        self.assertEqual(self.shell(f"{SOURCE}/scripts/build other").returncode, 2)

    def test_run_tests_builds_and_ends_with_ctest(self):
        self.stand_in("cmake", "ctest")
        run = self.shell(f"{SOURCE}/scripts/run-tests --tests-regex terrain")
        self.assertEqual(run.returncode, 0, run.stdout + run.stderr)
        self.assertIn("cmake --build build/dev", self.calls())
        self.assertRegex(self.calls()[-1], r"^ctest --test-dir build/dev .*--tests-regex terrain$")

    def test_the_first_answer_in_the_text_is_the_one_given(self):
        run = self.shell(str(SOURCE / "scripts/run-demo"))
        shown = next(text for text in blocks("text") if "Weir" in text)
        for line in shown.splitlines():
            if line.strip() and line.strip() != "...":
                self.assertIn(line.strip(), run.stdout)


class Files(CommandTest):
    def test_study_files_shown_are_toml(self):
        self.assertGreaterEqual(len(blocks("toml")), 1)
        for text in blocks("toml"):
            self.assertIn("terrain", tomllib.loads(text))


if __name__ == "__main__":
    unittest.main()
