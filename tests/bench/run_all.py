"""Runs all benchmarks, one after the other, and prints one table. Called by scripts/run-benchmarks.

    run_all.py BUILD-FOLDER DATA-FOLDER small|64|256
"""
import importlib.metadata
import os
import pathlib
import platform
import re
import resource
import shutil
import subprocess
import sys
import tempfile
import time

KINDS = ("fractal", "quantised", "integers")


class Size:
    """Sides of the rasters of a run, `points` of that with many points; `repeats` for what takes a fraction of a second."""

    def __init__(self, main, base, repeats, points=3200):
        self.main, self.base, self.repeats, self.points = main, base, repeats, points
        self.flood = min(main, 8192)    # the heap flood is compared at 64 million cells at most


CLAUSES = {
    1: "the whole command against the I/O floor, and the floor against GDAL's own programs",
    2: "directions against a textbook heap flood and against scikit-image's reconstruction",
    3: "sweeps against plain walks over the whole raster; travel-time passes against directions",
    4: "growth with size; gain by the second thread against that of pure arithmetic",
    5: "peak memory",
    6: "the same spill elevation as scikit-image's, in every cell",
    7: "many points against one: what computes, and the whole command",
}

SIZES = {"small": Size(2048, 1024, 3, 1024), "64": Size(8192, 4096, 2), "256": Size(16384, 4096, 1)}


def cells_text(side):
    return f"{side * side / 1e6:.1f} million cells"


# ---------------------------------------------------------------- programs

class Failed(Exception):
    pass


def memory_limit():
    """Most of what is free, so that a program that wants too much fails by itself and takes nothing else with it."""
    with open("/proc/meminfo") as lines:
        available = next(int(line.split()[1]) for line in lines if line.startswith("MemAvailable"))
    return int(available * 1024 * 0.95)


def run(*words):
    """Runs a program to its end; returns its output, its last messages, its seconds and its peak memory in bytes."""
    limit = memory_limit()
    begun = time.perf_counter()
    with tempfile.TemporaryFile("w+") as output, tempfile.TemporaryFile("w+") as messages:
        process = subprocess.Popen([str(word) for word in words], stdout=output, stderr=messages,
                                   preexec_fn=lambda: resource.setrlimit(resource.RLIMIT_AS, (limit, limit)))
        _, status, usage = os.wait4(process.pid, 0)
        process.returncode = os.waitstatus_to_exitcode(status)
        seconds = time.perf_counter() - begun
        output.seek(0)
        messages.seek(0)
        said = messages.read()
        if process.returncode != 0:
            reason = said.strip().splitlines()[-1:] or [f"exit status {process.returncode}"]
            raise Failed(f"{pathlib.Path(words[0]).name}: {reason[0]}")
        return output.read(), said, seconds, usage.ru_maxrss * 1024


def numbers(*words):
    """What a program of the bench says, as numbers by name."""
    lines = (line.split("\t") for line in run(*words)[0].splitlines())
    return {name: float(value) for name, value in lines}


# ---------------------------------------------------------------- the table

class Table:
    """Facts, and what is judged against a target; targets have the numbers that CLAUSES explains."""

    def __init__(self):
        self.rows = []
        self.failures = []

    def fact(self, what, value):
        self.rows.append((f"    {what}: {value}",))

    def at_least(self, clause, what, value, target):
        self.judge(clause, what, value, f"at least {target:g}", value >= target)

    def at_most(self, clause, what, value, target):
        self.judge(clause, what, value, f"at most {target:g}", value <= target)

    def judge(self, clause, what, value, target, is_reached):
        self.rows.append((f"{clause}.", what, f"{value:.3g}", target, "reached" if is_reached else "MISSED"))

    def heading(self, text):
        self.rows.append((f"\n{text}",))

    def measuring(self, what, work):
        """Calls `work`; a program that fails becomes a row, and the rest goes on."""
        print(f"  {what}", flush=True)
        try:
            return work()
        except Failed as failure:
            self.failures.append(str(failure))
            self.fact(what, "could not be measured")
            return None

    def show(self):
        judged = [row for row in self.rows if len(row) > 1]
        widths = [max(len(row[i]) for row in judged) for i in range(5)] if judged else []
        for row in self.rows:
            print(row[0] if len(row) == 1 else " " + "  ".join(text.ljust(width) for text, width in zip(row, widths)).rstrip())
        reached = sum(row[4] == "reached" for row in judged)
        print(f"\n{reached} of {len(judged)} judged lines reached their target.")
        for clause, meaning in CLAUSES.items():
            print(f"  {clause}. {meaning}")
        for failure in self.failures:
            print(f"Not measured: {failure}")


def first_line(*words):
    try:
        return subprocess.run(words, capture_output=True, text=True, check=True).stdout.splitlines()[0]
    except (OSError, subprocess.CalledProcessError, IndexError):
        return "unknown"


def processor_name():
    with open("/proc/cpuinfo") as lines:
        return next((line.split(":")[1].strip() for line in lines if line.startswith("model name")), platform.machine())


def describe_machine(table, build):
    memory = os.sysconf("SC_PAGE_SIZE") * os.sysconf("SC_PHYS_PAGES") / 2**30
    table.heading("Machine and versions")
    table.fact("processor", f"{processor_name()}, {len(os.sched_getaffinity(0))} threads, {memory:.0f} GiB")
    table.fact("system", f"{platform.system()} {platform.release()}; load when the run began {os.getloadavg()[0]:.1f}")
    table.fact("compiler", first_line("c++", "--version"))
    table.fact("GDAL, scikit-image", f"{first_line('gdalinfo', '--version').split(',')[0]}, {importlib.metadata.version('scikit-image')}")
    table.fact("project", f"{first_line(build / 'rillclock', '--version')}, commit {first_line('git', 'describe', '--always', '--dirty')}")


# ---------------------------------------------------------------- in memory

class Memory:
    """Benchmarks that need no files."""

    def __init__(self, programs, size, table):
        self.programs, self.size, self.table = programs, size, table

    def program(self, name, *words):
        return numbers(self.programs / name, *words)

    def measure(self):
        arithmetic = self.table.measuring("pure arithmetic", lambda: self.program("pure_arithmetic", 4))
        self.table.heading("Directions")
        base = {kind: self.directions(kind, self.size.base) for kind in KINDS}
        main = {kind: self.directions(kind, self.size.main) for kind in KINDS}
        for kind in KINDS:
            if base[kind] and main[kind]:
                self.growth(kind, base[kind], main[kind])
            if main[kind] and arithmetic:
                gain = main[kind]["seconds_1"] / main[kind]["seconds_2"]
                self.table.at_least(4, f"{kind}: gain by the second thread {gain:.2f} / arithmetic {arithmetic['gain']:.2f}",
                                    gain / arithmetic["gain"], 0.85)
        self.against_flood(main["fractal"])
        self.sweeps()
        return base["fractal"]

    def directions(self, kind, side):
        found = self.table.measuring(f"directions, {kind}, {cells_text(side)}",
                                     lambda: self.program("directions_bench", kind, side, self.size.repeats))
        if found:
            self.table.fact(f"{kind}, {cells_text(side)}, {found['share_pits']:.2%} pits, {found['share_flat']:.0%} flat",
                            f"{found['seconds_1']:.3g} s on 1 thread, {found['seconds_2']:.3g} s on 2")
        return found

    def growth(self, kind, base, main):
        factor = (main["seconds_2"] / self.size.main**2) / (base["seconds_2"] / self.size.base**2)
        self.table.at_most(4, f"{kind}: time per cell at {cells_text(self.size.main)} / at {cells_text(self.size.base)}", factor, 1.15)

    def against_flood(self, main):
        side = self.size.flood
        flood = self.table.measuring(f"heap flood, {cells_text(side)}",
                                     lambda: self.program("heap_flood_bench", "fractal", side, self.size.repeats))
        directions = main if side == self.size.main else self.directions("fractal", side)
        if not flood or not directions:
            return
        self.table.at_least(2, f"heap flood, fractal, {cells_text(side)}: million cells/s", side * side / flood["seconds"] / 1e6, 5)
        self.table.at_least(2, f"heap flood {flood['seconds']:.3g} s / directions", flood["seconds"] / directions["seconds_2"], 10)

    def sweeps(self):
        side = self.size.flood
        found = self.table.measuring(f"sweeps, fractal, {cells_text(side)}",
                                     lambda: self.program("sweeps_bench", "fractal", side, self.size.repeats))
        if not found:
            return
        self.table.heading("Sweeps")
        self.table.fact("cutting the forest into tiles, once for all sweeps", f"{found['forest_seconds']:.3g} s")
        for way in ("down", "up"):
            plain, swept = found[f"plain_{way}_seconds"], found[f"sweep_{way}_seconds"]
            self.table.at_least(3, f"plain walk {way} {plain:.3g} s / sweep {way} alone {swept:.3g} s", plain / swept, 1.5)
        plain, swept = 2 * (found["plain_down_seconds"] + found["plain_up_seconds"]), found["sweep_four_seconds"]
        self.table.at_least(3, f"four plain walks {plain:.3g} s / four channels in one pass {swept:.3g} s", plain / swept, 1.5)


# ---------------------------------------------------------------- with files

class Files:
    """Whole runs of the command, and what they are compared with."""

    def __init__(self, build, data, size, table, base_directions):
        self.build, self.data, self.size, self.table = build, data, size, table
        self.programs = build / "tests" / "bench"
        self.scripts = pathlib.Path(__file__).parent
        self.base_directions = base_directions

    def measure(self):
        for kind in KINDS:
            self.table.heading(f"Whole command, {kind}")
            base = self.case(kind, self.size.base, self.compare_with_reconstruction)
            main = self.case(kind, self.size.main, self.compare_with_floor)
            if base and main:
                factor = (main / self.size.main**2) / (base / self.size.base**2)
                self.table.at_most(4, f"time per cell at {cells_text(self.size.main)} / at {cells_text(self.size.base)}", factor, 1.15)

    def case(self, kind, side, compare):
        """Makes the data, runs the command on it, compares, and removes all; returns the command's seconds."""
        folder = self.data / f"{kind}-{side}"
        try:
            made = self.table.measuring(f"making {kind}, {cells_text(side)}",
                                        lambda: run(self.programs / "generate_terrain", kind, side, side, folder))
            command = made and self.table.measuring(f"command, {kind}, {cells_text(side)}", lambda: self.command(folder))
            if command:
                self.say(side, command)
                compare(kind, folder, command)
            return command and command["seconds"]
        finally:
            shutil.rmtree(folder, ignore_errors=True)

    def command(self, folder):
        words = ["run", "--elevation", folder / "dem.tif", "--cover", folder / "cover.tif", "--book", "nlcd",
                 "--rain", "3.6 in", "--out", folder / "result"]
        _, said, seconds, memory = run(self.build / "rillclock", *words)
        stages = {name.strip(): float(time) for name, time in re.findall(r"^(\S.*?) +([\d.]+) s ", said, re.MULTILINE)}
        return {"seconds": seconds, "memory": memory, "stages": stages}

    def say(self, side, command):
        cells = side * side
        self.table.fact(f"{cells_text(side)}: {command['memory'] / cells:.0f} bytes a cell",
                        f"{command['seconds']:.3g} s: " + ", ".join(f"{name} {time:.3g}" for name, time in command["stages"].items()))
        directions = command["stages"].get("flow directions")
        times = sum(time for name, time in command["stages"].items() if "travel" in name)
        if side == self.size.main:
            if directions and times:
                self.table.at_most(3, "travel-time passes / directions, within the command", times / directions, 2)
            if cells >= 2 ** 28:   # the libraries' own memory weighs more the fewer cells there are
                self.table.at_most(5, f"bytes a cell at {cells_text(side)}", command["memory"] / cells, 16)

    def compare_with_reconstruction(self, kind, folder, command):
        found = self.table.measuring(f"reconstruction, {kind}", lambda: numbers(
            sys.executable, self.scripts / "reconstruction.py", folder / "dem.tif", folder / "result" / "rasters" / "spill_elevation.tif"))
        if not found:
            return
        self.table.at_most(6, "cells where spill elevation differs from reconstruction", found["different_cells"], 0)
        if kind == "fractal" and self.base_directions:
            ratio = found["seconds"] / self.base_directions["seconds_2"]
            self.table.at_least(2, f"reconstruction {found['seconds']:.3g} s / directions, {cells_text(self.size.base)}", ratio, 20)

    def compare_with_floor(self, kind, folder, command):
        inputs = folder / "dem.tif", folder / "cover.tif", folder / "result" / "rasters"
        floor = self.table.measuring(f"I/O floor, {kind}", lambda: numbers(self.programs / "io_floor", *inputs, folder / "floor"))
        shutil.rmtree(folder / "floor", ignore_errors=True)
        if not floor:
            return
        seconds = floor["read_seconds"] + floor["write_seconds"]
        self.table.fact("I/O floor", f"{seconds:.3g} s: reading {floor['read_seconds']:.3g}, writing {floor['write_seconds']:.3g}"
                                     f" (and {floor['disk_seconds']:.3g} until all is on the disk, not counted)")
        self.table.at_most(1, "command / I/O floor", command["seconds"] / seconds, 2)
        yardstick = self.table.measuring(f"gdal_translate, {kind}", lambda: numbers(
            sys.executable, self.scripts / "gdal_yardstick.py", *inputs, folder / "yardstick"))
        if yardstick:
            self.against_gdal(floor, yardstick)

    def against_gdal(self, floor, yardstick):
        bare = yardstick["read_seconds"] + yardstick["translate_seconds"]
        whole = bare + yardstick["statistics_seconds"] + yardstick["overviews_seconds"]
        own = floor["read_seconds"] + floor["write_seconds"]
        self.table.at_most(1, f"I/O floor without overviews / gdal_translate {bare:.3g} s", (own - floor["overviews_seconds"]) / bare, 1.2)
        self.table.at_most(1, f"I/O floor / gdal_translate, statistics and gdaladdo {whole:.3g} s", own / whole, 1.2)


class ManyPoints:
    """The command with 1, 100 and 2000 points on one terrain of ten million cells."""

    COUNTS = (1, 100, 2000)
    WRITING = ("writing files", "keeping files")

    def __init__(self, build, data, size, table):
        self.build, self.size, self.table = build, size, table
        self.folder = data / f"points-{size.points}"

    def measure(self):
        side = self.size.points
        self.table.heading(f"Many points, fractal, {cells_text(side)}")
        try:
            made = self.table.measuring("making terrain and points", self.make)
            found = made and {count: self.table.measuring(f"command, {count} points", lambda: self.best(count)) for count in self.COUNTS}
            if found and all(found.values()):
                self.compare(found)
        finally:
            shutil.rmtree(self.folder, ignore_errors=True)

    def make(self):
        side = self.size.points
        run(self.build / "tests" / "bench" / "generate_terrain", "fractal", side, side, self.folder)
        run(self.build / "rillclock", "run", "--quiet", *self.inputs(), "--out", self.folder / "areas")
        counts = [str(count) for count in self.COUNTS]
        return run(sys.executable, pathlib.Path(__file__).parent / "scatter_points.py", self.folder / "areas", self.folder, *counts)

    def inputs(self):
        return ["--elevation", self.folder / "dem.tif", "--cover", self.folder / "cover.tif", "--book", "nlcd", "--rain", "3.6 in"]

    def best(self, count):
        """Of some runs the one in which least else went on: seconds that computed, of the whole, of processors, and bytes."""
        return min((self.command(count) for _ in range(3)), key=lambda seconds: seconds["whole"])

    def command(self, count):
        before = os.times()
        _, said, seconds, memory = run(self.build / "rillclock", "run", *self.inputs(), "--points", self.folder / f"{count}.geojson",
                                       "--out", self.folder / "result", "--replace")
        after = os.times()
        stages = {name.strip(): float(time) for name, time in re.findall(r"^(\S.*?) +([\d.]+) s ", said, re.MULTILINE)}
        writing = sum(stages.pop(stage) for stage in self.WRITING)
        return {"computing": sum(stages.values()), "whole": seconds, "writing": writing, "memory": memory,
                "processor": after.children_user + after.children_system - before.children_user - before.children_system}

    def compare(self, found):
        for count, seconds in found.items():
            self.table.fact(f"{count} points", f"{seconds['whole']:.3g} s, of which computing {seconds['computing']:.3g} and writing files "
                                               f"{seconds['writing']:.3g}; {seconds['processor']:.3g} s of processor; "
                                               f"{seconds['memory'] / 2**20:.0f} MiB")
        one = found[1]
        for count in self.COUNTS[1:]:
            self.table.at_most(7, f"computing of {count} points / of one", found[count]["computing"] / one["computing"], 1.3)
            self.table.at_most(7, f"whole command with {count} points / with one", found[count]["whole"] / one["whole"], 2)


def main():
    build, data, size = pathlib.Path(sys.argv[1]), pathlib.Path(sys.argv[2]), SIZES[sys.argv[3]]
    table = Table()
    describe_machine(table, build)
    print("Measuring:")
    base_directions = Memory(build / "tests" / "bench", size, table).measure()
    Files(build, data, size, table, base_directions).measure()
    ManyPoints(build, data, size, table).measure()
    table.show()
    return 1 if table.failures else 0


sys.exit(main())
