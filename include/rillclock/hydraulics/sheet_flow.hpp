#pragma once

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// A stretch of overland flow of one surface and one slope.
struct SheetStretch {
    double n = 0.0;      ///< roughness for sheet flow, above 0
    Length length;       ///< above 0
    double slope = 0.0;  ///< rise over run, above 0
};

/// The sheet index n·d/√S of a stretch, a length; the index of a way is the sum over its stretches, from the divide on.
/// Not finite where the slope is not above 0.
[[nodiscard]] Length sheet_index(const SheetStretch& stretch);

/// A published sheet-flow formula as a function of the sheet index u alone: T(u) = s · coefficient · u^exponent.
///
/// The storm factor s belongs to the storm and the formula (`nrcs_storm_factor`, `kinematic_storm_factor`); it
/// multiplies a time that no storm changes, which is what `at_unit_storm` gives.
struct SheetFormula {
    double coefficient = 0.0;  ///< seconds at u = 1 m and s = 1
    double exponent = 0.0;

    /// Time to run from the divide to index u, at s = 1. The index must not be negative.
    [[nodiscard]] Duration at_unit_storm(Length u) const;
    /// Time from index u0 to u1 ≥ u0, at s = 1: T(u1) − T(u0).
    [[nodiscard]] Duration at_unit_storm(Length u0, Length u1) const;

    /// Time of the kinematic characteristic over a stretch of one surface and slope that lies from x0 to x1 ≥ x0 below the divide, at
    /// s = 1: coefficient · (n/√S)^e · (x1^e − x0^e).
    ///
    /// From the divide on one plane that is T(u). Below a change of n or S it is not: the flow in a strip grows with the ground above
    /// it, q = i·x (continuity), whatever that ground is, so the depth jumps where n or S does and is not i·t. With q = h^(5/3)·√S/n
    /// and a wave speed of (5/3)·q/h, dx over that speed is 0.6·(n/√S)^0.6·(i·x)^-0.4·dx, which is integrated here.
    /// Source: Lighthill and Whitham, 1955; Eagleson, Dynamic Hydrology, 1970, for cascades of planes (from memory; derived here).
    [[nodiscard]] Duration along_characteristic(const SheetStretch& stretch, Length x0) const;
    /// The one slope that gives a stretch of that n and length from x0 the time it was found to take, at s = 1.
    [[nodiscard]] double characteristic_slope(double n, Length x0, Length x1, Duration time) const;
};

/// Constant of the NRCS sheet-flow formula, for hours, feet and inches.
/// Source: USDA SCS, "Urban Hydrology for Small Watersheds", Technical Release 55, 2nd ed., 1986, equation 3-3.
inline constexpr double nrcs_sheet_constant = 0.007;

/// The NRCS simplified kinematic formula in SI: Tt[h] = 0.007 (n·L)^0.8 / (P2^0.5 · S^0.4), so u has the exponent 0.8.
/// Source: TR-55, 1986, equation 3-3; NEH Part 630, chapter 15, 2010, equation 15-8.
[[nodiscard]] SheetFormula nrcs_sheet_formula();

/// s of the NRCS formula: P2^-0.5 with the 2-year 24-hour depth in metres, whatever the return period of the study.
[[nodiscard]] double nrcs_storm_factor(Length two_year_24_hour);

/// The NRCS formula as the handbook prints it, in feet, inches and hours.
[[nodiscard]] Duration nrcs_sheet_time(const SheetStretch& stretch, Length two_year_24_hour);

/// Printed constants of the kinematic-wave formula T[min] = constant · (n·L/√S)^0.6 / i^0.4 for feet and inches per
/// hour. They are roundings of one theory and differ by less than 1 %.
inline constexpr double kinematic_constant_hec22 = 0.933;  ///< FHWA, HEC-22, 3rd ed., 2009, equation 3-3
inline constexpr double kinematic_constant_morgali_linsley =
    0.94;  ///< Morgali and Linsley, 1965; Aron and Erborge, 1973

/// The kinematic-wave formula in SI, with one of the printed constants; u has the exponent 0.6.
[[nodiscard]] SheetFormula kinematic_sheet_formula(double printed_constant);

/// s of the kinematic-wave formula: i^-0.4 with the intensity in metres per second.
[[nodiscard]] double kinematic_storm_factor(Intensity intensity);

/// By what the storm factor grows where the kinematic wave takes rainfall excess C·i in place of i: C^-0.4, with the runoff
/// coefficient above 0. Source: Chin, Water-Resources Engineering (from memory).
[[nodiscard]] double kinematic_runoff_factor(double runoff_coefficient);

/// The sheet index at which sheet flow ends: 100 ft.
/// Source: McCuen and Spiess, "Assessment of kinematic wave time of concentration", J. Hydraul. Eng. 121(3), 1995.
inline constexpr Length mccuen_spiess_index = feet(100);

/// The length that limit means on one surface and slope: 100 √S / n, in feet (NEH 630 chapter 15, equation 15-9).
[[nodiscard]] Length mccuen_spiess_length(double n, double slope);

/// The one slope that gives a stretch of roughness n and that length the growth of index from u0 to u1 ≥ u0:
/// (n·L / (u1 − u0))². Infinite where the index does not grow.
[[nodiscard]] double equivalent_sheet_slope(double n, Length length, Length u0, Length u1);

}  // namespace rillclock
