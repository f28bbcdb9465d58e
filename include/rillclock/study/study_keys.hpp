#pragma once

#include <span>
#include <string>
#include <string_view>

#include "rillclock/study/study.hpp"
#include "rillclock/study/study_value.hpp"

namespace rillclock {

/// A key of the study file, described once: the documentation and the help are made from this.
struct StudyKey {
    std::string_view key;       ///< with its section: "terrain.slope_window"
    std::string_view form;      ///< a right value as the file writes it: "\"20 m\""
    std::string_view standard;  ///< the default in words; "asked for" where there is none
    std::string_view help;      ///< one line
};

/// All keys this version serves, in the order of the file.
[[nodiscard]] std::span<const StudyKey> study_keys();

/// Sets what the key (with its section) stands for, from a study file or from the command line. Throws an input error
/// where the value has the wrong type, unit, sign or range, or names something this version does not do; a bug for a
/// key that `study_keys` does not list.
void set_study_value(Study& study, std::string_view key, const StudyValue& value);

/// Throws an input error for a key this version does not serve: one that a later version will, or one that is unknown,
/// with the nearest right key. `where`: "study.toml, line 3, column 1".
[[noreturn]] void refuse_study_key(std::string_view key, std::string_view where);

/// Whether a key is listed in `study_keys`.
[[nodiscard]] bool is_study_key(std::string_view key);
/// Whether a key may hold a table whose names are the user's: rain.formula, by return period.
[[nodiscard]] bool takes_entries(std::string_view key);
/// Whether a name is a section of the file, or a key that holds a table: "terrain", "timing.channel".
[[nodiscard]] bool is_study_section(std::string_view name);

}  // namespace rillclock
