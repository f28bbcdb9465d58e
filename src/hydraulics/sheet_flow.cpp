#include "rillclock/hydraulics/sheet_flow.hpp"

#include <cmath>

namespace rillclock {
namespace {

constexpr double seconds_per_hour = 3600.0;
constexpr double seconds_per_minute = 60.0;

}  // namespace

Length sheet_index(const SheetStretch& stretch) {
    return stretch.length * (stretch.n / std::sqrt(stretch.slope));
}

Duration SheetFormula::at_unit_storm(Length u) const {
    return seconds(coefficient * std::pow(u.si(), exponent));
}

Duration SheetFormula::at_unit_storm(Length u0, Length u1) const {
    return at_unit_storm(u1) - at_unit_storm(u0);
}

Duration SheetFormula::along_characteristic(const SheetStretch& stretch, Length x0) const {
    const double grown = std::pow((x0 + stretch.length).si(), exponent) - std::pow(x0.si(), exponent);
    return seconds(coefficient * std::pow(stretch.n / std::sqrt(stretch.slope), exponent) * grown);
}

double SheetFormula::characteristic_slope(double n, Length x0, Length x1, Duration time) const {
    const double grown = std::pow(x1.si(), exponent) - std::pow(x0.si(), exponent);
    const double root_of_slope = n / std::pow(in_seconds(time) / (coefficient * grown), 1.0 / exponent);
    return root_of_slope * root_of_slope;
}

SheetFormula nrcs_sheet_formula() {
    // Feet and inches in the printed formula become metres: n·L counts with the power 0.8, P2 with −0.5.
    static const double coefficient =
        nrcs_sheet_constant * seconds_per_hour * std::pow(metres_per_foot, -0.8) * std::pow(metres_per_inch, 0.5);
    return {.coefficient = coefficient, .exponent = 0.8};
}

double nrcs_storm_factor(Length two_year_24_hour) {
    return 1.0 / std::sqrt(two_year_24_hour.si());
}

Duration nrcs_sheet_time(const SheetStretch& stretch, Length two_year_24_hour) {
    const double n_length = stretch.n * in_feet(stretch.length);
    return hours(nrcs_sheet_constant * std::pow(n_length, 0.8) /
                 (std::sqrt(in_inches(two_year_24_hour)) * std::pow(stretch.slope, 0.4)));
}

SheetFormula kinematic_sheet_formula(double printed_constant) {
    const double coefficient = printed_constant * seconds_per_minute * std::pow(metres_per_foot, -0.6) *
                               std::pow(inches_per_hour(1).si(), 0.4);
    return {.coefficient = coefficient, .exponent = 0.6};
}

double kinematic_storm_factor(Intensity intensity) {
    return std::pow(intensity.si(), -0.4);
}

double kinematic_runoff_factor(double runoff_coefficient) {
    return std::pow(runoff_coefficient, -0.4);
}

Length mccuen_spiess_length(double n, double slope) {
    return mccuen_spiess_index * (std::sqrt(slope) / n);
}

double equivalent_sheet_slope(double n, Length length, Length u0, Length u1) {
    const double root_of_slope = n * (length / (u1 - u0));
    return root_of_slope * root_of_slope;
}

}  // namespace rillclock
