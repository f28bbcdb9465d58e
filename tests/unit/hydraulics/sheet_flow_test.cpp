#include "rillclock/hydraulics/sheet_flow.hpp"

#include <catch2/catch.hpp>

#include <cmath>

#include "rounding.hpp"

namespace rillclock {
namespace {

const SheetStretch grass{.n = 0.24, .length = feet(100), .slope = 0.01};

TEST_CASE("the NRCS formula of the sheet index is the handbook's formula") {
    for (const double inches_of_rain : {1.5, 3.6, 8.0})
        CHECK(in_seconds(nrcs_sheet_formula().at_unit_storm(sheet_index(grass))) *
                  nrcs_storm_factor(inches(inches_of_rain)) ==
              rounding(in_seconds(nrcs_sheet_time(grass, inches(inches_of_rain)))));
}

TEST_CASE("with P2 in millimetres and lengths in metres the NRCS constant is 0.091") {
    // 0.091 is printed in metric manuals; it is 0.0912 rounded.
    const double printed = 0.091 * std::pow(0.24 * 30.48, 0.8) / (std::sqrt(91.44) * std::pow(0.01, 0.4));
    CHECK(in_hours(nrcs_sheet_time(grass, millimetres(91.44))) == Approx(printed).epsilon(0.003));
}

TEST_CASE("four times the rain halves the NRCS time, and n doubled multiplies it by 2^0.8") {
    const double once = in_seconds(nrcs_sheet_time(grass, inches(2)));
    CHECK(in_seconds(nrcs_sheet_time(grass, inches(8))) == rounding(once / 2));
    const SheetStretch rougher{.n = 0.48, .length = grass.length, .slope = grass.slope};
    CHECK(in_seconds(nrcs_sheet_time(rougher, inches(2))) == rounding(once * std::pow(2.0, 0.8)));
}

TEST_CASE("times of steps add up to the time of the whole") {
    const SheetFormula formula = nrcs_sheet_formula();
    const Duration steps = formula.at_unit_storm(metres(0), metres(7)) + formula.at_unit_storm(metres(7), metres(40));
    CHECK(in_seconds(steps) == rounding(in_seconds(formula.at_unit_storm(metres(40)))));
    CHECK(formula.at_unit_storm(metres(0)) == seconds(0));
}

TEST_CASE("the kinematic formula of the sheet index is the handbook's formula") {
    const double minutes_by_hand = 0.94 * std::pow(0.24 * 100 / 0.1, 0.6) / std::pow(5.1, 0.4);
    const Duration time =
        kinematic_sheet_formula(kinematic_constant_morgali_linsley).at_unit_storm(sheet_index(grass)) *
        kinematic_storm_factor(inches_per_hour(5.1));
    CHECK(in_minutes(time) == rounding(minutes_by_hand));
}

TEST_CASE("the metric constant 6.92 agrees with 0.933") {
    const double printed = 6.92 * std::pow(0.24 * 30.48 / 0.1, 0.6) / std::pow(5.1 * 25.4, 0.4);
    const Duration time = kinematic_sheet_formula(kinematic_constant_hec22).at_unit_storm(sheet_index(grass)) *
                          kinematic_storm_factor(inches_per_hour(5.1));
    CHECK(in_minutes(time) == Approx(printed).epsilon(0.003));
}

TEST_CASE("the limit by index and the limit by length are one") {
    const Length limit = mccuen_spiess_length(0.41, 0.05);
    CHECK(in_feet(sheet_index({.n = 0.41, .length = limit, .slope = 0.05})) == rounding(100));
}

TEST_CASE("the equivalent slope of one plane is its slope") {
    CHECK(equivalent_sheet_slope(grass.n, grass.length, metres(0), sheet_index(grass)) == rounding(0.01));
}

TEST_CASE("without a slope there is no finite index") {
    CHECK_FALSE(std::isfinite(sheet_index({.n = 0.2, .length = metres(1), .slope = 0}).si()));
    CHECK_FALSE(std::isfinite(sheet_index({.n = 0.2, .length = metres(1), .slope = -0.1}).si()));
}

TEST_CASE("from the divide on one plane the characteristic takes the time of the index") {
    const SheetFormula formula = kinematic_sheet_formula(kinematic_constant_hec22);
    CHECK(in_seconds(formula.along_characteristic(grass, metres(0))) == rounding(in_seconds(formula.at_unit_storm(sheet_index(grass)))));
}

TEST_CASE("one plane takes the same time cut into stretches") {
    const SheetFormula formula = kinematic_sheet_formula(kinematic_constant_hec22);
    const SheetStretch half{.n = 0.2, .length = metres(10), .slope = 0.02};
    const SheetStretch whole{.n = 0.2, .length = metres(20), .slope = 0.02};
    CHECK(in_seconds(formula.along_characteristic(half, metres(0)) + formula.along_characteristic(half, metres(10))) ==
          rounding(in_seconds(formula.along_characteristic(whole, metres(0)))));
}

TEST_CASE("grass below a street is passed faster than by the index of both, and a street below grass slower") {
    // Ten metres each; n 0.02 and 0.2 on one slope, so that n/√S is a and 10a: 1 + 10^0.6 (2^0.6 − 1) = 3.053 and 10^0.6 + 2^0.6 − 1 =
    // 4.497 by the characteristic, 11^0.6 = 4.216 by the index, each times (10 a)^0.6.
    const SheetFormula formula{.coefficient = 1.0, .exponent = 0.6};
    const SheetStretch street{.n = 0.02, .length = metres(10), .slope = 0.04};
    const SheetStretch meadow{.n = 0.2, .length = metres(10), .slope = 0.04};
    const auto down = [&](const SheetStretch& upper, const SheetStretch& lower) {
        return in_seconds(formula.along_characteristic(upper, metres(0)) + formula.along_characteristic(lower, metres(10)));
    };
    CHECK(down(street, meadow) == Approx(3.053).epsilon(2e-4));
    CHECK(down(meadow, street) == Approx(4.497).epsilon(2e-4));
}

TEST_CASE("the slope of a characteristic's time is the slope it was made with") {
    const SheetFormula formula = kinematic_sheet_formula(kinematic_constant_hec22);
    const Duration time = formula.along_characteristic({.n = 0.3, .length = metres(12), .slope = 0.05}, metres(7));
    CHECK(formula.characteristic_slope(0.3, metres(7), metres(19), time) == rounding(0.05));
}

TEST_CASE("under half the rain as runoff the time is 2^0.4 of that under the rain") {
    CHECK(kinematic_runoff_factor(0.5) == rounding(std::pow(2.0, 0.4)));
    CHECK(kinematic_runoff_factor(1.0) == 1.0);
}

}  // namespace
}  // namespace rillclock
