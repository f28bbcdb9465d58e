#include "rillclock/raster/grid_shapes.hpp"

#include <catch2/catch.hpp>

#include <string>

namespace rillclock {
namespace {

/// Four rows of six cells of side 1; x is the column, y counts down from 4 at the northern edge.
constexpr Grid grid{.rows = 4, .columns = 6, .left = 0.0, .top = 4.0};

std::string drawn(const std::vector<Cell>& cells) {
    std::string text = "......\n......\n......\n......\n";
    for (const Cell cell : cells) text[static_cast<std::size_t>(cell / 6 * 7 + cell % 6)] = '#';
    return text;
}

std::string crossed(const Line& line) {
    std::vector<Cell> all;
    for (const Way& way : cells_crossed(line, grid)) all.insert(all.end(), way.begin(), way.end());
    return drawn(all);
}

Way followed(const Line& line) { return shortened(cells_crossed(line, grid).at(0), grid.columns); }

TEST_CASE("a line claims every cell it touches, edge to edge") {
    CHECK(crossed({{0.5, 0.7}, {5.5, 3.2}}) ==
          ".....#\n"
          "...###\n"
          ".###..\n"
          "##....\n");
}

TEST_CASE("through a corner a line goes along the row first") {
    CHECK(cells_crossed({{0.5, 3.5}, {2.5, 1.5}}, grid) == std::vector<Way>{{0, 1, 7, 8, 14}});
    CHECK(cells_crossed({{2.5, 1.5}, {0.5, 3.5}}, grid) == std::vector<Way>{{14, 13, 7, 6, 0}});
}

TEST_CASE("water follows a diagonal line by diagonal steps") {
    CHECK(followed({{0.5, 3.5}, {2.5, 1.5}}) == Way{0, 7, 14});
    CHECK(followed({{0.5, 3.5}, {2.5, 3.5}, {2.5, 0.5}}) == Way{0, 1, 8, 14, 20});
}

TEST_CASE("what a line passes between two visits to a cell is left out") {
    CHECK(followed({{0.5, 3.5}, {4.5, 3.5}, {4.5, 1.5}, {2.5, 1.5}, {2.5, 3.5}, {2.5, 0.5}}) == Way{0, 1, 8, 14, 20});
    CHECK(followed({{0.5, 3.5}, {3.5, 3.5}, {0.5, 3.5}}) == Way{0});
}

TEST_CASE("a line that leaves the grid and comes back has two ways") {
    const auto ways = cells_crossed({{1.5, 3.5}, {1.5, 1e9}, {3.5, 1e9}, {3.5, 2.5}}, grid);
    CHECK(ways == std::vector<Way>{{1}, {3, 9}});
}

TEST_CASE("a line far beyond the grid on both sides crosses it whole") {
    CHECK(cells_crossed({{-1e12, 1.5}, {1e12, 1.5}}, grid) == std::vector<Way>{{12, 13, 14, 15, 16, 17}});
}

TEST_CASE("a line beside the grid has no way, one within a cell has one cell") {
    CHECK(cells_crossed({{-5, -5}, {9, -5}}, grid).empty());
    CHECK(cells_crossed({{-5, 2}, {3, 12}}, grid).empty());
    CHECK(cells_crossed({{2.2, 2.2}, {2.7, 2.7}}, grid) == std::vector<Way>{{8}});
    CHECK(cells_crossed({{2.2, 2.2}}, grid) == std::vector<Way>{{8}});
    CHECK(cells_crossed({}, grid).empty());
}

TEST_CASE("a polygon claims the cells whose centres it holds, but not those in its holes") {
    const Line outer{{0.4, 0.4}, {5.2, 0.4}, {5.2, 3.6}, {0.4, 3.6}, {0.4, 0.4}};
    const Line hole{{1.9, 1.2}, {3.9, 1.2}, {3.9, 2.8}, {1.9, 2.8}};
    CHECK(drawn(cells_within({{outer, hole}}, grid)) ==
          "#####.\n"
          "##..#.\n"
          "##..#.\n"
          "#####.\n");
}

TEST_CASE("polygons that share an edge claim each cell once") {
    const Polygon west{{{{0.5, 0.5}, {2.5, 0.5}, {2.5, 3.5}, {0.5, 3.5}}}};
    const Polygon east{{{{2.5, 0.5}, {5.5, 0.5}, {5.5, 3.5}, {2.5, 3.5}}}};
    CHECK(drawn(cells_within(west, grid)) == "##....\n##....\n##....\n......\n");
    CHECK(drawn(cells_within(east, grid)) == "..###.\n..###.\n..###.\n......\n");
}

TEST_CASE("a polygon too small to hold a centre claims the cell of its first corner") {
    CHECK(cells_within({{{{2.1, 2.1}, {2.2, 2.1}, {2.2, 2.2}}}}, grid) == std::vector<Cell>{8});
    CHECK(cells_within({{{{-2.1, 2.1}, {-2.2, 2.1}, {-2.2, 2.2}}}}, grid).empty());
    CHECK(cells_within({}, grid).empty());
}

TEST_CASE("a polygon far larger than the grid claims all of it") {
    CHECK(cells_within({{{{-1e6, -1e6}, {1e6, -1e6}, {1e6, 1e6}, {-1e6, 1e6}}}}, grid).size() == 24);
}

}  // namespace
}  // namespace rillclock
