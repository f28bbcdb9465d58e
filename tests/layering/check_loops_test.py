#!/usr/bin/python3
"""Checks the check of loops: what it looks for is found, with file and line, and nothing else is."""
import pathlib
import shutil
import subprocess
import sys
import tempfile
import unittest

CHECK = pathlib.Path(__file__).with_name("check_loops.py")

SOUND = """#include <cstdint>
std::int64_t cells(std::int64_t rows, std::int64_t columns) { return rows * columns; }
"""
RECURSIVE = """#include <cstdint>
struct Walk {
    std::int64_t up(std::int64_t cell) { return cell == 0 ? 0 : 1 + up(cell - 1); }
};
"""
NARROW = """#include <cstdint>
std::int64_t cells(int rows, int columns) { return rows * columns; }
"""


class CheckLoops(unittest.TestCase):
    def check(self, source, **options):
        with tempfile.TemporaryDirectory() as folder:
            path = pathlib.Path(folder) / "source.cpp"
            path.write_text(source, encoding="utf-8")
            done = subprocess.run([sys.executable, "-B", CHECK, folder, path], capture_output=True, text=True, check=False, **options)
            return done.returncode, done.stdout

    def setUp(self):
        if shutil.which("clang-tidy") is None:
            self.skipTest("clang-tidy is missing")

    def test_sound_code_passes(self):
        self.assertEqual(self.check(SOUND), (0, "\n"))

    def test_a_function_that_calls_itself_is_found(self):
        status, said = self.check(RECURSIVE)
        self.assertEqual(status, 1)
        self.assertIn("source.cpp:3:18: warning: function 'up' is within a recursive call chain", said)

    def test_a_product_of_32_bits_that_becomes_one_of_64_is_found(self):
        status, said = self.check(NARROW)
        self.assertEqual(status, 1)
        self.assertIn("source.cpp:2:52: warning: performing an implicit widening conversion", said)

    def test_what_cannot_be_read_is_no_pass(self):
        status, said = self.check("#include <no_such_header>\n")
        self.assertEqual(status, 1)
        self.assertIn("no_such_header", said)

    def test_without_clang_tidy_it_says_that_nothing_was_tried(self):
        status, said = self.check(SOUND, env={"PATH": ""})
        self.assertEqual(status, 77)
        self.assertIn("clang-tidy is missing", said)


if __name__ == "__main__":
    unittest.main()
