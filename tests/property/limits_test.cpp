// Terrains at the limits of what may come, through flow directions and travel times: each in seconds.

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>
#include <random>
#include <utility>

#include "reference/limit_terrains.hpp"
#include "reference/tiled_travel_check.hpp"
#include "rillclock/terrain/tiled_directions.hpp"

namespace rillclock {
namespace {

constexpr double no_elevation = std::numeric_limits<double>::quiet_NaN();
const Ground square_metres_each = Ground::planar(metres(1), metres(1));

worked::Given given_of(Elevations z) {
    worked::Given given{.elevations = std::move(z)};
    given.surface = worked::one_surface(given.elevations, 0.15, 2.0);
    return given;
}

/// The first difference between both ways through a terrain, directions and travel; empty where there is none.
std::string difference_on(Elevations z, const worked::TileManner& manner) {
    const worked::Land land(given_of(std::move(z)));
    const Executor executor(manner.threads);
    const TileGrid tiles(land.forest.rows(), land.forest.columns(), manner.side);
    if (flow_codes(land.given.elevations, square_metres_each, tiles, executor) != land.forest.codes()) return "directions";
    return worked::tiled_difference(land, manner);
}

TEST_CASE("one flat is timed over tiles as in one piece") { CHECK(difference_on(Elevations(130, 170, 1.0), {32, 2}) == ""); }

TEST_CASE("a spiral one cell wide is timed over tiles as in one piece, outwards and to a pit in its middle") {
    CHECK(difference_on(limits::spiral(101, false), {16, 2}) == "");
    CHECK(difference_on(limits::spiral(101, true), {16, 1}) == "");
}

TEST_CASE("a comb is timed over tiles as in one piece") { CHECK(difference_on(limits::comb(120, 121), {16, 2}) == ""); }

TEST_CASE("one cell among voids is timed over tiles as in one piece") {
    Elevations z(300, 300, no_elevation);
    z(170, 160) = 4.0;
    CHECK(difference_on(z, {64, 2}) == "");
}

TEST_CASE("a million cells in one row, or in one column, are timed over tiles as in one piece") {
    std::mt19937 random(7);
    std::uniform_int_distribution<int> level(0, 3);
    Elevations row(1, 1'000'000);
    for (double& value : row.values()) value = level(random);
    Elevations column(1'000'000, 1);
    std::copy(row.values().begin(), row.values().end(), column.values().begin());
    CHECK(difference_on(std::move(row), {256, 2}) == "");
    CHECK(difference_on(std::move(column), {256, 2}) == "");
}

TEST_CASE("a level river with a thousand steep tributaries on either side is timed over tiles as in one piece") {
    Elevations z(21, 1000);
    for (std::int64_t row = 0; row < z.rows(); ++row) {
        for (double& level : z.row(row)) level = std::abs(static_cast<double>(row) - 10.0);
    }
    worked::Given given = given_of(std::move(z));
    given.rules.channel.from_area = square_metres(50);
    const worked::Land land(std::move(given));
    CHECK(land.field.slope(5, 900) == 1.0F);                               // a tributary
    CHECK(land.field.kind(10, 900) == GroundKind::channel);                // the river
    CHECK(land.field.slope(10, 900) == 0.0001F);                           // on its floor
    CHECK(worked::tiled_difference(land, {.side = 64, .threads = 2}) == "");
}

/// How many cells of a forest are roots; throws where there is a circle.
std::int64_t roots_of(const Raster<FlowCode>& codes) {
    const FlowForest forest(codes);
    return std::count(forest.codes().values().begin(), forest.codes().values().end(), flow_root);
}

TEST_CASE("all water of ten million cells around one pit leaves by one root") {
    constexpr std::int64_t side = 3163;   // 3163² = 10 004 569
    Raster<float> bowl(side, side);
    for (std::int64_t row = 0; row < side; ++row) {
        for (std::int64_t column = 0; column < side; ++column) {
            bowl(row, column) = static_cast<float>(std::hypot(static_cast<double>(row) - 1581.0, static_cast<double>(column) - 1581.3));
        }
    }
    const Raster<FlowCode> codes = flow_codes(bowl, square_metres_each, TileGrid(side, side), Executor(2));
    CHECK(roots_of(codes) == 1);
    // The lowest of the edge is right of the pit, at its end of row 1581: 1580.7 away, where the left end is 1581.3.
    CHECK(codes(1581, side - 1) == flow_root);
}

TEST_CASE("one pit in the middle of a plain of ten million cells takes what is nearer to it than to the edge, and is opened") {
    constexpr std::int64_t side = 3163;
    Raster<float> plain(side, side, 3.0F);
    plain(1581, 1581) = 1.0F;
    const Raster<FlowCode> codes = flow_codes(plain, square_metres_each, TileGrid(side, side), Executor(2));
    CHECK(roots_of(codes) == 4 * side - 4);           // every cell of the edge
    CHECK(is_direction(codes(1581, 1581)));           // opened
    // 380 steps from the pit's neighbours and 1200 from the edge; south-east, asked before south, is one step nearer too.
    CHECK(codes(1200, 1581) == flow_code(Direction::south_east));
    CHECK(codes(700, 1581) == flow_code(Direction::north));   // 880 steps from the pit's neighbours, 700 from the edge
}

}  // namespace
}  // namespace rillclock
