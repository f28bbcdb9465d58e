#pragma once

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// A gutter of triangular section along a curb, the curb's face upright.
struct Gutter {
    double n = 0.0;            ///< Manning's n, above 0
    double cross_slope = 0.0;  ///< Sx, rise over run across the street, above 0
    double slope = 0.0;        ///< SL, rise over run along it, above 0
};

/// Constants of the gutter formulas in metres and seconds; in feet they are printed as 0.56 and 1.11.
/// Source: FHWA, HEC-22, 3rd ed., 2009, equation 4-2 and that of the velocity (values from memory).
inline constexpr double gutter_discharge_constant = 0.376;
inline constexpr double gutter_velocity_constant = 0.752;

/// Q = 0.376/n · Sx^(5/3) · √SL · T^(8/3), for a spread T (width of water from the curb) of 0 or more. The handbook
/// prints the powers as 1.67 and 2.67. No number for values outside the ranges. Source: HEC-22, equation 4-2.
[[nodiscard]] Discharge gutter_discharge(const Gutter& gutter, Length spread);

/// The spread at which the gutter carries the flow (0 or more): the same formula solved for T.
[[nodiscard]] Length gutter_spread(const Gutter& gutter, Discharge flow);

/// V = 0.752/n · √SL · Sx^(2/3) · T^(2/3): the flow over the triangle Sx·T²/2.
[[nodiscard]] Speed gutter_velocity(const Gutter& gutter, Length spread);

/// The one spread whose velocity is the average over a gutter whose spread grows from T1 to T2 (0 ≤ T1 ≤ T2):
/// 0.65·T2·((1 − (T1/T2)^(8/3)) / (1 − (T1/T2)²))^1.5; T2 itself where the two are equal.
/// Source: HEC-22, section 4.3, average gutter velocity (from memory; gives the printed table to its last digit).
[[nodiscard]] Length average_gutter_spread(Length upstream, Length downstream);

}  // namespace rillclock
