#include "rillclock/terrain/terrain_edits.hpp"

#include <catch2/catch.hpp>

#include <algorithm>
#include <set>

#include "reference/random_edits.hpp"
#include "reference/plain/flow_directions.hpp"
#include "reference/worked_terrain.hpp"
#include "rillclock/terrain/tiled_directions.hpp"

namespace rillclock {
namespace {

using edits::AnyEdits;
using edits::grid_of;
using edits::Mapped;
using edits::stored;

/// Both builders over the ground of a seed (`worked::seeded_ground`): square, rectangular or geographic cells.
FindCodes plain_codes(unsigned seed) {
    return [seed](const ElevationStore& store) {
        Elevations z(store.rows(), store.columns());
        for (Cell cell = 0; cell < static_cast<Cell>(z.size()); ++cell) z[cell] = store[cell];
        return flow_forest_of(z, worked::seeded_ground(seed, z.rows())).codes();
    };
}

FindCodes tiled_codes(unsigned seed, std::int64_t side, const Executor& executor) {
    return [seed, side, &executor](const ElevationStore& store) {
        const TileGrid tiles(store.rows(), store.columns(), side);
        const Ground ground = worked::seeded_ground(seed, store.rows());
        return store.visit([&](const auto& z) { return flow_codes(z, ground, tiles, executor); });
    };
}

struct Edited {
    Edited(const Mapped& any, unsigned seed)
        : z(stored(any.z)), edits(place_edits(any.shapes, grid_of(any.z), z, 0.5)), flow(edited_flow(z, edits, plain_codes(seed))),
          forest(flow.codes) {}   // throws where there is a circle

    [[nodiscard]] bool is_barrier(Cell cell) const { return std::binary_search(edits.barrier.begin(), edits.barrier.end(), cell); }

    ElevationStore z;
    TerrainEdits edits;
    EditedFlow flow;
    FlowForest forest;
};

constexpr unsigned most_seeds = 3000;

template <class Law>
void for_all_edits(Law law) {
    for (unsigned seed = 0; seed < most_seeds; ++seed) {
        const AnyEdits any(seed);
        INFO("seed " << seed << ", " << any.z.rows() << " x " << any.z.columns());
        law(Edited(any, seed), any);
    }
}

/// Whether tiles give another flow than the plain way.
bool tiles_differ(const Mapped& mapped, unsigned seed, ElevationStore::Width width, const FindCodes& find_codes) {
    const Edited plain(mapped, seed);
    ElevationStore z = stored(mapped.z, width);
    return edited_flow(z, plain.edits, find_codes).codes != plain.flow.codes;
}

TEST_CASE("an edited terrain flows the same way whatever the tiles, the threads and the width of elevations, on cells of any shape") {
    const std::array<Executor, 2> executors = {Executor(1), Executor(2)};
    for (unsigned seed = 0; seed < most_seeds; ++seed) {
        const AnyEdits any(seed);
        const auto side = static_cast<std::int64_t>(1 + seed % 16);
        const auto width = seed % 2 == 0 ? ElevationStore::Width::four_bytes : ElevationStore::Width::eight_bytes;
        const FindCodes find_codes = tiled_codes(seed, side, executors[seed % 2]);
        const auto fails = [&](const Mapped& mapped) { return tiles_differ(mapped, seed, width, find_codes); };
        if (fails(any)) FAIL("seed " << seed << ", tiles of " << side << ", shrunk to\n" << edits::smallest_failing(any, fails));
    }
    SUCCEED();
}

TEST_CASE("every cell of a line drains to the next cell of its line") {
    std::size_t links = 0;
    for_all_edits([&](const Edited& edited, const AnyEdits&) {
        for (const Cell cell : edited.edits.lines.cells()) {
            const Cell next = edited.edits.lines.next(cell);
            if (next == no_cell) continue;
            REQUIRE(edited.forest.downstream(cell) == next);
            ++links;
        }
    });
    CHECK(links > 10 * most_seeds);
}

/// A channel alone on the ground is followed from its first cell to its last, cell by cell.
TEST_CASE("one channel is followed along the whole of its way") {
    for (unsigned seed = 0; seed < most_seeds; ++seed) {
        AnyEdits any(seed);
        any.shapes = {.channels = {any.line()}, .crossings = {}, .barriers = {}, .kept_places = {}, .kept_areas = {}};
        const bool has_voids = std::any_of(any.z.values().begin(), any.z.values().end(), [](double z) { return std::isnan(z); });
        const auto ways = cells_crossed(any.shapes.channels[0], grid_of(any.z));
        if (has_voids || ways.size() != 1) continue;
        const Edited edited(any, seed);
        Way way = shortened(ways[0], any.z.columns());
        if (edited.edits.channels.turned > 0) {
            Way back = ways[0];
            std::reverse(back.begin(), back.end());
            way = shortened(back, any.z.columns());
        }
        INFO("seed " << seed);
        for (std::size_t i = 1; i < way.size(); ++i) REQUIRE(edited.forest.downstream(way[i - 1]) == way[i]);
    }
}

TEST_CASE("no water enters a barrier") {
    std::size_t barriers = 0;
    for_all_edits([&](const Edited& edited, const AnyEdits&) {
        for (const Cell cell : edited.forest.order()) {
            const Cell below = edited.forest.downstream(cell);
            if (below == no_cell || !edited.is_barrier(below)) continue;
            REQUIRE(edited.is_barrier(cell));   // rain on the barrier itself may run along it
        }
        barriers += edited.edits.barrier.size();
    });
    CHECK(barriers > most_seeds);
}

TEST_CASE("kept water stays, and water stays or leaves nowhere else but where it is told") {
    std::size_t kept = 0;
    for_all_edits([&](const Edited& edited, const AnyEdits& any) {
        std::set<Cell> roots(edited.edits.kept.begin(), edited.edits.kept.end());
        for (const Cell cell : roots) REQUIRE(edited.forest.is_root(cell));
        kept += roots.size();
        roots.insert(edited.flow.ends_without_way.begin(), edited.flow.ends_without_way.end());
        roots.insert(edited.flow.enclosed.begin(), edited.flow.enclosed.end());
        for (const Cell cell : edited.forest.order()) {
            if (!edited.forest.is_root(cell)) continue;
            const bool told = roots.contains(cell) || is_border(any.z, {cell / any.z.columns(), cell % any.z.columns()});
            REQUIRE(told);
        }
    });
    CHECK(kept > most_seeds);
}

TEST_CASE("elevations are as they were once the flow is found") {
    for_all_edits([](const Edited& edited, const AnyEdits& any) {
        for (Cell cell = 0; cell < static_cast<Cell>(any.z.size()); ++cell) {
            REQUIRE((edited.z[cell] == any.z[cell] || std::isnan(any.z[cell])));
        }
    });
}

TEST_CASE("beds never rise along a line, never lie above the ground") {
    for_all_edits([](Edited edited, const AnyEdits& any) {
        (void)lower_to_beds(edited.z, edited.edits.lines);
        for (const Cell cell : edited.edits.lines.cells()) {
            REQUIRE(edited.z[cell] <= any.z[cell]);
            const Cell next = edited.edits.lines.next(cell);
            if (!edited.edits.lines.contains(next)) continue;
            REQUIRE(edited.z[next] <= edited.z[cell]);
        }
    });
}

TEST_CASE("without edits the flow is that of the ground") {
    for (unsigned seed = 0; seed < 200; ++seed) {
        const AnyEdits any(seed);
        ElevationStore z = stored(any.z);
        CHECK(edited_flow(z, TerrainEdits{}, plain_codes(seed)).codes == flow_forest_of(any.z, worked::seeded_ground(seed, any.z.rows())).codes());
    }
}

}  // namespace
}  // namespace rillclock
