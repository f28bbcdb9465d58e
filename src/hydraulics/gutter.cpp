#include "rillclock/hydraulics/gutter.hpp"

#include <cmath>

namespace rillclock {
namespace {

constexpr double five_thirds = 5.0 / 3.0;
constexpr double eight_thirds = 8.0 / 3.0;

/// Q at a spread of one metre.
double discharge_at_one_metre(const Gutter& gutter) {
    return gutter_discharge_constant / gutter.n * std::pow(gutter.cross_slope, five_thirds) * std::sqrt(gutter.slope);
}

}  // namespace

Discharge gutter_discharge(const Gutter& gutter, Length spread) {
    return Discharge::from_si(discharge_at_one_metre(gutter) * std::pow(spread.si(), eight_thirds));
}

Length gutter_spread(const Gutter& gutter, Discharge flow) {
    return metres(std::pow(flow.si() / discharge_at_one_metre(gutter), 1.0 / eight_thirds));
}

Speed gutter_velocity(const Gutter& gutter, Length spread) {
    const double depth = gutter.cross_slope * spread.si();
    return metres_per_second(gutter_velocity_constant / gutter.n * std::sqrt(gutter.slope) * std::cbrt(depth * depth));
}

Length average_gutter_spread(Length upstream, Length downstream) {
    if (upstream == downstream) return downstream;
    const double ratio = upstream / downstream;
    return 0.65 * downstream * std::pow((1 - std::pow(ratio, eight_thirds)) / (1 - ratio * ratio), 1.5);
}

}  // namespace rillclock
