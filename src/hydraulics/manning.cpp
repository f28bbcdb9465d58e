#include "rillclock/hydraulics/manning.hpp"

#include <cmath>

namespace rillclock {
namespace {

double radius_to_two_thirds(double radius) {
    return std::cbrt(radius * radius);
}

}  // namespace

Speed manning_velocity(const ManningReach& reach) {
    return metres_per_second(radius_to_two_thirds(in_metres(reach.hydraulic_radius)) * std::sqrt(reach.slope) /
                             reach.n);
}

Speed manning_velocity_us(const ManningReach& reach, double printed_factor) {
    return feet_per_second(printed_factor * radius_to_two_thirds(in_feet(reach.hydraulic_radius)) *
                           std::sqrt(reach.slope) / reach.n);
}

double manning_slope_of(Speed velocity, const ManningReach& reach) {
    const double root = velocity.si() * reach.n / radius_to_two_thirds(in_metres(reach.hydraulic_radius));
    return root * root;
}

double manning_n_of(Speed velocity, const ManningReach& reach) {
    return radius_to_two_thirds(in_metres(reach.hydraulic_radius)) * std::sqrt(reach.slope) / velocity.si();
}

Duration manning_time(Length length, const ManningReach& reach) {
    return length / manning_velocity(reach);
}

}  // namespace rillclock
