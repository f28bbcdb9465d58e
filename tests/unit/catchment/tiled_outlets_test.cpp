#include "rillclock/catchment/tiled_outlets.hpp"

#include <catch2/catch.hpp>

#include "reference/drawings.hpp"
#include "reference/tiled_travel_check.hpp"
#include "reference/worked_outlets.hpp"

namespace rillclock {
namespace {

using worked::Given;
using worked::Worked;

std::vector<Outlet> outlets_over_tiles(const Worked& w, const worked::TileManner& manner) {
    const worked::OverTiles tiled(w.land, manner);
    const auto heads = heads_of(reference::arrivals_by_subarea(w.land.inputs, w.land.field, w.tree, w.storm_factor), w.tree, w.storm_factor,
                                w.asked.rules.ignore_tail);
    return outlets_of(tiled.travel, w.points, w.tree, heads, w.asked.rules);
}

void require_same(const PointPath& a, const PointPath& b) {
    REQUIRE(a.cells == b.cells);
    REQUIRE(a.distance_m == b.distance_m);
    REQUIRE(a.seconds == b.seconds);
    REQUIRE(a.end_to_end_s == b.end_to_end_s);
    REQUIRE(a.summary.slope_length_m == b.summary.slope_length_m);
    REQUIRE(a.summary.profile_area_m2 == b.summary.profile_area_m2);
    REQUIRE(a.doubts.head_s == b.doubts.head_s);
    REQUIRE(a.segments.size() == b.segments.size());
    for (std::size_t i = 0; i < a.segments.size(); ++i) {
        REQUIRE(a.segments[i].from.position == b.segments[i].from.position);
        REQUIRE(a.segments[i].from.share == b.segments[i].from.share);
        REQUIRE(a.segments[i].to.position == b.segments[i].to.position);
        REQUIRE(a.segments[i].to.share == b.segments[i].to.share);
        REQUIRE(a.segments[i].time == b.segments[i].time);
        REQUIRE(a.segments[i].slope_equivalent == b.segments[i].slope_equivalent);
    }
}

TEST_CASE("points whose paths share their steps are, to the last bit, those of paths walked one by one") {
    for (unsigned seed = 0; seed < 60; ++seed) {
        std::mt19937 random(seed);
        Given given = worked::random_given(random, seed);
        worked::Asked asked{.points = worked::random_cells(random, given, 30)};
        if (asked.points.empty()) continue;
        const Worked w(std::move(given), std::move(asked));
        INFO("seed " << seed);
        const std::vector<Outlet> shared = outlets_over_tiles(w, {.side = 1 + seed % 9, .threads = 1 + seed % 3});
        REQUIRE(shared.size() == w.outlets.size());
        for (std::size_t i = 0; i < shared.size(); ++i) {
            require_same(shared[i].governing, w.outlets[i].governing);
            require_same(shared[i].longest, w.outlets[i].longest);
            REQUIRE(shared[i].way.cells == w.outlets[i].way.cells);
            REQUIRE(shared[i].way.time == w.outlets[i].way.time);
            REQUIRE(shared[i].way.regime_length_m == w.outlets[i].way.regime_length_m);
            REQUIRE(shared[i].elevation_m == w.outlets[i].elevation_m);
            REQUIRE(shared[i].border_cells == w.outlets[i].border_cells);
        }
    }
}

}  // namespace
}  // namespace rillclock
