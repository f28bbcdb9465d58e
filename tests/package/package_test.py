#!/usr/bin/python3
"""What is built can be installed, used from another project, and packed for Debian."""
import os
import pathlib
import shutil
import subprocess
import tempfile
import unittest

BUILD = pathlib.Path(os.environ["RILLCLOCK_BUILD"])
SOURCE = pathlib.Path(os.environ["RILLCLOCK_SOURCE"])
LAUNCHER = os.environ.get("RILLCLOCK_COMPILER_LAUNCHER", "")


def do(*words, **options):
    run = subprocess.run([str(word) for word in words], capture_output=True, text=True, check=False, **options)
    if run.returncode != 0:
        raise AssertionError(f"{words}\n{run.stdout}\n{run.stderr}")
    return run.stdout


class Package(unittest.TestCase):
    def setUp(self):
        self.folder = pathlib.Path(tempfile.mkdtemp(prefix="rillclock-package-"))
        self.addCleanup(shutil.rmtree, self.folder, ignore_errors=True)

    def check_command(self, root, zsh="site-functions"):
        command = root / "bin/rillclock"
        do(command, "demo", self.folder / "town")
        self.assertIn("Weir", do(command, "run", self.folder / "town/study.toml"))
        self.assertIn("'Weir' drains 93.91 ha", (self.folder / "town/result/report.html").read_text(encoding="utf-8").replace("&#39;", "'"))
        self.assertIn(".SH EXIT STATUS", (root / "share/man/man1/rillclock.1").read_text())
        for file in ("bash-completion/completions/rillclock", f"zsh/{zsh}/_rillclock", "fish/vendor_completions.d/rillclock.fish"):
            self.assertIn("explain", (root / "share" / file).read_text())

    def check_examples(self, built):
        """The ladder of examples, each with what it must print."""
        study = self.folder / "town/study.toml"
        for example, words, says in (
                ("1_one_raster", (), r"the slowest water takes (\d+\.?\d*) min, from row 0, column 0\n"),
                ("2_formulas_by_hand", (), r"sheet 0\.30 h, shallow 0\.24 h, channel 0\.99 h, together 1\.53 h\n"),
                # The trace of design values: 14.184, 13.239, 13.071, 13.041, 13.034 min.
                ("3_storm_for_a_time", (), r"(?s)computed 14\.184.*computed 13\.239.*computed 13\.071.*computed 13\.041.*5\.10 in/h, computed 13\.034.*settled"),
                ("4_study_and_its_result", (study,), r"(?s)'Weir' drains 232 ac.*Weir: 77\.\d+ min.*600 rows of 500 cells"),
                # 50 steps of 2 m at 0.1 m/s, then 299 of 2 m at 1 m/s.
                ("5_method_of_your_own", (), r"takes 1598 s\n")):
            self.assertRegex(do(built / example, *words), says)

    def test_installed_it_runs_and_another_project_finds_and_uses_it(self):
        root = self.folder / "root"
        do("cmake", "--install", BUILD, "--prefix", root)
        self.check_command(root)
        other = self.folder / "other"
        do("cmake", "-S", SOURCE / "scripts/examples", "-B", other, "-G", "Ninja", f"-DCMAKE_PREFIX_PATH={root}",
           f"-DCMAKE_CXX_COMPILER_LAUNCHER={LAUNCHER}")
        do("cmake", "--build", other)
        self.check_examples(other)
        for module in root.glob("lib/python*/dist-packages/rillclock*.so"):   # where the build has it
            said = do("/usr/bin/python3", "-c", "import rillclock; print(rillclock.__version__)", env=os.environ | {"PYTHONPATH": str(module.parent)})
            self.assertRegex(said, r"^\d+\.\d+\.\d+\n$")

    def test_the_debian_package_holds_the_command_and_says_what_it_needs(self):
        do("cpack", "--config", BUILD / "CPackConfig.cmake", "-B", self.folder / "packed", cwd=self.folder)
        package = next((self.folder / "packed").glob("rillclock_*.deb"))
        needs = do("dpkg-deb", "--field", package, "Depends")
        for name in ("libgdal", "libproj", "proj-data", "libc6"):
            self.assertIn(name, needs)
        root = self.folder / "clean"
        do("dpkg-deb", "--extract", package, root)
        self.check_command(root / "usr", zsh="vendor-completions")
        for module in (self.folder / "packed").glob("python3-rillclock_*.deb"):   # where the build has it
            needs = do("dpkg-deb", "--field", module, "Depends")
            for name in ("libgdal", "proj-data", "python3-numpy", "python3 (<< 3."):
                self.assertIn(name, needs)


if __name__ == "__main__":
    unittest.main()
