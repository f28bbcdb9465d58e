#include "rillclock/travel/isochrone_step.hpp"

#include <catch2/catch.hpp>
#include <cmath>

using namespace rillclock;

TEST_CASE("the step for so many bands is the shortest round one") {
    CHECK(isochrone_step(minutes(77.6), 12) == minutes(10));
    CHECK(isochrone_step(minutes(77.6), 8) == minutes(10));
    CHECK(isochrone_step(minutes(77.6), 7) == minutes(15));
    CHECK(isochrone_step(minutes(77.6), 1) == hours(2));
    CHECK(isochrone_step(hours(50), 10) == hours(6));
    CHECK(isochrone_step(hours(24 * 90), 10) == hours(24 * 10));
}

TEST_CASE("a greatest time of exactly so many steps begins a band more, so the step is longer") {
    CHECK(isochrone_step(minutes(60), 12) == minutes(10));
    CHECK(isochrone_step(minutes(59.9), 12) == minutes(5));
    CHECK(isochrone_step(minutes(59.99999999), 12) == minutes(10));   // single precision makes 60 of it
}

TEST_CASE("no time at all has the shortest step") { CHECK(isochrone_step(minutes(0), 5) == seconds(1)); }

TEST_CASE("bands are never more than asked") {
    for (int bands = 1; bands <= 1000; bands += 7) {
        for (double greatest_s = 3000.0; greatest_s < 1e7; greatest_s *= 1.37) {
            const double made = std::floor(greatest_s / in_seconds(isochrone_step(seconds(greatest_s), bands))) + 1.0;
            CHECK(made <= bands);
        }
    }
}
