#include "rillclock/raster/grid.hpp"

#include <catch2/catch.hpp>

#include <limits>

namespace rillclock {
namespace {

const Grid small_grid{.rows = 2, .columns = 3, .left = 100, .top = 50, .cell_width = 10, .cell_height = 5};

TEST_CASE("the far edges of a grid belong to no cell") {
    CHECK(small_grid.at({100, 50}) == RowColumn{0, 0});
    CHECK_FALSE(small_grid.at({130, 50}));
    CHECK_FALSE(small_grid.at({100, 40}));
}

TEST_CASE("the centre of a cell lies in that cell") {
    for (Cell cell = 0; cell < 6; ++cell) CHECK(small_grid.at(small_grid.centre(cell)) == small_grid.row_column(cell));
}

TEST_CASE("a place that is not a number is in no cell") {
    const double nan = std::numeric_limits<double>::quiet_NaN();
    CHECK_FALSE(small_grid.at({nan, 45}));
    CHECK_FALSE(small_grid.at({105, nan}));
}

}  // namespace
}  // namespace rillclock
