#include "rillclock/terrain/tiled_directions.hpp"

#include <catch2/catch.hpp>

#include "reference/drawings.hpp"
#include "reference/plain/flow_directions.hpp"

namespace rillclock {
namespace {

std::string tiled_flow(std::string_view drawing, std::int64_t side) {
    const Elevations z = drawings::terrain(drawing);
    return drawings::arrows(
        flow_codes(z, Ground::planar(metres(1), metres(1)), TileGrid(z.rows(), z.columns(), side), Executor(2)));
}

TEST_CASE("an open flat that crosses tiles is left by its shortest way") {
    constexpr std::string_view flat = R"(
        99999999
        95555559
        99999994
    )";
    CHECK(tiled_flow(flat, 2) == tiled_flow(flat, 100));
    CHECK(tiled_flow(flat, 2).substr(10, 6) == "666663");
}

TEST_CASE("a closed flat that crosses tiles drains to where its basin is opened") {
    // The pond of 1 is entered, from outside, over the 5 in the west.
    constexpr std::string_view pond = R"(
        99999999
        51111119
        99999999
    )";
    CHECK(tiled_flow(pond, 3) == drawings::drawn(R"(
        32222221
        o4444444
        98888887
    )"));
}

TEST_CASE("flats that lie within a tile, one that touches its rim and one that crosses it are settled as in the whole") {
    // Tiles of five cells: an open flat of 5 and a closed one of 1 within the first; a closed one of 2 at the rim of the second and of it alone; an
    // open flat of 6 from the third to the fourth.
    constexpr std::string_view flats = R"(
        9999999999
        9555492289
        9888982289
        9118989999
        9118979989
        9999989899
        9869999999
        9666666649
        9889878789
        9999999999
    )";
    const std::string plain = drawings::arrows(flow_forest_of(drawings::terrain(flats), Ground::planar(metres(1), metres(1))).codes());
    CHECK(tiled_flow(flats, 5) == plain);
    CHECK(tiled_flow(flats, 100) == plain);
}

TEST_CASE("a pit is opened through other tiles, over the lowest of its passes") {
    constexpr std::string_view bowl = R"(
        9999999
        9765679
        9754579
        9643346
        9754579
        9999999
    )";
    CHECK(tiled_flow(bowl, 2) == tiled_flow(bowl, 100));
    CHECK(tiled_flow(bowl, 2).substr(3 * 8, 7) == "666666o");
}

TEST_CASE("falls of elevations stored as floats are compared in double precision") {
    // Of these two falls over a diagonal and a side the second is steeper by less than a float can tell.
    Raster<float> z(3, 3, 9.0F);
    z(1, 1) = 2.0F;
    z(0, 2) = 2.0F - 1.4142135F;
    z(1, 0) = 1.0F;
    const Ground square = Ground::planar(metres(1), metres(1));
    const double diagonal = (double{z(1, 1)} - double{z(0, 2)}) / from_fixed(square.length(1, Direction::north_east));
    REQUIRE(diagonal != 1.0);
    REQUIRE(static_cast<float>(diagonal) == Approx(1.0F).epsilon(1e-6));
    const auto codes = flow_codes(z, square, TileGrid(3, 3), Executor(1));
    CHECK(codes(1, 1) == flow_code(diagonal > 1.0 ? Direction::north_east : Direction::west));
}

}  // namespace
}  // namespace rillclock
