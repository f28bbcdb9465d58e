#include "rillclock/terrain/tiled_directions.hpp"

#include <catch2/catch.hpp>

#include "reference/drawings.hpp"
#include "rillclock/terrain/flow_directions.hpp"

namespace rillclock {
namespace {

constexpr double missing = std::numeric_limits<double>::quiet_NaN();

/// Elevations of one of several kinds: integers with few levels, wide plains with sparse steps, real numbers.
Elevations any_terrain(std::mt19937& random, unsigned kind) {
    std::uniform_int_distribution<int> size(1, 70);
    std::uniform_int_distribution<int> level(0, kind % 4 == 0 ? 1 : 3);
    std::uniform_real_distribution<double> real(-1.0, 1.0);
    std::bernoulli_distribution is_void(kind % 3 == 0 ? 0.0 : kind % 3 == 1 ? 0.02 : 0.3);
    std::bernoulli_distribution is_step(0.05);
    Elevations z(size(random), size(random));
    for (double& value : z.values()) {
        value = kind % 4 == 3 ? real(random) : kind % 4 == 2 && !is_step(random) ? 1 : level(random);
        if (is_void(random)) value = missing;
    }
    if (std::isnan(z(0, 0))) z(0, 0) = 1;
    return z;
}

Raster<float> as_floats(const Elevations& z) {
    Raster<float> floats(z.rows(), z.columns());
    for (std::size_t i = 0; i < z.values().size(); ++i) floats.values()[i] = static_cast<float>(z.values()[i]);
    return floats;
}

Elevations as_doubles(const Raster<float>& z) {
    Elevations doubles(z.rows(), z.columns());
    for (std::size_t i = 0; i < z.values().size(); ++i) doubles.values()[i] = z.values()[i];
    return doubles;
}

/// Ground whose rows become shorter to the north, as on a geographic grid.
Ground narrowing_ground(std::int64_t rows) {
    std::vector<GroundRow> table;
    for (std::int64_t row = 0; row < rows; ++row) {
        const double width = 1.0 + 0.02 * static_cast<double>(row);
        table.push_back({.east_west = to_fixed(width),
                         .south = to_fixed(1.5),
                         .diagonal = to_fixed(std::hypot(width, 1.5)),
                         .area = to_fixed_area(width * 1.5)});
    }
    return Ground::by_row(std::move(table));
}

const Ground square = Ground::planar(metres(1), metres(1));

std::string whole(const Elevations& z, const Ground& ground = square) {
    return drawings::arrows(flow_forest_of(z, ground).codes());
}

template <class Z>
std::string tiled(const Raster<Z>& z, std::int64_t side, const Executor& executor, const Ground& ground = square) {
    return drawings::arrows(flow_codes(z, ground, TileGrid(z.rows(), z.columns(), side), executor));
}

/// Whether tiles of several sides, on one thread and on two of either kind, give the codes of the whole raster.
bool same_for_all_tiles(const Elevations& z, std::initializer_list<std::int64_t> sides) {
    const Executor alone(1);
    const Executor arena(2);
    const Executor plain(2, Executor::Kind::plain_threads);
    const std::string expected = whole(z);
    bool same = true;
    for (const std::int64_t side : sides) {
        same = same && tiled(z, side, alone) == expected;
        same = same && tiled(z, side, arena) == expected;
        same = same && tiled(z, side, plain) == expected;
    }
    return same;
}

TEST_CASE("tiles of any size on any threads give the codes of the whole raster") {
    const std::array<Executor, 3> executors = {Executor(1), Executor(2), Executor(2, Executor::Kind::plain_threads)};
    for (unsigned seed = 0; seed < 4000; ++seed) {
        std::mt19937 random(seed);
        const Elevations z = any_terrain(random, seed % 12);
        const auto side = static_cast<std::int64_t>(1 + seed % 16);
        INFO("seed " << seed << ", " << z.rows() << " x " << z.columns() << ", tiles of " << side);
        REQUIRE(tiled(z, side, executors[seed % 3]) == whole(z));
    }
}

TEST_CASE("elevations stored as floats give the codes of the same elevations stored as doubles") {
    const Executor executor(2);
    const Ground oblong = Ground::planar(metres(1.3), metres(0.7));
    for (unsigned seed = 0; seed < 500; ++seed) {
        std::mt19937 random(seed);
        const Raster<float> z = as_floats(any_terrain(random, seed % 12));
        const auto side = static_cast<std::int64_t>(1 + seed % 16);
        INFO("seed " << seed << ", " << z.rows() << " x " << z.columns() << ", tiles of " << side);
        REQUIRE(tiled(z, side, executor, oblong) == whole(as_doubles(z), oblong));
    }
}

TEST_CASE("tiles measure each row by its own ground lengths") {
    const Executor executor(2);
    for (unsigned seed = 0; seed < 500; ++seed) {
        std::mt19937 random(seed);
        const Elevations z = any_terrain(random, seed % 12);
        const Ground ground = narrowing_ground(z.rows());
        const auto side = static_cast<std::int64_t>(1 + seed % 16);
        INFO("seed " << seed << ", " << z.rows() << " x " << z.columns() << ", tiles of " << side);
        REQUIRE(tiled(z, side, executor, ground) == whole(z, ground));
    }
}

TEST_CASE("one flat over many tiles drains the same way as in one piece") {
    CHECK(same_for_all_tiles(Elevations(63, 70, 1.0), {1, 7, 16, 64, 100}));
}

/// A one-cell-wide way that winds inwards between walls, level all along; the middle is its only lower cell where
/// `with_pit`.
Elevations spiral(std::int64_t size, bool with_pit) {
    Elevations z(size, size, 9.0);
    RowColumn at{1, 0};
    std::array<RowColumn, 4> ways = {RowColumn{0, 1}, {1, 0}, {0, -1}, {-1, 0}};
    std::size_t way = 0;
    z(at.row, at.column) = 1.0;
    for (int turns = 0; turns < 2;) {
        const RowColumn next{at.row + ways[way].row, at.column + ways[way].column};
        const RowColumn after{next.row + ways[way].row, next.column + ways[way].column};
        const bool blocked = next.row < 1 || next.column < 1 || next.row > size - 2 || next.column > size - 2 ||
                             (after.row >= 0 && after.row < size && after.column >= 0 && after.column < size &&
                              z(after.row, after.column) < 9.0);
        if (blocked) {
            way = (way + 1) % 4;
            ++turns;
            continue;
        }
        turns = 0;
        at = next;
        z(at.row, at.column) = 1.0;
    }
    if (with_pit) z(at.row, at.column) = 0.0;
    return z;
}

TEST_CASE("a spiral one cell wide is followed through all its tiles, outwards and to a pit in its middle") {
    CHECK(same_for_all_tiles(spiral(61, false), {1, 5, 16, 100}));
    CHECK(same_for_all_tiles(spiral(61, true), {1, 5, 16, 100}));
}

TEST_CASE("the teeth of a comb drain along its back whichever tiles they cross") {
    Elevations z(60, 61, 5.0);
    for (std::int64_t row = 1; row < 59; ++row) {
        for (std::int64_t column = 1; column < 60; ++column) {
            if (column % 2 == 1 || row == 30) z(row, column) = 2.0;
        }
    }
    CHECK(same_for_all_tiles(z, {1, 5, 16, 100}));
}

TEST_CASE("one pit in the middle of a plain is opened across many tiles") {
    Elevations level(301, 301, 3.0);
    level(150, 150) = 1.0;
    CHECK(same_for_all_tiles(level, {16, 64}));
    Elevations bowl(301, 301);
    for (std::int64_t row = 0; row < 301; ++row) {
        for (std::int64_t column = 0; column < 301; ++column) {
            bowl(row, column) = std::hypot(static_cast<double>(row) - 150.0, static_cast<double>(column) - 149.5);
        }
    }
    CHECK(same_for_all_tiles(bowl, {16, 64}));
}

TEST_CASE("where all but one cell is void, that cell is a root") {
    Elevations z(40, 40, missing);
    z(17, 16) = 4.0;
    CHECK(same_for_all_tiles(z, {1, 8, 17, 64}));
}

TEST_CASE("a strip one cell wide is cut into tiles either way") {
    std::mt19937 random(7);
    std::uniform_int_distribution<int> level(0, 3);
    Elevations row(1, 100000);
    for (double& value : row.values()) value = level(random);
    Elevations column(100000, 1);
    std::copy(row.values().begin(), row.values().end(), column.values().begin());
    CHECK(same_for_all_tiles(row, {256}));
    CHECK(same_for_all_tiles(column, {256}));
}

}  // namespace
}  // namespace rillclock
