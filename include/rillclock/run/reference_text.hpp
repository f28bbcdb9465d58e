#pragma once

#include <string>
#include <vector>

namespace rillclock {

/// "rillclock 0.1.0, GDAL 3.6.2, PROJ 9.1.1".
[[nodiscard]] std::string version_line();

/// Every method with its formula, inputs, range and source, and every table of Manning's n, as text for a terminal.
[[nodiscard]] std::string methods_text();

/// Every key of the study file with its default and meaning, section by section, in the form of a study file.
[[nodiscard]] std::string keys_text();

/// The cautions that stand wherever a result is shown, a sentence each.
[[nodiscard]] std::vector<std::string> caution_lines();

}  // namespace rillclock
