#include "rillclock/run/memory_need.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

TEST_CASE("memory grows by the bytes of a cell, and what surrounds them is filled by two million cells") {
    CHECK(memory_need({.cells = 0}) == Approx(170e6));
    CHECK(memory_need({.cells = 5'000'000}) == Approx(430e6));           // 16 · 5e6 + 350e6
    CHECK(memory_need({.cells = 1'000'000'000}) == Approx(16.35e9));
    CHECK(memory_need({.cells = 1'000'000'000, .wide_elevations = true}) == Approx(24.35e9));
    CHECK(memory_need({.cells = 1'000'000'000, .soil_raster = true}) == Approx(17.35e9));
    CHECK(memory_need({.cells = 1'000'000'000, .results_kept = true}) == Approx(39.35e9));
}

TEST_CASE("rasters not far from square need 16 bytes a cell, strips and all; wide and narrow ones are told their strips") {
    CHECK(memory_need({.cells = 900'000'000, .rows = 30'000, .columns = 30'000}) == Approx(14.75e9));   // 16 · 9e8 + 350e6
    CHECK(strips_need(1, 1'000'000) == Approx(27.0 * 2e6));   // one row: two strips of it, and no copies, which would be less than 16 cells wide
    CHECK(strips_need(256, 100'000) == Approx(27.0 * 256 * 1e5 * (2.0 + 1.0 / 3.0)).epsilon(0.01));
    CHECK(memory_need({.cells = 25'600'000, .rows = 256, .columns = 100'000}) > 2.0e9);
    CHECK(memory_need({.cells = 25'600'000, .rows = 100'000, .columns = 256}) == Approx(759.6e6));      // 16 · 25.6e6 + 350e6
}

TEST_CASE("storms of their own add bins, shared by the cells of a subarea, and never more than one a cell") {
    const auto bins = [](std::int64_t cells, std::int64_t points) {
        const MemoryTask task{.cells = cells, .points = points};
        MemoryTask own = task;
        own.own_storms = true;
        return memory_need(own) - memory_need(task);
    };
    CHECK(bins(100'000'000, 0) == Approx(5.2e9));       // 52 a cell
    CHECK(bins(100'000'000, 100) == Approx(6.45e9));    // and 12 500 for each of 1e5, the root of 1e10
    CHECK(bins(100'000, 1000) == Approx(16e6));         // 160 a cell
}

TEST_CASE("points, their scenarios, peak flows, draws and isochrones add what each was seen to take") {
    const MemoryTask plain{.cells = 25'000'000};
    const auto added = [&](const MemoryTask& task) { return memory_need(task) - memory_need(plain); };
    CHECK(added({.cells = 25'000'000, .points = 2000}) == Approx(350e6));                            // 75 000 and 20 · 5000 each
    CHECK(added({.cells = 25'000'000, .points = 2000, .scenarios = 2}) == Approx(530e6));            // and 90 000 each
    CHECK(added({.cells = 25'000'000, .points = 100, .rain_by_duration = true}) == Approx(40.5e6));  // 17.5e6, 3e6, 400 · 5e4
    CHECK(added({.cells = 25'000'000, .points = 100, .draws = 500}) == Approx(248.7e6));             // 17.5e6, 4600 · 5e4, 24 · 5e4
    CHECK(added({.cells = 25'000'000, .isochrones = true}) == Approx(1.6e9));
    CHECK(memory_need({.cells = 1'000'000, .isochrones = true}) - memory_need({.cells = 1'000'000}) == Approx(130e6));
}

TEST_CASE("memory is lacking where the need is over the limit, and not where they are equal") {
    const MemoryTask task{.cells = 1'000'000'000};
    CHECK_FALSE(lack_of_memory(task, {16.35e9, "the machine"}).has_value());
    const auto lack = lack_of_memory(task, {8e9, "the container"});
    REQUIRE(lack.has_value());
    CHECK(*lack == "a run over 1000 million cells needs about 16.4 GB of memory, and the container allows 8 GB; cut out the part of the "
                   "elevations that is needed (gdal_translate -projwin), or run it where there is more memory");
}

}  // namespace
}  // namespace rillclock
