#!/usr/bin/python3
"""Checks with clang-tidy that nothing in the rooms that work on cells calls itself, and that no product of 32 bits becomes one of 64.

    check_loops.py ROOT [FILE ...]

A function that calls itself once a cell ends a run by the size of the terrain; a product of rows and columns in 32 bits is wrong beyond 2³¹ cells,
and the compiler's warnings do not see it. Without files those of the rooms, a room at a time. Prints what is found and exits with 1 if there
is any, with 77 where clang-tidy is missing.
"""
import json
import pathlib
import shutil
import subprocess
import sys
import tempfile

ROOMS = ("raster", "tiles", "forest", "terrain", "travel", "catchment")
CHECKS = "-*,misc-no-recursion,bugprone-implicit-widening-of-multiplication-result"
MISSING = 77


def findings(root, name, files, folder):
    """The warnings and errors of files that are read as one."""
    together = pathlib.Path(folder) / f"{name}.cpp"
    together.write_text("".join(f'#include "{path}"\n' for path in files), encoding="utf-8")
    config = json.dumps({"Checks": CHECKS, "HeaderFilterRegex": f"^({root}|{pathlib.Path(files[0]).parent})/"})
    done = subprocess.run(["clang-tidy", "--quiet", "--config=" + config, together, "--", f"-I{root}/include", "-std=c++20", "-w"],
                          capture_output=True, text=True, check=False)
    said = done.stdout.strip()
    return said if said or done.returncode == 0 else done.stderr.strip()


def main():
    if len(sys.argv) < 2:
        sys.exit("usage: check_loops.py ROOT [FILE ...]")
    if shutil.which("clang-tidy") is None:
        print("not tried: clang-tidy is missing; the Debian package clang-tidy has it")
        sys.exit(MISSING)
    root = pathlib.Path(sys.argv[1]).resolve()
    groups = {room: sorted((root / "src" / room).glob("*.cpp")) for room in ROOMS}
    if sys.argv[2:]:
        groups = {"given": [pathlib.Path(name).resolve() for name in sys.argv[2:]]}
    with tempfile.TemporaryDirectory() as folder:
        found = [said for name, files in groups.items() if (said := findings(root, name, files, folder))]
    print("\n".join(found))
    sys.exit(1 if found else 0)


if __name__ == "__main__":
    main()
