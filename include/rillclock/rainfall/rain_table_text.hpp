#pragma once

#include <string_view>

#include "rillclock/rainfall/rain_source.hpp"

namespace rillclock {

/// Reads a plain table of rain: durations down, return periods across, units in the header.
///
///     duration_min,intensity_2yr_in_h,intensity_10yr_in_h
///     5,4.8,6.9
///     60,1.5,2.3
///
/// The first column is `duration_min` or `duration_h`; the others are `intensity_<years>yr_` with `in_h` or
/// `mm_h`, or `depth_<years>yr_` with `in` or `mm`, one quantity and unit throughout. Rows and columns come in rising
/// order. `file` names the text in errors. Throws an input error, with the line, for any other header, for fewer than
/// two rows, and for numbers that cannot be rain: zero or less, a depth that falls with duration, anything that falls
/// with the return period.
[[nodiscard]] RainSource rain_from_table(std::string_view text, std::string_view file);

}  // namespace rillclock
