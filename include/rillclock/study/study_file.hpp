#pragma once

#include <string>
#include <string_view>

#include "rillclock/study/study.hpp"

namespace rillclock {

/// Reads a study from TOML text; `file` is its name, for errors and as the folder that paths are relative to.
/// What is missing is not asked for yet, since the command line may state it: see `check_study`.
///
/// Throws an input error with file, line and column for text that is not TOML, keys given twice, keys that are unknown
/// (with the nearest right one) or not served by this version, and values of the wrong type, unit, sign or range.
[[nodiscard]] Study read_study(std::string_view text, const std::string& file);

/// A whole study: `read_study`, then `check_study`.
[[nodiscard]] Study parse_study(std::string_view text, const std::string& file);

}  // namespace rillclock
