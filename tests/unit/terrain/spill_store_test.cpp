#include "rillclock/terrain/spill_store.hpp"

#include <catch2/catch.hpp>
#include <limits>
#include <random>

namespace rillclock {
namespace {

/// Elevations, and what lies above some of them.
struct Filled {
    ElevationStore elevations;
    std::vector<double> spill;
};

double some_height(std::mt19937& random) { return std::uniform_int_distribution(0, 5)(random) * 0.5; }

Filled random_filled(std::mt19937& random, std::int64_t rows, std::int64_t columns, ElevationStore::Width width) {
    Filled made{ElevationStore(rows, columns, width), {}};
    for (Cell cell = 0; cell < static_cast<Cell>(rows * columns); ++cell) {
        const bool is_void = random() % 10 == 0;
        const double z = is_void ? std::numeric_limits<double>::quiet_NaN() : 100.0 + some_height(random);
        made.elevations.put(cell, z);
        made.spill.push_back(random() % 3 == 0 ? z + some_height(random) : z);
    }
    return made;
}

std::vector<double> within(const Window& window, const std::vector<double>& all, std::int64_t columns) {
    std::vector<double> values;
    for (std::int64_t row = 0; row < window.rows; ++row) {
        const auto first = all.begin() + (window.row + row) * columns + window.column;
        values.insert(values.end(), first, first + window.columns);
    }
    return values;
}

std::vector<double> elevations_of(const ElevationStore& store, const Window& window) {
    std::vector<double> values(static_cast<std::size_t>(window.size()));
    store.read(window, values);
    return values;
}

void write_all(SpillStore& store, const Filled& filled, const TileGrid& tiles) {
    for (Tile tile = 0; tile < tiles.count(); ++tile) {
        const Window window = tiles.window(tile);
        store.write(tile, elevations_of(filled.elevations, window), within(window, filled.spill, tiles.columns()));
    }
}

bool same(double a, double b) { return a == b || (std::isnan(a) && std::isnan(b)); }

TEST_CASE("spill elevations come back cell by cell, tile by tile and row by row, whatever the sizes of raster and tiles") {
    for (unsigned seed = 0; seed < 200; ++seed) {
        std::mt19937 random(seed);
        const auto side_up_to = [&](std::int64_t most) { return std::uniform_int_distribution<std::int64_t>(1, most)(random); };
        const std::int64_t rows = side_up_to(40);
        const std::int64_t columns = side_up_to(300);
        const TileGrid tiles(rows, columns, side_up_to(150));
        INFO("seed " << seed << ", " << rows << " x " << columns << " cells in tiles of " << tiles.side());
        const auto width = seed % 2 == 0 ? ElevationStore::Width::four_bytes : ElevationStore::Width::eight_bytes;
        const Filled filled = random_filled(random, rows, columns, width);
        SpillStore store(filled.elevations, tiles);
        write_all(store, filled, tiles);

        for (Tile tile = 0; tile < tiles.count(); ++tile) {
            const Window window = tiles.window(tile);
            std::vector<double> spill(static_cast<std::size_t>(window.size()));
            store.read(tile, elevations_of(filled.elevations, window), spill);
            const std::vector<double> expected = within(window, filled.spill, columns);
            REQUIRE(std::equal(spill.begin(), spill.end(), expected.begin(), expected.end(), same));
        }
        std::size_t all_below = 0;
        for (std::int64_t row = 0; row < rows; ++row) {
            std::vector<Cell> below;
            for (std::int64_t column = 0; column < columns; ++column) {
                const auto cell = static_cast<Cell>(row * columns + column);
                REQUIRE(same(store[cell], filled.spill[cell]));
                const bool is_below = filled.spill[cell] > filled.elevations[cell];
                REQUIRE(store.is_below({row, column}) == is_below);
                if (is_below) below.push_back(cell);
            }
            std::vector<Cell> found;
            store.for_each_below(row, [&](Cell cell) { found.push_back(cell); });
            REQUIRE(found == below);
            all_below += below.size();
        }
        REQUIRE(store.count_below() == all_below);
        REQUIRE(store.value_bytes() == (seed % 2 == 0 ? 4 : 8));
    }
}

TEST_CASE("a tile that is written again forgets what it held") {
    const TileGrid tiles(1, 3);
    ElevationStore elevations(1, 3, ElevationStore::Width::four_bytes);
    for (Cell cell = 0; cell < 3; ++cell) elevations.put(cell, 1.0);
    SpillStore store(elevations, tiles);
    const std::vector<double> ground(3, 1.0);
    store.write(0, ground, std::vector<double>{2.0, 3.0, 1.0});
    store.write(0, ground, std::vector<double>{1.0, 1.0, 5.0});
    CHECK(store[0] == 1.0);
    CHECK(store[1] == 1.0);
    CHECK(store[2] == 5.0);
    CHECK(store.count_below() == 1);
}

}  // namespace
}  // namespace rillclock
