#!/usr/bin/python3
"""Checks the checker: each kind of fault, put into a sound tree, is found, and said with file and line."""
import pathlib
import tempfile
import unittest

from check_layering import Check, TOP_LEVEL

SOUND = {
    "include/rillclock/core/error.hpp": "#pragma once\n#include <string>\n",
    "include/rillclock/raster/grid.hpp": '#pragma once\n#include "rillclock/core/error.hpp"\n',
    "src/raster/grid.cpp": '#include "rillclock/raster/grid.hpp"\n\n#include <cmath>\n',
    "src/io/files.cpp": "#include <gdal_priv.h>\n#include <unistd.h>\n#include <openssl/evp.h>\n",
    "src/graph/tree.cpp": "#include <boost/graph/adjacency_list.hpp>\n",
    "src/hydraulics/root.cpp": "#include <boost/math/tools/roots.hpp>\n",
    "src/python/module.cpp": '#include <pybind11/pybind11.h>\n#include "rillclock/raster/grid.hpp"\n',
    "src/cli/main.cpp": "#include <CLI/CLI.hpp>\n#include <spdlog/spdlog.h>\n#include <nlohmann/json.hpp>\n",
}


def faults_of(changes=None):
    with tempfile.TemporaryDirectory() as folder:
        root = pathlib.Path(folder)
        for name in TOP_LEVEL:
            if "." in name:
                (root / name).touch()
            else:
                (root / name).mkdir()
        (root / ".gitignore").touch()
        (root / "build").mkdir()
        for name, text in (SOUND | (changes or {})).items():
            (root / name).parent.mkdir(parents=True, exist_ok=True)
            (root / name).write_text(text, encoding="utf-8")
        return Check(root).run()


class CheckLayering(unittest.TestCase):
    def assert_said(self, changes, *sentences):
        self.assertEqual(faults_of(changes), list(sentences))

    def test_a_sound_tree_has_no_fault(self):
        self.assert_said({})

    def test_a_room_below_must_not_include_one_above(self):
        self.assert_said({"src/core/error.cpp": '\n#include "rillclock/raster/grid.hpp"\n'},
                         "src/core/error.cpp:2: core includes rillclock/raster/grid.hpp, but core may include only: nothing.",
                         "src/core/error.cpp:2: These rooms include each other in a circle: core → raster → core.")

    def test_the_command_includes_core_and_run_alone(self):
        self.assert_said({"src/cli/main.cpp": '#include "rillclock/raster/grid.hpp"\n'},
                         "src/cli/main.cpp:1: cli includes rillclock/raster/grid.hpp, but cli may include only: core, run.")

    def test_pybind11_stays_in_python(self):
        self.assert_said({"src/raster/grid.cpp": "#include <pybind11/numpy.h>\n"},
                         "src/raster/grid.cpp:1: raster includes <pybind11/numpy.h> of pybind11, but only python may.")

    def test_gdal_stays_in_io(self):
        self.assert_said({"src/raster/grid.cpp": "#include <ogr_spatialref.h>\n"},
                         "src/raster/grid.cpp:1: raster includes <ogr_spatialref.h> of GDAL, but only io may.")

    def test_proj_stays_in_io(self):
        self.assert_said({"src/raster/grid.cpp": "#include <proj.h>\n"},
                         "src/raster/grid.cpp:1: raster includes <proj.h> of PROJ, but only io may.")

    def test_core_knows_no_third_party(self):
        self.assert_said({"src/core/error.cpp": "#include <fmt/format.h>\n"},
                         "src/core/error.cpp:1: core includes <fmt/format.h> of spdlog, but only cli may.")

    def test_a_library_nobody_listed_is_refused(self):
        self.assert_said({"src/core/error.cpp": "#include <strange/thing.hpp>\n"},
                         "src/core/error.cpp:1: core includes <strange/thing.hpp> of an unknown library, "
                         "but no room may; add it to the list in tests/layering.")

    def test_files_that_include_each_other_are_found(self):
        self.assert_said({"include/rillclock/core/error.hpp": '#pragma once\n#include "rillclock/core/notice.hpp"\n',
                          "include/rillclock/core/notice.hpp": '#pragma once\n#include "rillclock/core/error.hpp"\n'},
                         "include/rillclock/core/error.hpp:2: These files include each other in a circle: "
                         "include/rillclock/core/error.hpp → include/rillclock/core/notice.hpp → "
                         "include/rillclock/core/error.hpp.")

    def test_two_types_of_one_name_are_found(self):
        self.assert_said({"src/core/error.cpp": "struct Way {\n};\n", "src/raster/grid.cpp": "struct Way {\n};\n"},
                         "src/raster/grid.cpp:1: Way is also the name of a type in src/core/error.cpp; "
                         "give one of them another name.")

    def test_types_hidden_in_their_files_may_share_a_name(self):
        hidden = "namespace {\nstruct Way {\n};\n}  // namespace\n"
        self.assert_said({"src/core/error.cpp": hidden, "src/raster/grid.cpp": hidden})

    def test_sources_of_a_room_hide_no_two_things_of_one_name(self):
        self.assert_said({"src/raster/a.cpp": "namespace {\nconstexpr double most = 1.0;\n}  // namespace\n",
                          "src/raster/b.cpp": "namespace {\n\ndouble most(int a) {\n}\n}  // namespace\n"},
                         "src/raster/b.cpp:3: most is also a name hidden in a.cpp beside it; give one of them another name, or share it in a header.")
        self.assert_said({"tests/unit/raster/a_test.cpp": "namespace {\nstruct Way {\n};\n}  // namespace\n",
                          "tests/unit/raster/b_test.cpp": "namespace {\nclass Way {\n};\n}  // namespace\n"},
                         "tests/unit/raster/b_test.cpp:2: Way is also a name hidden in a_test.cpp beside it; "
                         "give one of them another name, or share it in a header.")

    def test_what_a_source_hides_has_no_name_of_a_type_that_others_read_from_a_header(self):
        self.assert_said({"include/rillclock/core/error.hpp": "#pragma once\nstruct Way {\n};\n",
                          "tests/unit/io/a_test.cpp": "namespace {\nstruct Way {\n};\n}  // namespace\n"},
                         "tests/unit/io/a_test.cpp:2: Way is also the name of a type in include/rillclock/core/error.hpp; give what is hidden here another.")

    def test_the_same_alias_what_stands_in_a_text_and_what_is_not_hidden_may_be_in_two_sources(self):
        self.assert_said({"src/raster/a.cpp": "namespace {\nusing Ring = int;\n}  // namespace\nint turned(int a) {\n}\n",
                          "src/raster/b.cpp": "namespace {\nusing Ring = int;\nint turned(Ring a) {\n}\n}  // namespace\n",
                          "src/raster/c.cpp": 'namespace {\nconst char* text = R"(\nint turned(int a);\n)";\n}  // namespace\n'})

    def test_another_alias_of_one_name_is_found(self):
        self.assert_said({"src/raster/a.cpp": "namespace {\nusing Ring = int;\n}  // namespace\n",
                          "src/raster/b.cpp": "namespace {\nusing Ring = long;\n}  // namespace\n"},
                         "src/raster/b.cpp:2: Ring is also a name hidden in a.cpp beside it; give one of them another name, or share it in a header.")

    def test_a_header_that_is_not_there_is_found(self):
        self.assert_said({"src/core/error.cpp": '#include "gdal.h"\n'},
                         'src/core/error.cpp:1: "gdal.h" is no header of ours; others are included in angle brackets.')

    def test_own_headers_stand_in_quotes(self):
        self.assert_said({"src/raster/grid.cpp": "#include <rillclock/core/error.hpp>\n"},
                         'src/raster/grid.cpp:1: Own headers are included in quotes; write "rillclock/core/error.hpp".')

    def test_the_top_level_holds_nothing_else(self):
        self.assert_said({"notes/a.txt": ""},
                         "notes:1: This does not belong at the top of the repository; move it into one of its folders.")

    def test_a_file_is_in_a_room(self):
        self.assert_said({"include/rillclock/all.hpp": "#pragma once\n"},
                         "include/rillclock/all.hpp:1: This file is in none of the rooms; move it into one.")

    def test_a_file_is_not_too_long(self):
        self.assert_said({"src/core/error.cpp": "\n" * 451},
                         "src/core/error.cpp:451: The file has 451 lines; split it, 450 is the most.")

    def test_a_header_is_guarded(self):
        self.assert_said({"include/rillclock/core/notice.hpp": "// #pragma twice\n"},
                         "include/rillclock/core/notice.hpp:1: The header has no `#pragma once`; add it.")


if __name__ == "__main__":
    unittest.main()
