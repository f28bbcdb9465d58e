#!/usr/bin/python3
"""Checks who includes whom, what stands at the top of the repository, and that no file outgrows a reader.

    check_layering.py ROOT

Prints one sentence for each fault, with file and line, and exits with 1 if there is any.
"""
import pathlib
import re
import sys

LOWER = ["core", "raster", "tiles", "graph", "forest", "terrain"]
ABOVE = LOWER + ["hydraulics", "rainfall", "surface"]

# The rooms, and which others each may include besides itself.
ROOMS = {
    "core": [],
    "raster": ["core"],
    "tiles": ["core", "raster"],
    "graph": ["core"],
    "io": ["core", "raster"],
    "forest": ["core", "raster", "tiles", "graph"],
    "terrain": ["core", "raster", "tiles", "graph", "forest"],
    "hydraulics": ["core"],
    "rainfall": ["core"],
    "surface": ["core", "hydraulics"],
    "travel": ABOVE,
    "catchment": ABOVE + ["travel"],
    "study": ABOVE + ["travel", "catchment"],
    "deliver": ABOVE + ["travel", "catchment", "study", "io"],
    "run": ABOVE + ["travel", "catchment", "study", "io", "deliver"],
    "cli": ["core", "run"],
    "python": ["core", "raster", "study", "run"],
}

# What is neither ours nor the language's: how its headers begin, its name, the rooms that may include it.
THIRD_PARTIES = [
    (r"(gdal|ogr|cpl_|vrtdataset|rawdataset)", "GDAL", ["io"]),
    (r"(proj\.h|proj/|geodesic\.h)", "PROJ", ["io"]),
    (r"boost/math/", "Boost.Math", ["hydraulics"]),
    (r"boost/", "Boost", ["graph"]),
    (r"toml\+\+/", "toml++", ["study"]),
    (r"nlohmann/", "nlohmann-json", ["deliver", "cli"]),
    (r"(spdlog|fmt)/", "spdlog", ["cli"]),
    (r"CLI/", "CLI11", ["cli"]),
    (r"pybind11/", "pybind11", ["python"]),
    (r"openssl/", "OpenSSL", ["io"]),
    (r"(oneapi/)?tbb(/|\.h)", "oneTBB", ["tiles"]),
]
# Headers of the operating system end in .h; those of C++ have no ending. The raster room asks it for memory, no more.
SYSTEM_ROOMS = ["raster", "io", "tiles", "cli"]

TOP_LEVEL = {"CMakeLists.txt", "README.md", "DEVELOPERS.md", "src", "include", "tests", "data-demo", "scripts"}
NOT_KEPT = {"build"}
LONGEST_FILE = 450

INCLUDE = re.compile(r'^\s*#\s*include\s*([<"])([^>"]+)[>"]')
# What begins a line inside an unnamed namespace: a type, an alias, a function or a value.
HIDDEN = re.compile(r"(?:class|struct|enum class|enum|using|namespace) (?:\w+::)*(\w+)|[A-Za-z_][^(={;#]*?[\s&*>](\w+) ?[(={;\[]")
ALIAS = ("using ", "namespace ")
RAW_TEXT = re.compile(r'R"\w*\(')
TYPE = re.compile(r"(?:struct|class) (\w+)(?: final)?(?: :[^:].*)? *\{")  # a definition at the level of a namespace, not A::B


def room_of(path):
    """The room of a file of ours, from its path below the root; None where it is in no known room."""
    parts = path.parts
    place = 2 if parts[:2] == ("include", "rillclock") else 1
    return parts[place] if len(parts) > place + 1 and parts[place] in ROOMS else None


def sources(root):
    return sorted(p.relative_to(root) for top in ("include", "src") for p in (root / top).rglob("*") if p.is_file())


def third_party(header):
    """Name and rooms of a header that is not ours; (None, None) for the standard library's."""
    for beginning, name, rooms in THIRD_PARTIES:
        if re.match(beginning, header):
            return name, rooms
    if re.fullmatch(r"[a-z_]+", header):
        return None, None
    if header.endswith(".h"):
        return "the operating system", SYSTEM_ROOMS
    return "an unknown library", []


class Check:
    def __init__(self, root):
        self.root = root
        self.faults = []
        self.files = sources(root)
        self.includes = {}     # file → [(line, file of ours)]
        self.types = {}        # name of a type → (file, line) of its definition

    def fault(self, path, line, sentence):
        self.faults.append(f"{path}:{line}: {sentence}")

    def run(self):
        self.top_level()
        for path in self.files:
            self.one_file(path)
        self.cycles()
        for folder in [self.root / "src" / room for room in ROOMS] + sorted((self.root / "tests").glob("unit/*/")) + [self.root / "tests" / kind for kind in ("property", "published")]:
            self.hidden_names(folder)
        return self.faults

    def top_level(self):
        there = {p.name for p in self.root.iterdir() if not p.name.startswith(".")} - NOT_KEPT
        for name in sorted(there - TOP_LEVEL):
            self.fault(name, 1, "This does not belong at the top of the repository; move it into one of its folders.")
        for name in sorted(TOP_LEVEL - there):
            self.fault(name, 1, "This is missing at the top of the repository; add it.")

    def one_file(self, path):
        if path.suffix == ".in" or path.parent.name == "report" and path.suffix in (".css", ".js"):
            return  # filled in, or put into the program, by CMake
        if path.suffix not in (".hpp", ".cpp"):
            self.fault(path, 1, "A source file ends in .hpp or .cpp; rename it or move it elsewhere.")
            return
        lines = (self.root / path).read_text(encoding="utf-8").splitlines()
        if room_of(path) is None:
            self.fault(path, 1, "This file is in none of the rooms; move it into one.")
        if len(lines) > LONGEST_FILE:
            self.fault(path, LONGEST_FILE + 1, f"The file has {len(lines)} lines; split it, {LONGEST_FILE} is the most.")
        if path.suffix == ".hpp" and not any(line.strip() == "#pragma once" for line in lines):
            self.fault(path, 1, "The header has no `#pragma once`; add it.")
        self.includes[path] = []
        for number, line in enumerate(lines, 1):
            found = INCLUDE.match(line)
            if found:
                self.one_include(path, number, found[1] == '"', found[2])

        self.types_of(path, lines)

    def types_of(self, path, lines):
        """Types of one name in two files are one type to the linker: whichever it keeps, the other's users break."""
        hidden = False
        for number, line in enumerate(lines, 1):
            if line.startswith("namespace {"):
                hidden = True
            elif line == "}  // namespace":
                hidden = False
            found = TYPE.match(line)
            if hidden or not found:
                continue
            first = self.types.setdefault(found[1], (path, number))
            if first[0] != path:
                self.fault(path, number, f"{found[1]} is also the name of a type in {first[0]}; give one of them another name.")

    def hidden_names(self, folder):
        """Sources of a folder may be compiled together (scripts/cmake/precompiled.cmake): what is hidden in one of them then meets that of the others
        and every header that one of them reads."""
        seen = {}
        for path in sorted(folder.glob("*.cpp")):
            for name, number, text in hidden_names(path.read_text(encoding="utf-8").splitlines()):
                first_path, first_text = seen.setdefault(name, (path, text))
                if first_path != path and not (text == first_text and text.startswith(ALIAS)):
                    self.fault(path.relative_to(self.root), number,
                               f"{name} is also a name hidden in {first_path.name} beside it; give one of them another name, or share it in a header.")
                header = self.types.get(name, (None,))[0]
                if header is not None and header.parts[0] == "include" and not text.startswith(ALIAS):
                    self.fault(path.relative_to(self.root), number, f"{name} is also the name of a type in {header}; give what is hidden here another.")

    def one_include(self, path, line, quoted, header):
        if header.startswith("rillclock/") and not quoted:
            self.fault(path, line, f"Own headers are included in quotes; write \"{header}\".")
        if quoted or header.startswith("rillclock/"):
            self.own_include(path, line, header)
            return
        name, rooms = third_party(header)
        if name is not None and room_of(path) not in rooms:
            where = f"only {' and '.join(rooms)} may" if rooms else "no room may; add it to the list in tests/layering"
            self.fault(path, line, f"{room_of(path)} includes <{header}> of {name}, but {where}.")

    def own_include(self, path, line, header):
        beside, public = path.parent / header, pathlib.Path("include") / header
        target = next((p for p in (beside, public) if p in self.files), None)
        if target is None:
            self.fault(path, line, f"\"{header}\" is no header of ours; others are included in angle brackets.")
            return
        self.includes[path].append((line, target))
        own, other = room_of(path), room_of(target)
        if own is None or other is None or own == other:
            return
        if other not in ROOMS[own]:
            allowed = ", ".join(ROOMS[own]) or "nothing"
            self.fault(path, line, f"{own} includes {header}, but {own} may include only: {allowed}.")
        elif target.parts[0] == "src":
            self.fault(path, line, f"{header} is private to {other}; include a public header of it.")

    def cycles(self):
        by_file = {path: [target for _, target in found] for path, found in self.includes.items()}
        for cycle in cycles_of(by_file):
            line = next(n for n, target in self.includes[cycle[0]] if target == cycle[1])
            self.fault(cycle[0], line, "These files include each other in a circle: " + " → ".join(map(str, cycle)) + ".")
        by_room, example = {}, {}
        for path, found in self.includes.items():
            for line, target in found:
                own, other = room_of(path), room_of(target)
                if own and other and own != other:
                    by_room.setdefault(own, set()).add(other)
                    example.setdefault((own, other), (path, line))
        for cycle in cycles_of({room: sorted(others) for room, others in by_room.items()}):
            path, line = example[cycle[0], cycle[1]]
            self.fault(path, line, "These rooms include each other in a circle: " + " → ".join(cycle) + ".")


def hidden_names(lines):
    """(name, line, text) of what unnamed namespaces define, in the form in which this code is written."""
    hidden, text_goes_on = False, False
    for number, line in enumerate(lines, 1):
        if text_goes_on:
            text_goes_on = ')"' not in line
            continue
        found = RAW_TEXT.search(line)
        text_goes_on = bool(found) and ')"' not in line[found.end():]
        if line.startswith("namespace {"):
            hidden = True
        elif line == "}  // namespace":
            hidden = False
        elif hidden and not line.startswith(("TEST_CASE", "template", "public:", "private:")):
            found = HIDDEN.match(line)
            if found:
                yield found[1] or found[2], number, line


def cycles_of(arrows):
    """One circle for each arrow that closes one, in a depth-first walk."""
    state, found = {}, []

    def walk(node, way):
        state[node] = "open"
        for other in arrows.get(node, ()):
            if state.get(other) == "open":
                found.append(way[way.index(other):] + [other])
            elif other not in state:
                walk(other, way + [other])
        state[node] = "done"

    for node in sorted(arrows):
        if node not in state:
            walk(node, [node])
    return found


def main():
    if len(sys.argv) != 2:
        sys.exit("usage: check_layering.py ROOT")
    faults = Check(pathlib.Path(sys.argv[1])).run()
    for fault in faults:
        print(fault)
    sys.exit(1 if faults else 0)


if __name__ == "__main__":
    main()
