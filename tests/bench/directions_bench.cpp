// Times flow directions complete (descent, flats, depressions opened) on an invented terrain.

#include "bench/bench_program.hpp"
#include "bench/engine_under_test.hpp"

namespace rillclock::bench {
namespace {

/// Share of cells that have no lower neighbour, and of those the ones that have a level one: how hard the terrain is.
void tell_difficulty(const EngineElevations& z) {
    std::int64_t pits = 0;
    std::int64_t flats = 0;
    for (std::int64_t row = 1; row + 1 < z.rows(); ++row) {
        for (std::int64_t column = 1; column + 1 < z.columns(); ++column) {
            bool has_lower = false;
            bool has_level = false;
            for (const Direction d : all_directions) {
                const auto beside = z(row + row_step(d), column + column_step(d));
                has_lower = has_lower || beside < z(row, column);
                has_level = has_level || beside == z(row, column);
            }
            pits += !has_lower && !has_level ? 1 : 0;
            flats += !has_lower && has_level ? 1 : 0;
        }
    }
    tell("share_pits", static_cast<double>(pits) / static_cast<double>(z.size()));
    tell("share_flat", static_cast<double>(flats) / static_cast<double>(z.size()));
}

void measure(const Words& words) {
    const TerrainKind kind = words.kind(0);
    const std::int64_t side = words.number(1);
    const std::int64_t repeats = words.number(2, 1);
    const EngineElevations elevations = engine_elevations(kind, side);
    tell_difficulty(elevations);
    const Ground ground = Ground::planar(metres(1), metres(1));
    for (const unsigned threads : {1U, 2U}) {
        const Executor executor(threads);
        const double seconds = least_seconds_of(repeats, [&] { (void)engine_directions(elevations, ground, executor); });
        tell("seconds_" + std::to_string(threads), seconds);
    }
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded([&] { measure(Words(count, words, "directions_bench fractal|quantised|integers SIDE [REPEATS]")); });
}
