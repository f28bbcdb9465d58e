#pragma once

#include <cmath>
#include <nlohmann/json.hpp>
#include <optional>
#include <string>

#include "rillclock/core/notice.hpp"
#include "rillclock/core/number_text.hpp"

namespace rillclock {

using Json = nlohmann::ordered_json;

/// Rounded to decimals, so that the file is legible; null where there is no number.
inline Json number(double value, int decimals) {
    return std::isfinite(value) ? Json(std::stod(fixed_decimals(value, decimals))) : Json(nullptr);
}
/// Rounded to significant digits.
inline Json digits(double value, int count = 6) {
    return std::isfinite(value) ? Json(std::stod(significant(value, count))) : Json(nullptr);
}
inline Json minutes_json(double s) { return number(s / 60.0, 6); }
inline Json text_or_null(const std::string& text) { return text.empty() ? Json(nullptr) : Json(text); }
template <class T>
Json or_null(const std::optional<T>& value) {
    return value ? digits(*value) : Json(nullptr);
}
inline Json place_json(const Place& place) { return Json::array({number(place.x, 7), number(place.y, 7)}); }

}  // namespace rillclock
