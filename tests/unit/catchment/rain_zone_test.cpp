#include "rillclock/catchment/rain_zone.hpp"

#include <catch2/catch.hpp>

#include <vector>

namespace rillclock {
namespace {

TEST_CASE("a point has the rain of the zone with the greatest share of its catchment") {
    const std::vector<FixedArea> areas{10, 30, 60};
    CHECK(prevailing_zone(areas, false)->number == 2);
    CHECK(prevailing_zone(areas, false)->share == Approx(0.6));
}

TEST_CASE("of equal zones the first counts, and the land outside last of all") {
    CHECK(prevailing_zone(std::vector<FixedArea>{50, 50, 50}, true)->number == 1);
    CHECK(prevailing_zone(std::vector<FixedArea>{51, 50, 50}, true)->number == 0);
}

TEST_CASE("land outside of all zones counts only where there is rain for it") {
    CHECK(prevailing_zone(std::vector<FixedArea>{90, 10}, true)->number == 0);
    CHECK(prevailing_zone(std::vector<FixedArea>{90, 10}, false)->number == 1);
    CHECK(prevailing_zone(std::vector<FixedArea>{90, 10}, false)->share == Approx(0.1));
    CHECK_FALSE(prevailing_zone(std::vector<FixedArea>{90, 0}, false));
    CHECK_FALSE(prevailing_zone(std::vector<FixedArea>{}, true));
}

}  // namespace
}  // namespace rillclock
