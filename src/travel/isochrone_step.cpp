#include "rillclock/travel/isochrone_step.hpp"

#include <array>

namespace rillclock {
namespace {

/// Bands are told apart by times in single precision, which may round the greatest one up.
constexpr double share_of_rounding = 1e-6;

}  // namespace

Duration isochrone_step(Duration greatest, int bands) {
    constexpr std::array round_steps{seconds(1), seconds(2), seconds(5), seconds(10), seconds(15), seconds(20), seconds(30),
                                     minutes(1), minutes(2), minutes(5), minutes(10), minutes(15), minutes(20), minutes(30),
                                     hours(1), hours(2), hours(3), hours(4), hours(6), hours(8), hours(12)};
    const auto is_enough = [&](Duration step) { return (1.0 + share_of_rounding) * greatest < static_cast<double>(bands) * step; };
    for (const Duration step : round_steps) {
        if (is_enough(step)) return step;
    }
    for (Duration power = hours(24);; power = 10.0 * power) {
        for (const double factor : {1.0, 2.0, 5.0}) {
            if (is_enough(factor * power)) return factor * power;
        }
    }
}

}  // namespace rillclock
