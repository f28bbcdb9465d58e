#include "rillclock/io/length_unit.hpp"

#include <catch2/catch.hpp>

using namespace rillclock;

TEST_CASE("units are known by the names files use") {
    CHECK(length_unit_named("Metre")->metres_per_unit == 1.0);
    CHECK(length_unit_named("feet")->metres_per_unit == 0.3048);
    CHECK(length_unit_named("US survey foot")->metres_per_unit == 1200.0 / 3937.0);
    CHECK(length_unit_named("ftUS")->metres_per_unit == 1200.0 / 3937.0);
    CHECK(length_unit_named("us-ft")->metres_per_unit == 1200.0 / 3937.0);
    CHECK(length_unit_named("cm")->metres_per_unit == 0.01);
}

TEST_CASE("other words name no unit") {
    CHECK_FALSE(length_unit_named("cubit"));
    CHECK_FALSE(length_unit_named(""));
    CHECK_FALSE(length_unit_named("0.1 m"));
}

TEST_CASE("a factor with fewer digits is the unit it is meant to be") {
    CHECK(length_unit_of(0.3048006096, "Foot_US").metres_per_unit == 1200.0 / 3937.0);
    CHECK(length_unit_of(0.9144, "yard").name == "yard");
}

TEST_CASE("the two feet do not contradict each other, foot and metre do") {
    CHECK_FALSE(length_unit_named("ft")->contradicts(*length_unit_named("us ft")));
    CHECK(length_unit_named("ft")->contradicts(*length_unit_named("m")));
}
