#include "published_formulas.hpp"
#include "rillclock/hydraulics/lump_formulas.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"
#include "rillclock/hydraulics/storm_time.hpp"
#include "rillclock/rainfall/intensity_formula.hpp"
#include "rillclock/rainfall/rain_source.hpp"

namespace rillclock {
namespace {

/// The ten-year rain of Chicago, as a study would state it.
RainCurve chicago() {
    const IntensityFormula formula =
        intensity_formula_from_text("i[in/h] = c / (t[min]^e + f); c = 94.9, e = 0.88, f = 9.04", "Chicago");
    return rain_from_formulas({{.return_period = 10, .formula = formula}}, {.first = seconds(0)}, "Chicago")
        .curve(10, seconds(0));
}

double wenzel_in_h(const Inputs& in) {
    const IntensityFormula formula{.factor = in["c"], .time_exponent = in["e"], .added = in["f"]};
    return in_inches_per_hour(formula(minutes(in["t_min"]), 10));
}

double sherman_in_h(const Inputs& in) {
    const IntensityFormula formula{.factor = in["a"], .added = in["b"], .outer_exponent = in["c"]};
    return in_inches_per_hour(formula(minutes(in["t_min"]), 10));
}

/// The iteration of a plot of sheet flow under Chicago's rain, carried on until it no longer changes.
StormTime chicago_storm(const Inputs& in) {
    const Length u = sheet_index({.n = in["n"], .length = feet(in["L_ft"]), .slope = in["S"]});
    const Duration at_unit = kinematic_sheet_formula(kinematic_constant_hec22).at_unit_storm(u);
    const RainCurve rain = chicago();
    return solve_storm_time([&](Intensity i) { return at_unit * kinematic_storm_factor(i); },
                            [&](Duration d) { return rain.within(d); },
                            {.start = minutes(in["start_min"]), .tolerance = seconds(0.001)});
}

double round_minutes(const Inputs& in) {
    return in_minutes(chicago_storm(in).rows.at(static_cast<std::size_t>(in["round"]) - 1).computed);
}

/// Q = C·i·A without a factor, in cubic feet per second for acres and inches per hour.
double peak_of_two_cfs(const Inputs& in) {
    return (in["C1"] * in["A1_ac"] + in["C2"] * in["A2_ac"]) * in_inches_per_hour(chicago().at(minutes(in["t_min"])));
}

}  // namespace

Formulas rain_formulas() {
    return {
        {"wenzel_in_h", wenzel_in_h},
        {"sherman_in_h", sherman_in_h},
        {"chicago_in_h", [](const Inputs& in) { return in_inches_per_hour(chicago().at(minutes(in["t_min"]))); }},
        {"chicago_round_min", round_minutes},
        {"chicago_settled_min", [](const Inputs& in) { return in_minutes(chicago_storm(in).time()); }},
        {"chicago_settled_in_h", [](const Inputs& in) { return in_inches_per_hour(chicago_storm(in).intensity()); }},
        {"chicago_two_areas", peak_of_two_cfs},
    };
}

}  // namespace rillclock
