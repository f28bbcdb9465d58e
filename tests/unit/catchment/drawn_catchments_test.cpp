#include "rillclock/catchment/drawn_catchments.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <random>
#include <set>

#include "rillclock/raster/direction.hpp"

namespace rillclock {
namespace {

constexpr std::int64_t rows = 12;
constexpr std::int64_t columns = 9;
const Grid grid{.rows = rows, .columns = columns, .left = 0, .top = 12, .cell_width = 1, .cell_height = 1};
const Ground ground = Ground::planar(metres(2), metres(3));

Polygon rectangle(double left, double top, double right, double bottom) {
    return {.rings = {{{left, top}, {right, top}, {right, bottom}, {left, bottom}}}};
}

/// A set of cells by chance, as single cells in no order.
std::set<Cell> random_cells(std::mt19937& random) {
    const auto of_ten = random() % 11;
    std::set<Cell> cells;
    for (Cell cell = 0; cell < rows * columns; ++cell)
        if (random() % 10 < of_ten) cells.insert(cell);
    return cells;
}

CellRuns runs_of(const std::set<Cell>& cells) {
    std::vector<CellRun> runs;
    for (const Cell cell : cells) runs.insert(runs.begin(), {cell, cell + 1});
    return CellRuns(runs, columns);
}

double cells_enclosed(const std::vector<CornerPolygon>& outlines) {
    double twice = 0.0;
    for (const CornerPolygon& polygon : outlines) {
        for (const CornerRing& ring : polygon.rings) {
            for (std::size_t i = 0; i < ring.size(); ++i) {
                const Corner& a = ring[i];
                const Corner& b = ring[(i + 1) % ring.size()];
                twice -= static_cast<double>(a.column) * b.row - static_cast<double>(b.column) * a.row;
            }
        }
    }
    return std::abs(twice) / 2.0;
}

TEST_CASE("runs that touch or overlap in a row are one; the end of a row and the begin of the next are two") {
    const CellRuns cells({{12, 14}, {10, 12}, {13, 16}, {16, 18}, {18, 20}}, columns);
    CHECK(cells.runs().size() == 2);
    CHECK(cells.runs()[0] == CellRun{10, 18});
    CHECK(cells.runs()[1] == CellRun{18, 20});
    CHECK_FALSE(cells.holds(9));
    CHECK(cells.holds(10));
    CHECK(cells.holds(19));
    CHECK_FALSE(cells.holds(20));
}

TEST_CASE("cells within several polygons are those within any, voids left out") {
    Raster<FlowCode> codes(rows, columns, flow_root);
    codes[1 * columns + 2] = flow_void;
    const std::vector<Polygon> polygons{rectangle(1, 11, 4, 9), rectangle(3, 11, 6, 10)};
    const CellRuns cells = cells_of(std::span(polygons), grid, codes);
    std::vector<CellRun> expected{{columns + 1, columns + 2}, {columns + 3, columns + 6}, {2 * columns + 1, 2 * columns + 4}};
    CHECK(std::vector<CellRun>(cells.runs().begin(), cells.runs().end()) == expected);
    CHECK(area_of(cells, grid, ground) == to_fixed_area(7 * 6.0));
}

TEST_CASE("outlines of cells enclose these cells again, holes and pieces that meet in corners included") {
    std::mt19937 random(5);
    for (int round = 0; round < 300; ++round) {
        const std::set<Cell> cells = random_cells(random);
        RegionBorders borders(columns);
        for (std::int64_t row = 0; row < rows; ++row) {
            std::vector<RegionLabel> labels;
            for (std::int64_t column = 0; column < columns; ++column) labels.push_back(cells.contains(static_cast<Cell>(row * columns + column)) ? 1 : 0);
            borders.add_row(labels);
        }
        borders.finish();
        const std::vector<CornerPolygon> outlines = borders.outline(1);
        const CellRuns found = cells_of(std::span(outlines), grid);
        const CellRuns expected = runs_of(cells);
        REQUIRE(std::vector<CellRun>(found.runs().begin(), found.runs().end()) ==
                std::vector<CellRun>(expected.runs().begin(), expected.runs().end()));
    }
}

TEST_CASE("a difference has the areas and the cells that counting one by one gives") {
    std::mt19937 random(7);
    for (int round = 0; round < 300; ++round) {
        const std::set<Cell> drawn = random_cells(random);
        const std::set<Cell> found = random_cells(random);
        std::int64_t both = 0;
        for (const Cell cell : drawn) both += found.contains(cell) ? 1 : 0;
        const DrawnDifference made = difference_of(3, runs_of(drawn), runs_of(found), grid, ground);
        const auto cells = [](std::size_t count) { return to_fixed_area(6.0 * static_cast<double>(count)); };
        REQUIRE(made.point == 3);
        REQUIRE(made.drawn == cells(drawn.size()));
        REQUIRE(made.found == cells(found.size()));
        REQUIRE(made.both == cells(static_cast<std::size_t>(both)));
        REQUIRE(cells_enclosed(made.drawn_only) == static_cast<double>(drawn.size()) - static_cast<double>(both));
        REQUIRE(cells_enclosed(made.found_only) == static_cast<double>(found.size()) - static_cast<double>(both));
        const CellRuns alone = cells_of(std::span(made.drawn_only), grid);
        for (const CellRun& run : alone.runs()) {
            for (Cell cell = run.first; cell < run.end; ++cell) REQUIRE((drawn.contains(cell) && !found.contains(cell)));
        }
        const double either = static_cast<double>(drawn.size() + found.size()) - static_cast<double>(both);
        REQUIRE(made.overlap() == Approx(either > 0 ? static_cast<double>(both) / either : 0.0));
    }
}

/// Everything flows south; the last row leaves the data.
Raster<FlowCode> all_south() {
    Raster<FlowCode> codes(rows, columns, static_cast<FlowCode>(Direction::south));
    for (Cell cell = (rows - 1) * columns; cell < rows * columns; ++cell) codes[cell] = flow_root;
    return codes;
}

TEST_CASE("water crosses a drawn catchment where the next cell lies outside, and only the lowest of these places count") {
    const std::vector<Polygon> polygons{rectangle(2, 11, 5, 8)};   // rows 1 to 3, columns 2 to 4
    const Raster<FlowCode> codes = all_south();
    const CellRuns cells = cells_of(std::span(polygons), grid, codes);
    // Row 3 crosses; elevations there are 3, 2.5 and 2 from west to east.
    const auto elevation = [](Cell cell) { return 10.0 - static_cast<double>(cell / columns) * 2.0 + 0.5 * (2.0 - static_cast<double>(cell % columns)) - 1.0; };
    const Cell row = 3 * columns;
    CHECK(lowest_crossings(cells, codes, elevation, 0.0) == std::vector<Cell>{row + 4});
    CHECK(lowest_crossings(cells, codes, elevation, 0.5) == std::vector<Cell>{row + 3, row + 4});
    CHECK(lowest_crossings(cells, codes, elevation, 0.9) == std::vector<Cell>{row + 3, row + 4});
    CHECK(lowest_crossings(cells, codes, elevation, 1.0) == std::vector<Cell>{row + 2, row + 3, row + 4});
}

TEST_CASE("where water leaves the data or stays, it leaves the catchment") {
    const std::vector<Polygon> polygons{rectangle(0, 12, 9, 0)};
    const Raster<FlowCode> codes = all_south();
    const CellRuns all = cells_of(std::span(polygons), grid, codes);
    CHECK(lowest_crossings(all, codes, [](Cell) { return 1.0; }, 0.0).size() == columns);
    CHECK(lowest_crossings(CellRuns(), codes, [](Cell) { return 1.0; }, 0.0).empty());
}

}  // namespace
}  // namespace rillclock
