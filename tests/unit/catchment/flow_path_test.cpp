#include "rillclock/catchment/flow_path.hpp"

#include <catch2/catch.hpp>

#include <cmath>

#include "reference/worked_outlets.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

using worked::cells_from_to;
using worked::Worked;

/// Cells of 10 m in a row that drains eastward; at a fall of 0.4 m a cell shallow flow runs at 1 m/s.
worked::Given row_of(const Elevations& z, const TravelRules& rules) {
    return {.elevations = z,
            .ground = Ground::planar(metres(10), metres(10)),
            .codes = worked::eastward(z.columns()),
            .surface = worked::one_surface(z, 0.1, 5),
            .rules = rules};
}

TEST_CASE("a flow path holds its head and its end") {
    const FlowForest forest(worked::eastward(6));
    CHECK(flow_path(forest.codes(), 1, 4) == std::vector<Cell>{1, 2, 3, 4});
    CHECK(flow_path(forest.codes(), 4, 4) == std::vector<Cell>{4});
}

TEST_CASE("a path asked for from a cell that does not drain through its end is a fault of ours") {
    CHECK_THROWS_AS(flow_path(worked::eastward(6), 3, 1), Error);
}

TEST_CASE("a step in which sheet flow ends gives two pieces that share it") {
    TravelRules rules = worked::bare_rules();
    rules.sheet.limit = metres(12.5);
    const Worked w(row_of(worked::even_strip(4, 0.4), rules));
    const auto pieces = w.pieces(cells_from_to(0, 3));
    REQUIRE(pieces.size() == 4);
    CHECK(pieces[1].part.regime == Regime::sheet);
    CHECK(pieces[2].part.regime == Regime::shallow);
    CHECK(pieces[1].position == 1);
    CHECK(pieces[2].position == 1);
    CHECK(pieces[1].share_to == 0.25);
    CHECK(pieces[2].share_from == 0.25);
    CHECK(pieces[2].share_to == 1.0);
    CHECK(pieces[3].position == 2);
}

TEST_CASE("a path of one cell has no pieces, no length and no time") {
    const Worked w(row_of(worked::even_strip(4, 0.4), worked::bare_rules()));
    CHECK(w.pieces({3}).empty());
    CHECK(w.summary({3}).length == 0);
    CHECK(w.summary({3}).time == StepTime{});
    CHECK(w.summary({3}).share_of_length(0.0) == 0.0);
}

TEST_CASE("the slopes used on a plane add up to its fall") {
    const Worked w(row_of(worked::even_strip(60, 0.4), TravelRules{}));
    const PathSummary summary = w.summary(cells_from_to(0, 59));
    CHECK(summary.fall_m == Approx(59 * 0.4));
    CHECK(from_fixed(summary.length) == 590.0);
    // Slopes are kept in single precision.
    CHECK(summary.fall_ratio() == Approx(1.0).epsilon(1e-7));
}

TEST_CASE("a path without fall has no fall ratio") {
    const Worked w(row_of(worked::strip({5, 5, 5}), TravelRules{}));
    CHECK(std::isnan(w.summary(cells_from_to(0, 2)).fall_ratio()));
}

TEST_CASE("a window longer than a cell makes the slopes of an uneven path exceed its fall, and the ratio tells") {
    // 3 m of fall in the last step, seen from 20 m before: 3/20 over the last two steps but one, 3/10 over the last.
    TravelRules rules = worked::bare_rules();
    rules.slope.vertical_step = metres(3);
    const Worked w(row_of(worked::strip({3, 3, 0}), rules));
    CHECK(w.summary(cells_from_to(0, 2)).fall_ratio() == Approx((0.15 * 10 + 0.3 * 10) / 3.0));
}

TEST_CASE("the share of a path on the slope floor is by length") {
    // 100 m at a slope of 0.0005, then 300 m at 0.02; no window reaches from one into the other.
    std::vector<double> levels;
    for (int i = 0; i <= 30; ++i) levels.insert(levels.begin(), 0.2 * i);
    for (int i = 1; i <= 10; ++i) levels.insert(levels.begin(), 6.0 + 0.005 * i);
    TravelRules rules = worked::bare_rules();
    rules.slope = {.window = metres(10), .vertical_step = metres(0.001), .overland_floor = 0.001, .channel_floor = 0};
    const Worked w(row_of(worked::strip(levels), rules));
    const PathSummary summary = w.summary(cells_from_to(0, 40));
    CHECK(summary.share_of_length(summary.floor_length_m) == Approx(0.25));
}

TEST_CASE("where ponded ground or open water carries the water no part of a path hangs on the slope floor") {
    // 30 cells level behind a pass, then 0.5 m a cell; the level cells are under the floor of 0.01 but for the last.
    std::vector<double> levels(30, 6.0);
    for (int i = 0; i <= 20; ++i) levels.push_back(10.0 - 0.5 * i);
    TravelRules rules;
    rules.sheet.limit = metres(0);
    rules.channel.from_area.reset();
    rules.slope.overland_floor = rules.slope.channel_floor = 0.01;
    const auto floor_m = [&](const worked::Given& given) {
        return Worked(given).summary(cells_from_to(0, 50)).floor_length_m;
    };
    worked::Given given = row_of(worked::strip(levels), rules);
    CHECK(floor_m(given) == 0.0);  // ponded 4 m deep
    given.rules.pond.depth = metres(5);
    CHECK(floor_m(given) == 290.0);
    for (std::int64_t column = 0; column < 30; ++column) given.surface.index(0, column) = 1;
    given.surface.classes.push_back({.sheet_n = 0.1, .shallow_k = metres_per_second(5), .water_depth = metres(2)});
    CHECK(floor_m(given) == 0.0);
}

TEST_CASE("the share of a path that is ponded is by length") {
    // Cells 2 and 3 lie 4 m under the pass at cell 4.
    TravelRules rules;
    rules.sheet.limit = metres(0);
    const Worked w(row_of(worked::strip({20, 15, 6, 6, 10, 9, 8, 7, 6}), rules));
    const PathSummary summary = w.summary(cells_from_to(0, 8));
    CHECK(summary.ponded_length_m == 20.0);
    CHECK(summary.share_of_length(summary.ponded_length_m) == 0.25);
}

TEST_CASE("the fall of a path is that of spill elevation, in metres") {
    worked::Given given = row_of(worked::strip({20, 6, 10, 4}), TravelRules{});
    given.metres_per_elevation_unit = 0.5;
    const Worked w(std::move(given));
    CHECK(w.summary({1, 2, 3}).fall_m == 3.0);
}

}  // namespace
}  // namespace rillclock
