// Times the sweeps over tiles, on two threads, against plain walks over the whole raster that give the same numbers:
// one channel by itself each way, and four in one pass, since channels share most of the work.

#include "bench/bench_program.hpp"
#include "bench/engine_under_test.hpp"
#include "bench/plain_sweeps.hpp"
#include "rillclock/forest/tile_sweep.hpp"

namespace rillclock::bench {
namespace {

using Values = Raster<std::int64_t>;

struct Desk {
    TileFlow flow;
    std::vector<std::int64_t> area;
    std::vector<std::int64_t> distance;
    std::vector<std::int64_t> second_area;
    std::vector<std::int64_t> second_distance;
};

void gather(const Desk& desk, const std::vector<std::int64_t>& field, Values& result) {
    const Window& window = desk.flow.window();
    auto from = field.begin();
    for (std::int64_t row = window.row; row < window.row + window.rows; ++row, from += window.columns) {
        std::copy_n(from, window.columns, result.row(row).begin() + window.column);
    }
}

struct Bench {
    const TiledForest& forest;
    const Executor& executor;
    Workspaces<Desk> desks;

    template <class ChannelOf>
    void sweep_down_into(Values& result, ChannelOf channel_of) {
        DownBorders<std::int64_t> borders(forest);
        for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
            collect_down(tile, desk.flow, borders.part(channel_of(desk.flow), desk.area));
        });
        borders.template solve<decltype(channel_of(std::declval<const TileFlow&>()))>();
        for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
            fill_down(tile, desk.flow, borders.part(channel_of(desk.flow), desk.area));
            gather(desk, desk.area, result);
        });
    }

    template <class ChannelOf>
    void sweep_up_into(Values& result, ChannelOf channel_of) {
        UpBorders<std::int64_t> borders(forest);
        for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
            collect_up(tile, desk.flow, borders.part(channel_of(desk.flow), desk.distance));
        });
        borders.template solve<decltype(channel_of(std::declval<const TileFlow&>()))>();
        for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
            fill_up(tile, desk.flow, borders.part(channel_of(desk.flow), desk.distance));
            gather(desk, desk.distance, result);
        });
    }

    /// Two channels each way: every tile is read once before the exits are solved and once after.
    template <class DownOf, class UpOf>
    void four_sweeps_into(Values& a, Values& b, Values& c, Values& d, DownOf down_of, UpOf up_of) {
        DownBorders<std::int64_t> down_a(forest), down_c(forest);
        UpBorders<std::int64_t> up_b(forest), up_d(forest);
        for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
            collect_down(tile, desk.flow, down_a.part(down_of(desk.flow), desk.area), down_c.part(down_of(desk.flow), desk.second_area));
            collect_up(tile, desk.flow, up_b.part(up_of(desk.flow), desk.distance), up_d.part(up_of(desk.flow), desk.second_distance));
        });
        down_a.template solve<decltype(down_of(std::declval<const TileFlow&>()))>();
        down_c.template solve<decltype(down_of(std::declval<const TileFlow&>()))>();
        up_b.template solve<decltype(up_of(std::declval<const TileFlow&>()))>();
        up_d.template solve<decltype(up_of(std::declval<const TileFlow&>()))>();
        for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) {
            fill_down(tile, desk.flow, down_a.part(down_of(desk.flow), desk.area), down_c.part(down_of(desk.flow), desk.second_area));
            fill_up(tile, desk.flow, up_b.part(up_of(desk.flow), desk.distance), up_d.part(up_of(desk.flow), desk.second_distance));
            gather(desk, desk.area, a);
            gather(desk, desk.distance, b);
            gather(desk, desk.second_area, c);
            gather(desk, desk.second_distance, d);
        });
    }
};

void expect_equal(const Values& swept, const Values& plain, const char* what) {
    if (swept != plain) throw std::runtime_error(std::string("the two ways give different ") + what);
}

auto one_a_cell(const TileFlow&) {
    return down::Sum{[](Local) { return std::int64_t{1}; }};
}

/// Lengths of steps, as the plain walk takes them.
struct Lengths {
    FixedLength straight;
    FixedLength diagonal;
    auto operator()(const TileFlow& flow) const {
        return up::Add{[this, &flow](Local cell) { return flow.code(cell) % 2 == 1 ? diagonal : straight; }};
    }
};

void measure(const Words& words) {
    const std::int64_t side = words.number(1);
    const std::int64_t repeats = words.number(2, 1);
    const Executor executor(2);
    const Raster<FlowCode> codes = engine_directions(
        terrain_raster(TerrainGenerator(words.kind(0)), side, side, executor), bench_ground(), executor);
    const Lengths lengths{bench_ground().length(0, Direction::east), bench_ground().length(0, Direction::south_east)};

    Values areas;
    Values distances;
    tell("plain_down_seconds", least_seconds_of(repeats, [&] { areas = plain_accumulation(codes); }));
    tell("plain_up_seconds",
         least_seconds_of(repeats, [&] { distances = plain_distance(codes, lengths.straight, lengths.diagonal); }));

    const TileGrid tiles(side, side);
    tell("forest_seconds", least_seconds_of(repeats, [&] { (void)TiledForest(codes, tiles, executor); }));
    const TiledForest forest(codes, tiles, executor);
    Bench bench{.forest = forest, .executor = executor, .desks = {}};
    Values a(side, side), b(side, side), c(side, side), d(side, side);
    tell("sweep_down_seconds", least_seconds_of(repeats, [&] { bench.sweep_down_into(a, one_a_cell); }));
    expect_equal(a, areas, "contributing areas");
    tell("sweep_up_seconds", least_seconds_of(repeats, [&] { bench.sweep_up_into(b, lengths); }));
    expect_equal(b, distances, "distances");
    tell("sweep_four_seconds", least_seconds_of(repeats, [&] { bench.four_sweeps_into(a, b, c, d, one_a_cell, lengths); }));
    expect_equal(c, areas, "contributing areas");
    expect_equal(d, distances, "distances");
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded([&] { measure(Words(count, words, "sweeps_bench fractal|quantised|integers SIDE [REPEATS]")); });
}
