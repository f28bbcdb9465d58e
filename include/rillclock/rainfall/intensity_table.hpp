#pragma once

#include <vector>

#include "rillclock/core/quantity.hpp"
#include "rillclock/rainfall/rain_curve.hpp"

namespace rillclock {

/// Intensity by duration and return period, as a table prints it, converted to SI.
///
/// Promise of whoever makes one (the parsers): at least two durations and one return period, both rising; every
/// intensity above 0, none falling as the return period grows; depth (intensity times duration) not falling as the
/// duration grows, but by what three printed digits of an intensity can hide.
struct IntensityTable {
    std::vector<Duration> durations;
    std::vector<double> return_periods;  ///< years
    std::vector<Intensity> intensities;  ///< durations × return periods, row by row

    /// The points of a return period between the first and the last. Between two printed periods each duration's
    /// intensity is linear in the logarithm of the period. Throws an input error, begun by `source`, for any other.
    [[nodiscard]] TabulatedRain of_period(double return_period, std::string_view source) const;

    [[nodiscard]] RainRange range() const { return {.first = durations.front(), .last = durations.back()}; }
};

}  // namespace rillclock
