#include "rillclock/travel/tiled_travel.hpp"

#include <catch2/catch.hpp>

#include <optional>
#include <string>
#include <utility>

#include "reference/drawings.hpp"
#include "reference/random_edits.hpp"
#include "reference/tiled_travel_check.hpp"
#include "rillclock/terrain/terrain_edits.hpp"

namespace rillclock {
namespace {

/// Rules and ground that differ from seed to seed; the terrain is that of the seed where none is stated.
worked::Given seeded_given(unsigned seed, std::optional<Elevations> z = {}) {
    std::mt19937 random(seed);
    const double void_share = seed % 3 == 0 ? 0.06 : 0.0;
    worked::Given given{.elevations = z ? *std::move(z) : drawings::random_terrain(random, seed % 2 == 0 ? 3 : 1000, void_share)};
    given.ground = worked::seeded_ground(seed, given.elevations.rows());
    given.surface = worked::random_surface(random, given.elevations, seed % 4 != 0);
    given.rules.channel.from_area = square_metres(seed % 8 == 0 ? 1e9 : 900);
    given.rules.slope.window = metres(std::uniform_real_distribution<double>(1, 60)(random));
    given.rules.slope.vertical_step = metres(seed % 10 == 0 ? 0.0 : std::uniform_real_distribution<double>(0.01, 5)(random));
    if (seed % 6 == 0) given.rules.slope.overland_floor = 0.0;
    given.metres_per_elevation_unit = seed % 9 == 0 ? 0.3048 : 0.01;
    return given;
}

TEST_CASE("travel over tiles gives every cell what the plain way gives it, whatever the tiles and threads") {
    for (unsigned seed = 0; seed < 600; ++seed) {
        const worked::TileManner manner = worked::seeded_manner(seed, 17);
        INFO("seed " << seed << ", tiles of " << manner.side);
        REQUIRE(worked::tiled_difference(worked::Land(seeded_given(seed)), manner) == "");
    }
}

/// What is stated of a terrain with all that is mapped over it: its flow, its beds, its mapped channels.
worked::Given edited_given(unsigned seed, const edits::Mapped& mapped) {
    ElevationStore store = edits::stored(mapped.z);
    const TerrainEdits placed = place_edits(mapped.shapes, edits::grid_of(mapped.z), store, 0.5);
    worked::Given given = seeded_given(seed, mapped.z);
    given.codes = edited_flow(store, placed, [&](const ElevationStore& z) {
        Elevations plain(z.rows(), z.columns());
        z.read({.rows = z.rows(), .columns = z.columns()}, plain.values());
        return flow_forest_of(plain, given.ground).codes();
    }).codes;
    (void)lower_to_beds(store, placed.lines);
    store.read({.rows = store.rows(), .columns = store.columns()}, given.elevations.values());
    given.mapped_channels = placed.lines.cells();
    return given;
}

TEST_CASE("travel with mapped channels, beds, barriers and kept water is the same over tiles as in the plain way") {
    std::size_t channel_cells = 0;
    for (unsigned seed = 0; seed < 600; ++seed) {
        const edits::AnyEdits any(seed);
        const worked::TileManner manner = worked::seeded_manner(seed, 13);
        const auto fails = [&](const edits::Mapped& mapped) {
            return worked::tiled_difference(worked::Land(edited_given(seed, mapped)), manner) != "";
        };
        const worked::Land land(edited_given(seed, any));
        const std::string difference = worked::tiled_difference(land, manner);
        if (!difference.empty()) {
            FAIL(difference << ", seed " << seed << ", tiles of " << manner.side << ", shrunk to\n" << edits::smallest_failing(any, fails));
        }
        for (const Cell cell : land.given.mapped_channels) REQUIRE(land.field.kind[cell] == GroundKind::channel);
        channel_cells += land.given.mapped_channels.size();
    }
    CHECK(channel_cells > 10'000);
}

TEST_CASE("the roots of a tiled forest are those of the plain one, with all that drains to them") {
    const worked::Land land(seeded_given(7));
    const ElevationStore store = edits::stored(land.given.elevations);
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
