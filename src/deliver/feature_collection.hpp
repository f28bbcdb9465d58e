#pragma once

#include <nlohmann/json.hpp>
#include <string>

#include "geographic_lines.hpp"

namespace rillclock {

/// Rounded to so many significant digits, as a number.
[[nodiscard]] double rounded(double value, int digits = 6);

/// Rounded to so many decimals, as a number.
[[nodiscard]] double to_decimals(double value, int decimals);

[[nodiscard]] nlohmann::ordered_json feature(nlohmann::ordered_json geometry, nlohmann::ordered_json properties);

/// A GeoJSON collection of features whose geometries `lines` made. One feature a line: legible, and small differences stay small in a
/// comparison of two results.
[[nodiscard]] std::string collection_text(const nlohmann::ordered_json& features, const GeographicLines& lines);

}  // namespace rillclock
