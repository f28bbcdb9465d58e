#pragma once

#include <algorithm>
#include <cmath>
#include <limits>

namespace rillclock {

/// The float nearest to a double; numbers beyond the range of floats (many files tag -1.8e308 as nodata) become its ends.
[[nodiscard]] inline float nearest_float(double value) {
    constexpr double greatest = std::numeric_limits<float>::max();
    return static_cast<float>(std::isfinite(value) ? std::clamp(value, -greatest, greatest) : value);
}

}  // namespace rillclock
