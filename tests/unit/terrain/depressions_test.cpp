#include "rillclock/terrain/depressions.hpp"

#include <algorithm>
#include <catch2/catch.hpp>

#include "reference/drawings.hpp"
#include "reference/heap_flood.hpp"
#include "reference/plain/flow_directions.hpp"

namespace rillclock {
namespace {

ElevationStore stored(const Elevations& z) {
    ElevationStore store(z.rows(), z.columns(), ElevationStore::Width::eight_bytes);
    for (Cell cell = 0; cell < static_cast<Cell>(z.size()); ++cell) store.put(cell, z[cell]);
    return store;
}

SpillStore spills(const ElevationStore& elevations, const Elevations& spill) {
    const TileGrid tiles(spill.rows(), spill.columns(), 3);
    SpillStore store(elevations, tiles);
    for (Tile tile = 0; tile < tiles.count(); ++tile) {
        const Window window = tiles.window(tile);
        std::vector<double> ground(static_cast<std::size_t>(window.size()));
        elevations.read(window, ground);
        std::vector<double> level;
        for (std::int64_t row = 0; row < window.rows; ++row) {
            for (std::int64_t column = 0; column < window.columns; ++column) level.push_back(spill(window.row + row, window.column + column));
        }
        store.write(tile, ground, level);
    }
    return store;
}

const Ground two_metres = Ground::planar(metres(2), metres(2));

Depressions depressions_of(const Elevations& z, const std::vector<Cell>& paths = {}, std::size_t most = 100) {
    const FlowForest forest = flow_forest_of(z, two_metres);
    const ElevationStore elevations = stored(z);
    const SpillStore spill = spills(elevations, spill_elevations(forest, z));
    return find_depressions({.elevations = elevations, .spill = spill, .codes = forest.codes(), .ground = two_metres}, paths, most);
}

constexpr auto two_pits = R"(
    99999999
    91598649
    92599939
    99979998)";

TEST_CASE("a depression has depth, area, volume and the pass its water goes over") {
    const Depressions found = depressions_of(drawings::terrain(two_pits));
    REQUIRE(found.deepest_first.size() == 2);
    const Depression& west = found.deepest_first[0];
    CHECK(west.depth == 6);   // it spills at 7, south-eastwards
    CHECK(west.cells == 4);
    CHECK(from_fixed_area(west.area) == 16);
    CHECK(west.volume == 4 * (6 + 2 + 5 + 2));
    CHECK(west.deepest == 9);
    CHECK(west.pass == 27);
    const Depression& east = found.deepest_first[1];
    CHECK(east.depth == 5);
    CHECK(east.pass == 31);
    CHECK(east.deepest == 22);
}

TEST_CASE("a depression on a path is marked, the others are not") {
    const Depressions found = depressions_of(drawings::terrain(two_pits), {14, 22});
    CHECK_FALSE(found.deepest_first[0].on_path);
    CHECK(found.deepest_first[1].on_path);
}

TEST_CASE("of more than are wanted the shallowest are left out and counted") {
    const Depressions found = depressions_of(drawings::terrain(two_pits), {}, 1);
    REQUIRE(found.deepest_first.size() == 1);
    CHECK(found.deepest_first[0].depth == 6);
    CHECK(found.left_out == 1);
}

TEST_CASE("the cells of a depression are found again, once more if they are asked for again") {
    const Elevations z = drawings::terrain(two_pits);
    const FlowForest forest = flow_forest_of(z, two_metres);
    const ElevationStore elevations = stored(z);
    const SpillStore spill = spills(elevations, spill_elevations(forest, z));
    DepressionCells cells({.elevations = elevations, .spill = spill, .codes = forest.codes(), .ground = two_metres});
    const Depressions found = depressions_of(z);
    for (int time = 0; time < 2; ++time) {
        std::vector<Cell> west = cells.of(found.deepest_first[0]);
        std::sort(west.begin(), west.end());
        CHECK(west == std::vector<Cell>{9, 10, 17, 18});
    }
}

TEST_CASE("all ground below the surface of a textbook flood is in one depression, once") {
    for (unsigned seed = 0; seed < 300; ++seed) {
        std::mt19937 random(seed);
        const Elevations z = drawings::random_terrain(random, 5, seed % 3 == 0 ? 0.05 : 0.0);
        const Elevations flooded = reference::heap_flood(z);
        double volume = 0.0;
        std::int64_t cells = 0;
        for (Cell cell = 0; cell < static_cast<Cell>(z.size()); ++cell) {
            if (!(flooded[cell] > z[cell])) continue;
            volume += 4.0 * (flooded[cell] - z[cell]);
            ++cells;
        }
        for (const Depression& depression : depressions_of(z, {}, 10'000).deepest_first) {
            volume -= depression.volume;
            cells -= depression.cells;
            REQUIRE(z[depression.pass] == flooded[depression.deepest]);
        }
        INFO("seed " << seed);
        CHECK(volume == 0.0);
        CHECK(cells == 0);
    }
}

}  // namespace
}  // namespace rillclock
