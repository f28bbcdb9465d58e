#include "rillclock/hydraulics/gutter.hpp"

#include <catch2/catch.hpp>

#include <cmath>

namespace rillclock {
namespace {

const Gutter street{.n = 0.016, .cross_slope = 0.02, .slope = 0.01};

TEST_CASE("spread and flow are each other's answer") {
    for (const double spread : {0.1, 1.0, 2.5, 6.0})
        CHECK(gutter_spread(street, gutter_discharge(street, metres(spread))).si() == Approx(spread).epsilon(1e-12));
}

TEST_CASE("the velocity is the flow over the triangle under water") {
    const double spread = 2.5;
    const double triangle = street.cross_slope * spread * spread / 2;
    CHECK(gutter_velocity(street, metres(spread)).si() ==
          Approx(gutter_discharge(street, metres(spread)).si() / triangle).epsilon(1e-12));
}

TEST_CASE("the constants for feet are those for metres within their printed digits") {
    const double feet_per_metre = 1 / 0.3048;
    // Q in feet has the dimension length^3 where T has 8/3: what is left is a cube root.
    CHECK(gutter_discharge_constant * std::cbrt(feet_per_metre) == Approx(0.56).margin(0.005));
    CHECK(gutter_velocity_constant * std::cbrt(feet_per_metre) == Approx(1.11).margin(0.01));
}

TEST_CASE("a dry gutter carries nothing and has no spread") {
    CHECK(gutter_discharge(street, metres(0)).si() == 0);
    CHECK(gutter_spread(street, Discharge::from_si(0)) == metres(0));
}

TEST_CASE("outside its ranges the gutter's flow is no number") {
    CHECK(std::isnan(gutter_discharge(street, metres(-1)).si()));
    CHECK(std::isnan(gutter_discharge({.n = 0.016, .cross_slope = -0.02, .slope = 0.01}, metres(1)).si()));
    CHECK(std::isnan(gutter_discharge({.n = 0.016, .cross_slope = 0.02, .slope = -0.01}, metres(1)).si()));
    CHECK_FALSE(std::isfinite(gutter_discharge({.n = 0, .cross_slope = 0.02, .slope = 0.01}, metres(1)).si()));
}

TEST_CASE("the average spread lies between both and is the spread where they are equal") {
    CHECK(average_gutter_spread(metres(2), metres(2)) == metres(2));
    CHECK(average_gutter_spread(metres(0), metres(2)) == metres(1.3));
    for (const double upstream : {0.0, 0.5, 1.0, 1.9}) {
        const Length average = average_gutter_spread(metres(upstream), metres(2));
        CHECK(average > metres(upstream));
        CHECK(average < metres(2));
    }
}

}  // namespace
}  // namespace rillclock
