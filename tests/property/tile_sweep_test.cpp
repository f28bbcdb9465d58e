#include "rillclock/forest/tile_sweep.hpp"

#include <algorithm>
#include <catch2/catch.hpp>

#include "reference/drawings.hpp"
#include "reference/plain/flow_directions.hpp"
#include "reference/plain/sweeps.hpp"

namespace rillclock {
namespace {

struct Desk {
    TileFlow flow;
    std::vector<std::int64_t> whole;
    std::vector<double> real;
    std::vector<std::uint32_t> label;
};

/// Weights that differ from cell to cell, the same for the plain sweeps and the tiled ones.
std::int64_t weight(Cell cell) { return 1 + static_cast<std::int64_t>(cell) * 2654435761 % 97; }
double level(Cell cell) { return static_cast<double>(weight(cell)); }
/// A different value in every lane, the last of which reaches `most` on a way of some steps.
up::Lanes multiples(std::int64_t value) {
    up::Lanes lanes;
    for (std::size_t lane = 0; lane < up::Lanes::count; ++lane) {
        const std::int64_t times = lane + 1 == up::Lanes::count ? up::Lanes::most / 200 : static_cast<std::int64_t>(lane + 1);
        lanes.total[lane] = static_cast<std::int32_t>(std::min<std::int64_t>(value * times, up::Lanes::most));
    }
    return lanes;
}
std::uint32_t label(Cell cell) { return weight(cell) > 80 ? cell + 1 : 0; }

template <class Part>
void collect_tile(Tile tile, const TileFlow& flow, const Part& part) {
    if constexpr (requires { part.keep_below(tile); }) collect_up(tile, flow, part);
    else collect_down(tile, flow, part);
}
template <class Part>
void fill_tile(Tile tile, const TileFlow& flow, const Part& part) {
    if constexpr (requires { part.keep_below(tile); }) fill_up(tile, flow, part);
    else fill_down(tile, flow, part);
}

/// A tiled sweep with one channel made for each tile by `make(flow)`, gathered into a raster.
template <class Borders, class Value, class Make>
Raster<Value> tiled(const TiledForest& forest, const Executor& executor, Make make) {
    using Channel = decltype(make(std::declval<const TileFlow&>()));
    Workspaces<Desk> desks;
    Borders borders(forest);
    std::vector<std::vector<Value>> room(forest.tiles().count());
    for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
        collect_tile(tile, desk.flow, borders.part(make(desk.flow), room[tile]));
    });
    borders.template solve<Channel>();
    Raster<Value> gathered(forest.codes().rows(), forest.codes().columns());
    for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
        fill_tile(tile, desk.flow, std::as_const(borders).part(make(desk.flow), room[tile]));
        for (Local local = 0; local < desk.flow.size(); ++local) gathered[desk.flow.cell(local)] = room[tile][local];
    });
    return gathered;
}

/// Calls `check(plain, forest, executor)` for hundreds of terrains, cut into tiles of any size.
template <class Check>
void for_random_forests(Check check) {
    for (unsigned seed = 0; seed < 300; ++seed) {
        std::mt19937 random(seed);
        const Elevations z = drawings::random_terrain(random, seed % 2 == 0 ? 3 : 1000, seed % 3 == 0 ? 0.1 : 0.0);
        const FlowForest plain = flow_forest_of(z, Ground::planar(metres(1), metres(1)));
        const auto side = std::uniform_int_distribution<std::int64_t>(1, 16)(random);
        const Executor executor(1 + seed % 2, Executor::Kind::plain_threads);
        const TiledForest forest(plain.codes(), TileGrid(z.rows(), z.columns(), side), executor);
        INFO("seed " << seed << ", tiles of " << side);
        check(plain, forest, executor);
    }
}

/// The third stage at passed cells alone, from what the first kept there: they have the values of the whole sweep, and no other cell is touched.
template <class Value, class Make>
void require_at_passed(const TiledForest& forest, const Executor& executor, Make make, const Raster<Value>& expected) {
    using Channel = decltype(make(std::declval<const TileFlow&>()));
    constexpr Value untouched = -12345;
    Workspaces<Desk> desks;
    DownBorders<Value> borders(forest);
    std::vector<std::vector<Value>> own(forest.tiles().count()), room(forest.tiles().count());
    for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
        own[tile].resize(forest.passed_count(tile));
        collect_down(tile, desk.flow, borders.part(make(desk.flow), room[tile], std::span(own[tile])));
    });
    borders.template solve<Channel>();
    for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
        room[tile].assign(desk.flow.size(), untouched);
        fill_passed_down(tile, desk.flow.passage(), borders.part(make(desk.flow), room[tile], std::span(own[tile])));
    });
    for (Tile tile = 0; tile < forest.tiles().count(); ++tile) {
        TilePassage passage;
        passage.read(forest.codes(), forest.tiles().window(tile));
        REQUIRE(passage.cells().size() == forest.passed_count(tile));
        for (const TilePassage::Passed& passed : passage.cells()) {
            REQUIRE(room[tile][passed.cell] == expected[passage.frame().cell(passed.cell)]);
            room[tile][passed.cell] = untouched;
        }
        REQUIRE(std::count(room[tile].begin(), room[tile].end(), untouched) == static_cast<std::ptrdiff_t>(room[tile].size()));
    }
}

TEST_CASE("values of cells that other tiles' water passes come from what was kept there of the tile's own") {
    for_random_forests([](const FlowForest& plain, const TiledForest& forest, const Executor& executor) {
        const auto [sum, greatest, least] = sweep_down(plain, down::Sum{weight}, down::Max{weight}, down::Min{level});
        require_at_passed<std::int64_t>(forest, executor, [](const TileFlow& flow) {
            return down::Sum{[&](Local cell) { return weight(flow.cell(cell)); }};
        }, sum);
        require_at_passed<std::int64_t>(forest, executor, [](const TileFlow& flow) {
            return down::Max{[&](Local cell) { return weight(flow.cell(cell)); }};
        }, greatest.value);
        require_at_passed<double>(forest, executor, [](const TileFlow& flow) {
            return down::Min{[&](Local cell) { return level(flow.cell(cell)); }};
        }, least);
    });
}

TEST_CASE("values at passed cells are kept of tiles where few cells are passed, and of no others") {
    // Water runs east along one row, and along all rows of the tiles below it.
    Raster<FlowCode> codes(32, 32, flow_root);
    for (std::int64_t column = 0; column < 31; ++column) {
        codes(3, column) = flow_code(Direction::east);
        for (std::int64_t row = 16; row < 32; ++row) codes(row, column) = flow_code(Direction::east);
    }
    const TiledForest forest(codes, TileGrid(32, 32, 16), Executor(1, Executor::Kind::plain_threads));
    PassedValues<std::int64_t> values(forest);
    CHECK(values.of(0).empty());        // nothing comes in
    CHECK(values.of(1).size() == 16);   // a row of 16
    CHECK(values.is_kept(1));
    CHECK(forest.passed_count(3) == 256);
    CHECK_FALSE(values.is_kept(3));
    CHECK(values.of(3).empty());
    CHECK(values.bytes() == 16 * sizeof(std::int64_t));
    values.clear();
    CHECK(values.of(1).empty());
    CHECK_FALSE(values.is_kept(1));
    CHECK(values.bytes() == 0);
}

TEST_CASE("tiled sweeps give every cell what the plain sweeps give it, whatever the tiles and threads") {
    for_random_forests([](const FlowForest& plain, const TiledForest& forest, const Executor& executor) {
        const auto [sum, greatest, least] = sweep_down(plain, down::Sum{weight}, down::Max{weight}, down::Min{level});
        REQUIRE(tiled<DownBorders<std::int64_t>, std::int64_t>(forest, executor, [](const TileFlow& flow) {
            return down::Sum{[&](Local cell) { return weight(flow.cell(cell)); }};
        }) == sum);
        REQUIRE(tiled<DownBorders<std::int64_t>, std::int64_t>(forest, executor, [](const TileFlow& flow) {
            return down::Max{[&](Local cell) { return weight(flow.cell(cell)); }};
        }) == greatest.value);
        REQUIRE(tiled<DownBorders<double>, double>(forest, executor, [](const TileFlow& flow) {
            return down::Min{[&](Local cell) { return level(flow.cell(cell)); }};
        }) == least);

        const auto [way, highest, first] = sweep_up(plain, up::Add{weight}, up::Max{level}, up::First{label});
        REQUIRE(tiled<UpBorders<std::int64_t>, std::int64_t>(forest, executor, [](const TileFlow& flow) {
            return up::Add{[&](Local cell) { return weight(flow.cell(cell)); }};
        }) == way);
        const Raster<up::Lanes> lanes = tiled<UpBorders<up::Lanes>, up::Lanes>(forest, executor, [](const TileFlow& flow) {
            return up::AddLanes{[&](Local cell) { return multiples(weight(flow.cell(cell))); }};
        });
        for (Cell cell = 0; cell < way.size(); ++cell) REQUIRE(lanes[cell].total == multiples(way[cell]).total);
        REQUIRE(tiled<UpBorders<double>, double>(forest, executor, [](const TileFlow& flow) {
            return up::Max{[&](Local cell) { return level(flow.cell(cell)); }};
        }) == highest);
        REQUIRE(tiled<UpBorders<std::uint32_t>, std::uint32_t>(forest, executor, [](const TileFlow& flow) {
            return up::First{[&](Local cell) { return label(flow.cell(cell)); }};
        }) == first);
    });
}

}  // namespace
}  // namespace rillclock
