#include "rillclock/terrain/tiled_directions.hpp"

#include <catch2/catch.hpp>

#include "reference/drawings.hpp"
#include "reference/kept_terrains.hpp"
#include "reference/limit_terrains.hpp"
#include "reference/shrinking.hpp"
#include "reference/plain/flow_directions.hpp"
#include "reference/worked_terrain.hpp"

namespace rillclock {
namespace {

constexpr double missing = std::numeric_limits<double>::quiet_NaN();

/// Elevations of one of several kinds: integers with few levels, wide plains with sparse steps, real numbers, rough ground with a few level
/// cells here and there.
Elevations any_terrain(std::mt19937& random, unsigned kind) {
    std::uniform_int_distribution<int> size(1, 70);
    std::uniform_int_distribution<int> level(0, kind % 4 == 0 ? 1 : 3);
    std::uniform_int_distribution<int> rough(0, 40);
    std::uniform_real_distribution<double> real(-1.0, 1.0);
    std::bernoulli_distribution is_void(kind % 3 == 0 ? 0.0 : kind % 3 == 1 ? 0.02 : 0.3);
    std::bernoulli_distribution is_step(0.05);
    Elevations z(size(random), size(random));
    for (double& value : z.values()) {
        value = kind % 8 == 7 ? rough(random) : kind % 4 == 3 ? real(random) : kind % 4 == 2 && !is_step(random) ? 1 : level(random);
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

const Ground square = Ground::planar(metres(1), metres(1));

std::string whole(const Elevations& z, const Ground& ground = square) {
    return drawings::arrows(flow_forest_of(z, ground).codes());
}

template <class Z>
std::string tiled_arrows(const Raster<Z>& z, std::int64_t side, const Executor& executor, const Ground& ground = square) {
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
        same = same && tiled_arrows(z, side, alone) == expected;
        same = same && tiled_arrows(z, side, arena) == expected;
        same = same && tiled_arrows(z, side, plain) == expected;
    }
    return same;
}

TEST_CASE("tiles of any size on any threads give the codes of the whole raster") {
    const std::array<Executor, 3> executors = {Executor(1), Executor(2), Executor(2, Executor::Kind::plain_threads)};
    for (unsigned seed = 0; seed < 4000; ++seed) {
        std::mt19937 random(seed);
        const Elevations z = any_terrain(random, seed % 12);
        const auto side = static_cast<std::int64_t>(1 + seed % 16);
        const auto fails = [&](const Elevations& part) { return tiled_arrows(part, side, executors[seed % 3]) != whole(part); };
        if (fails(z)) FAIL("seed " << seed << ", tiles of " << side << ", shrunk to " << shrinking::smallest_failing(z, fails));
    }
    SUCCEED();
}

TEST_CASE("terrains that once showed a fault give the codes of the whole raster in tiles of any size") {
    for (const KeptTerrain& kept : kept_terrains) {
        INFO(kept.about);
        CHECK(same_for_all_tiles(drawings::terrain(kept.drawing), {1, 2, 3, 4, 5, 16}));
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
        REQUIRE(tiled_arrows(z, side, executor, oblong) == whole(as_doubles(z), oblong));
    }
}

TEST_CASE("tiles measure each row by its own ground lengths") {
    const Executor executor(2);
    for (unsigned seed = 0; seed < 500; ++seed) {
        std::mt19937 random(seed);
        const Elevations z = any_terrain(random, seed % 12);
        const Ground ground = worked::narrowing_ground(z.rows());
        const auto side = static_cast<std::int64_t>(1 + seed % 16);
        INFO("seed " << seed << ", " << z.rows() << " x " << z.columns() << ", tiles of " << side);
        REQUIRE(tiled_arrows(z, side, executor, ground) == whole(z, ground));
    }
}

TEST_CASE("one flat over many tiles drains the same way as in one piece") {
    CHECK(same_for_all_tiles(Elevations(63, 70, 1.0), {1, 7, 16, 64, 100}));
}

TEST_CASE("a spiral one cell wide is followed through all its tiles, outwards and to a pit in its middle") {
    CHECK(same_for_all_tiles(limits::spiral(61, false), {1, 5, 16, 100}));
    CHECK(same_for_all_tiles(limits::spiral(61, true), {1, 5, 16, 100}));
}

TEST_CASE("the teeth of a comb drain along its back whichever tiles they cross") {
    CHECK(same_for_all_tiles(limits::comb(60, 61), {1, 5, 16, 100}));
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

}  // namespace
}  // namespace rillclock
