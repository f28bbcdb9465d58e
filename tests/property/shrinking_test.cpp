#include "reference/shrinking.hpp"

#include <catch2/catch.hpp>

#include <random>

#include "reference/drawings.hpp"

namespace rillclock {
namespace {

/// Whether some 3 has a 1 to its east.
bool has_step(const Elevations& z) {
    for (std::int64_t row = 0; row < z.rows(); ++row) {
        for (std::int64_t column = 1; column < z.columns(); ++column) {
            if (z(row, column - 1) == 3 && z(row, column) == 1) return true;
        }
    }
    return false;
}

TEST_CASE("a terrain that fails is shrunk to the part that fails, and drawn so that it can be read again") {
    std::mt19937 random(11);
    Elevations z = drawings::random_terrain(random, 3, 0.1);
    while (!has_step(z)) z = drawings::random_terrain(random, 3, 0.1);
    CHECK(shrinking::smallest_failing(z, has_step) == "1 x 2:\n31\n");
}

TEST_CASE("what else stands on a terrain that fails becomes as low as it may be") {
    const auto fails = [](const Elevations& z) { return z.rows() == 2 && z.columns() == 2 && z(1, 1) > z(0, 0); };
    CHECK(shrinking::smallest_failing(drawings::terrain("37\n59"), fails) == "2 x 2:\n00\n01\n");
}

TEST_CASE("voids and elevations that are no digits are drawn too") {
    CHECK(shrinking::drawing(drawings::terrain("1#3")) == "1#3\n");
    Elevations z(1, 2, -0.5);
    CHECK(shrinking::drawing(z) == "-0.500000 -0.500000 \n");
}

}  // namespace
}  // namespace rillclock
