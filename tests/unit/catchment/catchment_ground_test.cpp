#include "rillclock/catchment/catchment_ground.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <random>
#include <vector>

#include "land_row.hpp"

namespace rillclock {
namespace {

constexpr double nan = std::numeric_limits<double>::quiet_NaN();

ElevationStore store_of(std::int64_t rows, std::int64_t columns, const std::vector<double>& z) {
    ElevationStore store(rows, columns, ElevationStore::Width::eight_bytes);
    store.write({.rows = rows, .columns = columns}, z);
    return store;
}

TEST_CASE("the slope of a plane is its own at every cell, edges included") {
    std::vector<double> z;
    for (int row = 0; row < 3; ++row)
        for (int column = 0; column < 4; ++column) z.push_back(0.3 * 2 * column - 0.4 * 5 * row);
    const ElevationStore plane = store_of(3, 4, z);
    const Ground ground = Ground::planar(metres(2), metres(5));
    for (Cell cell = 0; cell < 12; ++cell) CHECK(land_slope(plane, 1.0, ground, cell) == Approx(0.5).epsilon(1e-6));
    CHECK(land_slope(plane, 0.3048, ground, 5) == Approx(0.5 * 0.3048).epsilon(1e-6));
}

TEST_CASE("beside a void the slope is taken from the other side, and a cell alone is level") {
    const Ground ground = Ground::planar(metres(1), metres(1));
    CHECK(land_slope(store_of(1, 3, {nan, 5, 7}), 1.0, ground, 1) == Approx(2));
    CHECK(land_slope(store_of(1, 3, {nan, 5, nan}), 1.0, ground, 1) == 0.0);
}

TEST_CASE("slopes of neighbouring cells taken together are those of each, to the last bit") {
    std::mt19937 random(20261202);
    std::uniform_int_distribution<int> level(0, 9);
    for (const std::int64_t columns : {1, 2, 3, 7, 20}) {
        std::vector<double> z;
        for (std::int64_t i = 0; i < 4 * columns; ++i) z.push_back(level(random) == 0 ? nan : 0.37 * level(random));
        const ElevationStore store = store_of(4, columns, z);
        const Ground ground = Ground::planar(metres(2), metres(3));
        for (std::int64_t row = 0; row < 4; ++row) {
            for (std::int64_t from = 0; from < columns; ++from) {
                std::vector<double> slopes(static_cast<std::size_t>(columns - from));
                store.visit([&](const auto& elevations) { LandRow(elevations, 0.3048, ground, row).slopes(from, slopes); });
                for (std::int64_t column = from; column < columns; ++column) {
                    const auto cell = static_cast<Cell>(row * columns + column);
                    if (std::isnan(z[static_cast<std::size_t>(cell)])) continue;
                    CHECK(slopes[static_cast<std::size_t>(column - from)] == land_slope(store, 0.3048, ground, cell));
                }
            }
        }
    }
}

TEST_CASE("grounds put together are the ground of all their cells") {
    CatchmentGround a;
    a.add(3, CellSoil::b, 100, 0.15, 50);
    CatchmentGround b;
    b.add(0, CellSoil::b, 50, 0.25, 70);
    b.add(3, CellSoil::b, 10, 0.2, 60);
    a.add(b);
    CHECK(a.cells() == 3);
    CHECK(a.land_slope() == Approx(0.2).epsilon(1e-6));
    CHECK(a.mean_elevation_m() == Approx(60));
    const std::vector<LandShare> land = a.land().shares();
    REQUIRE(land.size() == 2);
    CHECK(land[0].kind == LandKind{.cover = 0, .soil = CellSoil::b, .slope = SlopeBand::to_30});
    CHECK(land[1].cells == 2);
    CHECK(land[1].area == 110);
}

TEST_CASE("areas by zone of rain add up over grounds, and there are none without zones") {
    CatchmentGround a;
    CHECK(a.area_by_zone().empty());
    a.add_to_zone(2, 10);
    CatchmentGround b;
    b.add_to_zone(0, 5);
    b.add_to_zone(2, 7);
    a.add(b);
    CHECK(a.area_by_zone() == std::vector<FixedArea>{5, 0, 17});
}

}  // namespace
}  // namespace rillclock
