#include "rillclock/hydraulics/shallow_flow.hpp"

#include <algorithm>
#include <array>
#include <cmath>

#include "rillclock/hydraulics/manning.hpp"

namespace rillclock {
namespace {

constexpr std::array types{
    ShallowType{"pavement", "Pavement and small upland gullies", 0.2, 0.025, 20.328},
    ShallowType{"grassed waterway", "Grassed waterways", 0.4, 0.050, 16.135},
    ShallowType{"nearly bare", "Nearly bare and untilled; alluvial fans in western mountains", 0.2, 0.051, 9.965},
    ShallowType{"straight row crops", "Cultivated straight row crops", 0.2, 0.058, 8.762},
    ShallowType{"short-grass pasture", "Short-grass pasture", 0.2, 0.073, 6.962},
    ShallowType{"contour crops or woodland", "Minimum tillage, contour or strip-cropped, and woodlands", 0.2, 0.101,
                5.032},
    ShallowType{"forest litter or hay meadow", "Forest with heavy ground litter and hay meadows", 0.2, 0.202, 2.516},
};

}  // namespace

std::span<const ShallowType> shallow_types() {
    return types;
}

const ShallowType* find_shallow_type(std::string_view name) {
    const auto found = std::find_if(types.begin(), types.end(), [&](const ShallowType& t) { return t.name == name; });
    return found == types.end() ? nullptr : &*found;
}

Speed shallow_conveyance(double n, Length hydraulic_radius, double printed_factor) {
    return manning_velocity_us({.n = n, .hydraulic_radius = hydraulic_radius, .slope = 1.0}, printed_factor);
}

Speed shallow_velocity(Speed k, double slope) {
    return k * std::sqrt(slope);
}

}  // namespace rillclock
