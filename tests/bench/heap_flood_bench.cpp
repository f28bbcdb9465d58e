// Times the textbook heap flood on an invented terrain.

#include "bench/bench_program.hpp"
#include "bench/heap_flood.hpp"

namespace rillclock::bench {
namespace {

void measure(const Words& words) {
    const TerrainKind kind = words.kind(0);
    const std::int64_t side = words.number(1);
    const Raster<float> elevations = terrain_raster(TerrainGenerator(kind), side, side, Executor());
    Raster<float> filled;
    tell("seconds", least_seconds_of(words.number(2, 1), [&] { filled = heap_flooded(elevations); }));
    std::int64_t raised = 0;
    for (std::size_t i = 0; i < filled.values().size(); ++i)
        raised += filled.values()[i] > elevations.values()[i] ? 1 : 0;
    tell("share_raised", static_cast<double>(raised) / static_cast<double>(filled.size()));
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded([&] { measure(Words(count, words, "heap_flood_bench fractal|quantised|integers SIDE [REPEATS]")); });
}
