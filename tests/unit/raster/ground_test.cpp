#include "rillclock/raster/ground.hpp"

#include <catch2/catch.hpp>

#include <cmath>

namespace rillclock {
namespace {

TEST_CASE("on a plane the diagonal step is the hypotenuse of a rectangular cell") {
    const Ground ground = Ground::planar(metres(3), metres(4));
    CHECK(ground.length(7, Direction::east) == to_fixed(3));
    CHECK(ground.length(7, Direction::north) == to_fixed(4));
    CHECK(ground.length(0, Direction::south_west) == to_fixed(5));
    CHECK(ground.cell_area(7) == to_fixed_area(12));
}

TEST_CASE("a step north is the step south of the row before") {
    const Ground ground = Ground::by_row({{.east_west = 10, .south = 20, .diagonal = 30, .area = 1},
                                          {.east_west = 11, .south = 21, .diagonal = 31, .area = 2}});
    CHECK(ground.length(1, Direction::north) == 20);
    CHECK(ground.length(1, Direction::north_east) == 30);
    CHECK(ground.length(0, Direction::south) == 20);
    CHECK(ground.length(1, Direction::west) == 11);
}

TEST_CASE("the ground between two cells is the same both ways") {
    const Ground ground = Ground::by_row({{.east_west = 10, .south = 20, .diagonal = 30, .area = 1},
                                          {.east_west = 11, .south = 21, .diagonal = 31, .area = 2}});
    for (const Direction d : all_directions) {
        const std::int64_t from = row_step(d) < 0 ? 1 : 0;
        CHECK(ground.length(from, d) == ground.length(from + row_step(d), opposite(d)));
    }
}

TEST_CASE("weighted steps are shorter alike in every direction, and areas and cells stay") {
    const Ground ground = Ground::planar(metres(3), metres(4)).with_steps_weighted(0.5);
    CHECK(from_fixed(ground.length(0, Direction::east)) == 1.5);
    CHECK(from_fixed(ground.length(0, Direction::south)) == 2.0);
    CHECK(from_fixed(ground.length(0, Direction::south_east)) == 2.5);
    CHECK(from_fixed_area(ground.cell_area(0)) == 12.0);
    CHECK(ground.step_weight() == 0.5);
    CHECK(Ground::planar(metres(3), metres(4)).step_weight() == 1.0);
}

TEST_CASE("the unbiased weight is the published pair of steps on square cells") {
    CHECK(unbiased_step_weight == 0.96194);
    CHECK(unbiased_step_weight * std::sqrt(2.0) == Approx(1.36039).epsilon(1e-5));  // Butt and Maragos 1998, from memory
}

}  // namespace
}  // namespace rillclock
