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
    std::vector<std::int64_t> field;
};

/// One channel's sweep, its result gathered into a raster. `ChannelOf` makes the channel for the flow of a tile.
template <template <class> class Borders, class ChannelOf>
class Sweep {
public:
    Sweep(const TiledForest& forest, ChannelOf channel_of, Values& result)
        : forest_(&forest), channel_of_(channel_of), result_(&result), borders_(forest) {}

    void collect(Tile tile, Desk& desk) { borders_.collect(tile, desk.flow, channel_of_(desk.flow), desk.field); }
    void solve() { borders_.template solve<decltype(channel_of_(std::declval<const TileFlow&>()))>(); }
    void fill(Tile tile, Desk& desk) {
        borders_.fill(tile, desk.flow, channel_of_(desk.flow), desk.field);
        const Window window = forest_->tiles().window(tile);
        auto from = desk.field.begin();
        for (std::int64_t row = window.row; row < window.row + window.rows; ++row, from += window.columns) {
            std::copy_n(from, window.columns, result_->row(row).begin() + window.column);
        }
    }

private:
    const TiledForest* forest_;
    ChannelOf channel_of_;
    Values* result_;
    Borders<std::int64_t> borders_;
};

template <class ChannelOf>
auto sweep_down_into(Values& result, const TiledForest& forest, ChannelOf channel_of) {
    return Sweep<DownBorders, ChannelOf>(forest, channel_of, result);
}
template <class ChannelOf>
auto sweep_up_into(Values& result, const TiledForest& forest, ChannelOf channel_of) {
    return Sweep<UpBorders, ChannelOf>(forest, channel_of, result);
}

/// Runs sweeps together: every tile is read once before the exits are solved and once after.
template <class... Sweeps>
void run_together(const TiledForest& forest, const Executor& executor, Workspaces<Desk>& desks, Sweeps... sweeps) {
    for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) { (sweeps.collect(tile, desk), ...); });
    (sweeps.solve(), ...);
    for_each_tile(forest, executor, desks, [&](Tile tile, Desk& desk) { (sweeps.fill(tile, desk), ...); });
}

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
    Workspaces<Desk> desks;
    Values a(side, side), b(side, side), c(side, side), d(side, side);
    tell("sweep_down_seconds", least_seconds_of(repeats, [&] {
             run_together(forest, executor, desks, sweep_down_into(a, forest, one_a_cell));
         }));
    expect_equal(a, areas, "contributing areas");
    tell("sweep_up_seconds",
         least_seconds_of(repeats, [&] { run_together(forest, executor, desks, sweep_up_into(b, forest, lengths)); }));
    expect_equal(b, distances, "distances");
    tell("sweep_four_seconds", least_seconds_of(repeats, [&] {
             run_together(forest, executor, desks, sweep_down_into(a, forest, one_a_cell),
                          sweep_up_into(b, forest, lengths), sweep_down_into(c, forest, one_a_cell),
                          sweep_up_into(d, forest, lengths));
         }));
    expect_equal(c, areas, "contributing areas");
    expect_equal(d, distances, "distances");
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded([&] { measure(Words(count, words, "sweeps_bench fractal|quantised|integers SIDE [REPEATS]")); });
}
