#pragma once

#include <algorithm>
#include <cmath>
#include <limits>

namespace rillclock {

/// The finite float nearest to a double, or NaN; many files of floats tag -1.8e308 or an infinity as nodata and hold
/// the end of the floats' range.
[[nodiscard]] inline float nearest_float(double value) {
    constexpr double greatest = std::numeric_limits<float>::max();
    return static_cast<float>(std::isnan(value) ? value : std::clamp(value, -greatest, greatest));
}

}  // namespace rillclock
