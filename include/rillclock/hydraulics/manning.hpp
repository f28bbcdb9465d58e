#pragma once

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// The factor of Manning's formula for feet and seconds, as printed by one source and another; 1 in SI.
inline constexpr double manning_factor_us_rounded = 1.49;     ///< TR-55, 1986, equation 3-4; HEC-22, equation 3-5
inline constexpr double manning_factor_us_neh = 1.486;        ///< NEH 630 chapter 15, table 15-3
inline constexpr double manning_factor_us_exact = 1.4859185;  ///< cube root of the feet in a metre

/// A reach of uniform open-channel flow.
struct ManningReach {
    double n = 0.0;           ///< Manning's n, above 0
    Length hydraulic_radius;  ///< 0 or more
    double slope = 0.0;       ///< rise over run, 0 or more
};

/// V = R^(2/3) · √S / n in metres and seconds. Not finite for values outside the ranges above.
/// Source: Manning, 1891; in SI as in FHWA HEC-22, 3rd ed., 2009, equation 3-5.
[[nodiscard]] Speed manning_velocity(const ManningReach& reach);

/// The same in feet and seconds, with a printed factor: what a handbook's example was computed with.
[[nodiscard]] Speed manning_velocity_us(const ManningReach& reach, double printed_factor);

/// Time to run a length at Manning's velocity; infinite on no slope.
[[nodiscard]] Duration manning_time(Length length, const ManningReach& reach);

/// Manning's formula the other way round: the slope that gives a velocity, and the n that does. The reach's own slope
/// or n is not looked at. Not finite for a radius or velocity of 0.
[[nodiscard]] double manning_slope_of(Speed velocity, const ManningReach& reach);
/// Manning's n that gives a velocity in a reach, dimensionless: the formula the other way round.
[[nodiscard]] double manning_n_of(Speed velocity, const ManningReach& reach);

/// Flow area over wetted perimeter.
[[nodiscard]] constexpr Length hydraulic_radius(Area flow_area, Length wetted_perimeter) {
    return metres(flow_area.si() / wetted_perimeter.si());
}

/// Hydraulic radius of a section known by its top width and mean depth, taken as a rectangle: W·D / (W + 2D).
[[nodiscard]] constexpr Length hydraulic_radius_of(Length top_width, Length mean_depth) {
    return metres(top_width.si() * mean_depth.si() / (top_width.si() + 2.0 * mean_depth.si()));
}

}  // namespace rillclock
