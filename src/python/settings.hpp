#pragma once

#include <pybind11/pybind11.h>

#include <string>

#include "rillclock/study/study.hpp"

namespace rillclock {

/// Lays settings over a study: keys as in a study file, with their sections in the name ({"timing.sheet_limit": "150 ft"}) or as dictionaries
/// in it ({"timing": {"sheet_limit": "150 ft"}}). Values are texts, numbers, booleans and lists of numbers; None leaves a key as it is.
///
/// Throws an input error as a study file with these keys would, naming the setting.
void state_settings(Study& study, const pybind11::dict& settings);

/// The same, for keys alone that act on travel times from rasters in memory; others are an input error.
void state_travel_settings(Study& study, const pybind11::dict& settings);

/// The keys that act on travel times from rasters in memory, a line each with default and meaning, for the documentation.
[[nodiscard]] std::string travel_settings_text();

}  // namespace rillclock
