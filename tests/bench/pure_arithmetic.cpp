// How much a second thread gains where nothing but arithmetic is done: no memory, no branches, no waiting. What the
// machine cannot give here, no program can.

#include "bench/bench_program.hpp"

namespace rillclock::bench {
namespace {

constexpr std::size_t pieces = 256;
constexpr int steps_a_piece = 2'000'000;

/// A chain of multiplications and additions, each waiting for the one before.
std::uint64_t chain(std::uint64_t value) {
    for (int i = 0; i < steps_a_piece; ++i) value = value * 6364136223846793005U + 1442695040888963407U;
    return value;
}

double seconds_on(unsigned threads, std::int64_t repeats, std::vector<std::uint64_t>& results) {
    const Executor executor(threads);
    return least_seconds_of(repeats, [&] {
        executor.for_each(pieces, [&](std::size_t piece) { results[piece] = chain(results[piece] + piece); });
    });
}

void measure(const Words& words) {
    const std::int64_t repeats = words.number(0, 2);
    std::vector<std::uint64_t> results(pieces);
    const double one = seconds_on(1, repeats, results);
    const double two = seconds_on(2, repeats, results);
    std::uint64_t all = 0;
    for (const std::uint64_t result : results) all ^= result;
    tell("seconds_1", one);
    tell("seconds_2", two);
    tell("gain", one / two);
    tell("check", static_cast<double>(all >> 48U));  // so that the compiler keeps the chains
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded([&] { measure(Words(count, words, "pure_arithmetic [REPEATS]")); });
}
