// Times flow directions complete (descent, flats, depressions opened) on an invented terrain, on one thread and on two.

#include "bench/bench_program.hpp"
#include "bench/engine_under_test.hpp"

namespace rillclock::bench {
namespace {

struct Surroundings {
    bool has_lower = false;
    bool has_level = false;
};

Surroundings surroundings_of(const Raster<float>& z, std::int64_t row, std::int64_t column) {
    Surroundings found;
    for (const Direction d : all_directions) {
        const float beside = z(row + row_step(d), column + column_step(d));
        found.has_lower = found.has_lower || beside < z(row, column);
        found.has_level = found.has_level || beside == z(row, column);
    }
    return found;
}

/// How hard the terrain is: shares of the cells without a lower neighbour, by whether they have a level one.
void tell_difficulty(const Raster<float>& z) {
    std::int64_t pits = 0;
    std::int64_t flats = 0;
    for (std::int64_t row = 1; row + 1 < z.rows(); ++row) {
        for (std::int64_t column = 1; column + 1 < z.columns(); ++column) {
            const Surroundings around = surroundings_of(z, row, column);
            if (around.has_lower) continue;
            ++(around.has_level ? flats : pits);
        }
    }
    tell("share_pits", static_cast<double>(pits) / static_cast<double>(z.size()));
    tell("share_flat", static_cast<double>(flats) / static_cast<double>(z.size()));
}

void measure(const Words& words) {
    const TerrainKind kind = words.kind(0);
    const std::int64_t side = words.number(1);
    const Raster<float> elevations = terrain_raster(TerrainGenerator(kind), side, side, Executor());
    tell_difficulty(elevations);
    for (const unsigned threads : {1U, 2U}) {
        const Executor executor(threads);
        tell("seconds_" + std::to_string(threads), least_seconds_of(words.number(2, 1), [&] {
                 (void)engine_directions(elevations, bench_ground(), executor);
             }));
    }
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded([&] { measure(Words(count, words, "directions_bench fractal|quantised|integers SIDE [REPEATS]")); });
}
