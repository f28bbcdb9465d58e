#include "rillclock/travel/tiled_travel.hpp"

#include <catch2/catch.hpp>

#include <string>

#include "reference/drawings.hpp"
#include "reference/worked_terrain.hpp"

namespace rillclock {
namespace {

worked::Given random_given(unsigned seed) {
    std::mt19937 random(seed);
    const double void_share = seed % 3 == 0 ? 0.06 : 0.0;
    worked::Given given{.elevations = drawings::random_terrain(random, seed % 2 == 0 ? 3 : 1000, void_share)};
    given.ground = Ground::planar(metres(1 + seed % 5), metres(1 + seed % 7));
    given.surface = worked::random_surface(random, given.elevations, seed % 4 != 0);
    given.rules.channel.from_area = square_metres(seed % 8 == 0 ? 1e9 : 900);
    given.rules.slope.window = metres(std::uniform_real_distribution<double>(1, 60)(random));
    given.rules.slope.vertical_step = metres(seed % 10 == 0 ? 0.0 : std::uniform_real_distribution<double>(0.01, 5)(random));
    if (seed % 6 == 0) given.rules.slope.overland_floor = 0.0;
    given.metres_per_elevation_unit = seed % 9 == 0 ? 0.3048 : 0.01;
    return given;
}

ElevationStore stored(const Elevations& z) {
    ElevationStore store(z.rows(), z.columns(), ElevationStore::Width::four_bytes);
    store.write({.rows = z.rows(), .columns = z.columns()}, z.values());
    return store;
}

/// What differs between a tile's desk and the plain field; empty where nothing does.
std::string difference(const TiledTravel& tiled, const TileDesk& desk, const worked::Land& land) {
    for (const Local local : desk.flow.order()) {
        const Cell cell = desk.flow.cell(local);
        const std::string at = " at cell " + std::to_string(cell);
        if (desk.spill[local] != land.field.spill[cell]) return "spill elevation" + at;
        if (desk.area[local] != land.field.contributing_area[cell]) return "area" + at;
        if (desk.from_divide[local] != land.field.from_divide[cell]) return "distance from the divide" + at;
        if (desk.flow_distance[local] != land.field.flow_distance[cell]) return "flow distance" + at;
        if (tiled.kind(cell) != land.field.kind[cell]) return "kind" + at;
        if (tiled.slope(cell) != land.field.slope[cell]) return "slope" + at;
        if (desk.sheet_index[local] != land.field.sheet_index[cell]) return "sheet index" + at;
        if (!(desk.time_to_root(local) == land.field.time_to_root(cell))) return "time" + at;
    }
    return "";
}

TEST_CASE("travel over tiles gives every cell what the plain way gives it, whatever the tiles and threads") {
    for (unsigned seed = 0; seed < 600; ++seed) {
        const worked::Land land(random_given(seed));
        const Elevations& z = land.given.elevations;
        const ElevationStore store = stored(z);
        const Executor executor(1 + seed % 2, Executor::Kind::plain_threads);
        const auto side = static_cast<std::int64_t>(1 + seed % 17);
        const TiledForest forest(land.forest.codes(), TileGrid(z.rows(), z.columns(), side), executor);
        const TiledTravel tiled({.forest = forest, .ground = land.given.ground, .elevations = store,
                                 .metres_per_elevation_unit = land.given.metres_per_elevation_unit,
                                 .surface = land.given.surface},
                                land.given.rules, executor);
        INFO("seed " << seed << ", tiles of " << side);
        TileDesk desk;
        for (Tile tile = 0; tile < forest.tiles().count(); ++tile) {
            tiled.read_tile(tile, desk);
            REQUIRE(difference(tiled, desk, land) == "");
        }
    }
}

TEST_CASE("the roots of a tiled forest are those of the plain one, with all that drains to them") {
    const worked::Land land(random_given(7));
    const ElevationStore store = stored(land.given.elevations);
    const Executor executor(2, Executor::Kind::plain_threads);
    const TiledForest forest(land.forest.codes(), TileGrid(store.rows(), store.columns(), 8), executor);
    const TiledTravel tiled({.forest = forest, .ground = land.given.ground, .elevations = store, .surface = land.given.surface},
                            land.given.rules, executor);
    std::size_t roots = 0;
    for (const Cell cell : land.forest.order()) roots += land.forest.is_root(cell) ? 1U : 0U;
    REQUIRE(tiled.roots().size() == roots);
    for (const RootArea& root : tiled.roots()) {
        CHECK(land.forest.is_root(root.cell));
        CHECK(root.area == land.field.contributing_area[root.cell]);
    }
}

}  // namespace
}  // namespace rillclock
