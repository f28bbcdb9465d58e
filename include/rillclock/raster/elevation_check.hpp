#pragma once

#include <cmath>
#include <cstdint>
#include <limits>
#include <string>

#include "rillclock/core/notice.hpp"

namespace rillclock {

/// Takes what cannot be an elevation as void, and counts it.
///
/// Void are infinities and whatever lies more than 100 km above or below zero. NaN stays NaN; -0.0 becomes 0.0, so that equal
/// elevations have equal bits.
class ElevationCheck {
public:
    /// An elevation in metres is (value · scale + offset) · metres_per_unit.
    explicit ElevationCheck(double metres_per_unit, double scale = 1.0, double offset = 0.0)
        : metres_per_unit_(metres_per_unit), scale_(scale), offset_(offset) {}

    /// The elevation to keep; NaN where void.
    [[nodiscard]] double checked(double value) {
        if (std::isnan(value)) return value;
        if (std::isinf(value)) {
            ++not_finite_;
            return std::numeric_limits<double>::quiet_NaN();
        }
        if (std::abs((value * scale_ + offset_) * metres_per_unit_) <= farthest_m) return value + 0.0;
        ++impossible_;
        return std::numeric_limits<double>::quiet_NaN();
    }

    /// Counts cells that were found to be no numbers before they came here.
    void count_not_finite(std::int64_t cells) { not_finite_ += cells; }

    /// Sentences on what was taken as void; `called`: "elevation file 'dem.tif'".
    [[nodiscard]] Notices notices(const std::string& called) const {
        Notices notices;
        if (not_finite_ > 0)
            notices.push_back({.code = "elevation-not-finite",
                               .text = std::to_string(not_finite_) + " cells of the " + called +
                                       " are no finite numbers and are taken as void.",
                               .value = static_cast<double>(not_finite_)});
        if (impossible_ > 0)
            notices.push_back({.code = "elevation-impossible",
                               .text = std::to_string(impossible_) + " cells of the " + called +
                                       " lie more than 100 km above or below zero and are taken as void; look at the "
                                       "unit, the scale and the nodata value.",
                               .value = static_cast<double>(impossible_),
                               .threshold = farthest_m});
        return notices;
    }

private:
    static constexpr double farthest_m = 1e5;
    double metres_per_unit_;
    double scale_;
    double offset_;
    std::int64_t not_finite_ = 0;
    std::int64_t impossible_ = 0;
};

}  // namespace rillclock
