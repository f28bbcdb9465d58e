// The storm that lasts as long as its water takes: rain by duration from a formula, kinematic sheet flow under it, solved as by hand.
#include <cstdio>
#include <iostream>

#include "rillclock/core/error.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"
#include "rillclock/hydraulics/storm_time.hpp"
#include "rillclock/rainfall/intensity_formula.hpp"
#include "rillclock/rainfall/rain_source.hpp"

using namespace rillclock;

int main() {
    try {
        // Chicago, 10 years, as printed by Chow, Maidment and Mays, Applied Hydrology, 1988 (from memory).
        const IntensityFormula formula = intensity_formula_from_text("i[in/h] = 94.9 / (t[min]^0.88 + 9.04)", "the formula");
        const RainSource rain = rain_from_formulas({{.return_period = 10.0, .formula = formula}}, {}, "the rain");
        const RainCurve curve = rain.curve(10.0, minutes(0));

        // Dense grass, 100 ft at a slope of 0.01. T = s · (a time that no storm changes), and s follows from the intensity.
        const SheetFormula sheet = kinematic_sheet_formula(kinematic_constant_hec22);
        const Duration at_unit_storm = sheet.at_unit_storm(sheet_index({.n = 0.24, .length = feet(100), .slope = 0.01}));
        const auto time = [&](Intensity intensity) { return kinematic_storm_factor(intensity) * at_unit_storm; };

        const StormTime solved = solve_storm_time(time, [&](Duration duration) { return curve.within(duration); }, {.start = minutes(20)});
        for (const StormIteration& row : solved.rows)
            std::printf("assumed %.3f min, %.2f in/h, computed %.3f min\n", in_minutes(row.assumed), in_inches_per_hour(row.intensity),
                        in_minutes(row.computed));
        std::cout << words(solved.end) << '\n';
        return solved.end == StormEnd::settled ? 0 : 1;
    } catch (const Error& error) {
        std::cerr << error.what() << '\n';
        return 1;
    }
}
