#include "rillclock/hydraulics/lump_formulas.hpp"

#include <catch2/catch.hpp>

#include <array>
#include <cmath>

#include "rounding.hpp"

namespace rillclock {
namespace {

TEST_CASE("a mean by area weighs each part by its area") {
    const std::array parts{AreaValue{acres(3), 60}, AreaValue{acres(1), 100}};
    CHECK(area_weighted_mean(parts) == rounding(70));
    CHECK(std::isnan(area_weighted_mean({})));
}

TEST_CASE("the lag is 0.6 of the time of concentration") {
    CHECK(nrcs_lag(feet(4000), 75, 0.04) / nrcs_lag_concentration(feet(4000), 75, 0.04) == rounding(0.6));
}

TEST_CASE("land slope from contours is their length times the interval over the area") {
    CHECK(land_slope_from_contours(metres(4000), metres(2), square_metres(100000)) == rounding(0.08));
}

TEST_CASE("Kirpich by length and slope is Kirpich by length and fall") {
    const double by_fall = 0.0078 * std::pow(std::pow(3000.0, 1.5) / std::sqrt(90.0), 0.77);
    CHECK(in_minutes(kirpich(feet(3000), 0.03)) == rounding(by_fall));
}

TEST_CASE("the metric constant of Kirpich agrees with that for feet") {
    // Printed as 0.0195 and 0.01947.
    CHECK(in_minutes(kirpich(metres(1), 1)) == Approx(0.01947).margin(0.000005));
}

TEST_CASE("the culvert practice formula is Kirpich's within the digits of its constants") {
    CHECK(california_culvert_practice(feet(3000), feet(90)) / kirpich(feet(3000), 0.03) == Approx(1).margin(0.01));
}

TEST_CASE("the metric constant of Kerby agrees with that for feet") {
    CHECK(in_minutes(kerby(metres(1), 1, 1)) == Approx(1.44).margin(0.005));
}

TEST_CASE("Kerby's three printed forms agree within one per cent from slopes of 0.001 to 1") {
    for (const double slope : {0.001, 0.02, 1.0}) {
        CHECK(kerby(feet(500), 0.4, slope) / kerby_by_root(feet(500), 0.4, slope) == Approx(1).margin(0.01));
        CHECK(kerby_with_two_thirds(feet(500), 0.4, slope) / kerby_by_root(feet(500), 0.4, slope) ==
              Approx(1).margin(0.001));
    }
}

TEST_CASE("low slopes are raised by 0.0005, which fades from 0.002 to 0.003 without a step") {
    CHECK(texas_low_slope(0.001) == rounding(0.0015));
    CHECK(texas_low_slope(0.002) == rounding(0.0025));
    CHECK(texas_low_slope(0.0025) == rounding(0.00275));
    CHECK(texas_low_slope(0.003) == 0.003);
    CHECK(texas_low_slope(0.05) == 0.05);
}

TEST_CASE("Denver's form of the FAA formula is the FAA's within its rounding") {
    CHECK(denver_initial(feet(300), 0.5, 0.02) / faa(feet(300), 0.5, 0.02) == Approx(1).margin(0.015));
}

TEST_CASE("the printed forms of Bransby-Williams differ by their rounding alone") {
    const auto time = [](BransbyWilliams printed) {
        return in_minutes(bransby_williams(miles(2), square_miles(1.5), 0.01, printed));
    };
    CHECK(time(BransbyWilliams::us) / time(BransbyWilliams::original) == Approx(1).margin(0.007));
    CHECK(time(BransbyWilliams::metric) / time(BransbyWilliams::original) == Approx(1).margin(0.0095));
    CHECK(time(BransbyWilliams::australian) / time(BransbyWilliams::original) == Approx(1).margin(0.016));
}

TEST_CASE("the coefficient of Los Angeles County runs from the soil's to 0.9") {
    CHECK(los_angeles_coefficient(0, 0.3) == 0.3);
    CHECK(los_angeles_coefficient(1, 0.3) == 0.9);
    CHECK(los_angeles_intensity(inches_per_hour(0.2), hours(24)) == inches_per_hour(0.2));
}

TEST_CASE("the county factors and the retardances come from small to great") {
    for (const auto table : {county_initial_factors(), kerby_retardances(), izzard_retardances()})
        for (std::size_t i = 1; i < table.size(); ++i) CHECK(table[i].value > table[i - 1].value);
}

TEST_CASE("without length, slope, fall or area no formula gives a finite time") {
    const auto finite = [](Duration time) { return std::isfinite(time.si()) && time.si() > 0; };
    CHECK_FALSE(finite(kirpich(feet(100), 0)));
    CHECK_FALSE(finite(kirpich(feet(-100), 0.1)));
    CHECK_FALSE(finite(nrcs_lag_concentration(feet(100), 80, 0)));
    CHECK_FALSE(finite(nrcs_lag_concentration(feet(100), 0, 0.1)));
    CHECK_FALSE(finite(california_culvert_practice(feet(100), feet(0))));
    CHECK_FALSE(finite(kerby(feet(100), 0.2, 0)));
    CHECK_FALSE(finite(faa(feet(100), 0.5, 0)));
    CHECK_FALSE(finite(izzard(feet(100), 0.01, 0.01, inches_per_hour(0))));
    CHECK_FALSE(finite(papadakis_kazan(feet(100), 0, 0.1, inches_per_hour(1))));
    CHECK_FALSE(finite(bransby_williams(miles(1), square_miles(0), 0.1, BransbyWilliams::us)));
    CHECK_FALSE(finite(giandotti(square_kilometres(1), kilometres(1), metres(0))));
    CHECK_FALSE(finite(los_angeles(feet(100), 0.1, 0, inches_per_hour(1))));
    CHECK_FALSE(finite(county_initial(feet(100), feet(0), 0.3)));
}

}  // namespace
}  // namespace rillclock
