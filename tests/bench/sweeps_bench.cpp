// Times a sweep down and a sweep up of one channel each against plain walks over the whole raster that give the same numbers.

#include "bench/bench_program.hpp"
#include "bench/engine_under_test.hpp"
#include "bench/plain_sweeps.hpp"
#include "rillclock/forest/sweep.hpp"

namespace rillclock::bench {
namespace {

void expect_equal(const Raster<std::int64_t>& engine, const Raster<std::int64_t>& plain, const char* what) {
    if (engine != plain) throw std::runtime_error(std::string("the two ways give different ") + what);
}

void measure(const Words& words) {
    const TerrainKind kind = words.kind(0);
    const std::int64_t side = words.number(1);
    const std::int64_t repeats = words.number(2, 1);
    const Ground ground = Ground::planar(metres(1), metres(1));
    const FlowForest forest = engine_directions(engine_elevations(kind, side), ground, Executor());
    const FixedLength straight = ground.length(0, Direction::east);
    const FixedLength diagonal = ground.length(0, Direction::south_east);

    Raster<std::int64_t> plain;
    tell("plain_down_seconds", least_seconds_of(repeats, [&] { plain = plain_accumulation(forest.codes()); }));
    Raster<std::int64_t> swept;
    tell("sweep_down_seconds", least_seconds_of(repeats, [&] {
             std::tie(swept) = sweep_down(forest, down::Sum{[](Cell) { return std::int64_t{1}; }});
         }));
    expect_equal(swept, plain, "contributing areas");

    tell("plain_up_seconds", least_seconds_of(repeats, [&] { plain = plain_distance(forest.codes(), straight, diagonal); }));
    tell("sweep_up_seconds", least_seconds_of(repeats, [&] {
             std::tie(swept) = sweep_up(forest, up::Add{[&](Cell cell) { return is_diagonal(forest.direction(cell)) ? diagonal : straight; }});
         }));
    expect_equal(swept, plain, "distances");
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded([&] { measure(Words(count, words, "sweeps_bench fractal|quantised|integers SIDE [REPEATS]")); });
}
