#pragma once

#include <string>

#include "rillclock/study/study.hpp"

namespace rillclock {

/// Reads a study file, without asking yet for what it lacks: the command line may state it.
[[nodiscard]] Study read_study_file(const std::string& path);

/// Lays a value given outside a study file over a study: `key` with its section ("terrain.elevation"), `option` for errors.
/// A file named so is meant from the current folder, where the study's own paths are from the study file's.
void state_in_study(Study& study, const std::string& key, const std::string& value, const std::string& option);

}  // namespace rillclock
