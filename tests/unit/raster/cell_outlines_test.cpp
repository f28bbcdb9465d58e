#include "rillclock/raster/cell_outlines.hpp"

#include <algorithm>
#include <catch2/catch.hpp>

#include <cmath>
#include <random>
#include <set>
#include <string>
#include <string_view>

namespace rillclock {
namespace {

/// `#` a cell of the set; all rows of one length.
struct DrawnSet {
    explicit DrawnSet(const std::vector<std::string_view>& rows)
        : grid{.rows = static_cast<std::int64_t>(rows.size()), .columns = static_cast<std::int64_t>(rows[0].size()),
               .left = 0.0, .top = static_cast<double>(rows.size())} {
        for (std::int64_t row = 0; row < grid.rows; ++row) {
            for (std::int64_t column = 0; column < grid.columns; ++column) {
                if (rows[static_cast<std::size_t>(row)][static_cast<std::size_t>(column)] == '#') cells.push_back(grid.cell({row, column}));
            }
        }
    }
    Grid grid;
    std::vector<Cell> cells;
};

std::string text(const Line& ring) {
    std::string text;
    for (const Place& corner : ring) text += (text.empty() ? "" : " ") + std::to_string(std::lround(corner.x)) + "," + std::to_string(std::lround(corner.y));
    return text;
}

/// Signed area of a ring: positive counterclockwise.
double ring_area(const Line& ring) {
    double twice = 0;
    for (std::size_t i = 1; i < ring.size(); ++i) twice += ring[i - 1].x * ring[i].y - ring[i].x * ring[i - 1].y;
    return twice / 2;
}

std::vector<Polygon> outlines(const std::vector<std::string_view>& rows) {
    const DrawnSet set(rows);
    return cell_outlines(set.cells, set.grid);
}

TEST_CASE("one cell has a square of four corners, counterclockwise from the south-west") {
    const auto polygons = outlines({"...", ".#.", "..."});
    REQUIRE(polygons.size() == 1);
    REQUIRE(polygons[0].rings.size() == 1);
    CHECK(text(polygons[0].rings[0]) == "1,1 2,1 2,2 1,2 1,1");
}

TEST_CASE("an outline has corners only where it turns") {
    CHECK(text(outlines({"###", "#..", "#.."})[0].rings[0]) == "0,0 1,0 1,2 3,2 3,3 0,3 0,0");
}

TEST_CASE("a hole is a second ring, clockwise") {
    const auto polygons = outlines({"####", "#..#", "####"});
    REQUIRE(polygons.size() == 1);
    REQUIRE(polygons[0].rings.size() == 2);
    CHECK(ring_area(polygons[0].rings[0]) == 12.0);
    CHECK(ring_area(polygons[0].rings[1]) == -2.0);
}

TEST_CASE("cells that touch at a corner alone are polygons of their own") {
    const auto polygons = outlines({"#.", ".#"});
    REQUIRE(polygons.size() == 2);
    CHECK(text(polygons[0].rings[0]) == "0,1 1,1 1,2 0,2 0,1");
    CHECK(text(polygons[1].rings[0]) == "1,0 2,0 2,1 1,1 1,0");
}

TEST_CASE("a part that closes round a hole by touching itself at a corner has an outer ring and a hole") {
    const auto polygons = outlines({"##.", "#.#", "###"});
    REQUIRE(polygons.size() == 1);
    REQUIRE(polygons[0].rings.size() == 2);
    CHECK(ring_area(polygons[0].rings[0]) == 8.0);
    CHECK(ring_area(polygons[0].rings[1]) == -1.0);
}

TEST_CASE("rectangular cells are outlined in the grid's coordinates") {
    const Grid grid{.rows = 2, .columns = 2, .left = 100.0, .top = 50.0, .cell_width = 2.0, .cell_height = 3.0};
    CHECK(text(cell_outlines({3}, grid)[0].rings[0]) == "102,44 104,44 104,47 102,47 102,44");
}

/// No ring comes to a corner twice, outer rings run counterclockwise and holes clockwise, and the areas add up to the cells.
TEST_CASE("outlines of any cells are simple rings that hold as much ground as the cells") {
    for (unsigned seed = 0; seed < 500; ++seed) {
        std::mt19937 random(seed);
        const Grid grid{.rows = std::uniform_int_distribution<std::int64_t>(1, 12)(random),
                        .columns = std::uniform_int_distribution<std::int64_t>(1, 12)(random), .top = 20.0};
        std::bernoulli_distribution is_in(0.3 + 0.05 * (seed % 10));
        std::vector<Cell> cells;
        for (Cell cell = 0; cell < static_cast<Cell>(grid.size()); ++cell) {
            if (is_in(random)) cells.push_back(cell);
        }
        std::shuffle(cells.begin(), cells.end(), random);
        double area = 0;
        INFO("seed " << seed);
        for (const Polygon& polygon : cell_outlines(cells, grid)) {
            for (const Line& ring : polygon.rings) {
                const bool is_outer = &ring == &polygon.rings.front();
                REQUIRE((ring_area(ring) > 0) == is_outer);
                area += ring_area(ring);
                std::set<std::pair<double, double>> corners;
                for (std::size_t i = 1; i < ring.size(); ++i) REQUIRE(corners.emplace(ring[i].x, ring[i].y).second);
            }
        }
        REQUIRE(area == static_cast<double>(cells.size()));
    }
}

}  // namespace
}  // namespace rillclock
