#include "rillclock/raster/ground.hpp"

#include <catch2/catch.hpp>

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

}  // namespace
}  // namespace rillclock
