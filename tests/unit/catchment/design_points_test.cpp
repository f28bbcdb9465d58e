#include "rillclock/catchment/design_points.hpp"

#include <catch2/catch.hpp>

#include "reference/plain_catchment.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

/// Ten by ten cells of 1 m with areas as a test states them; nothing flows. Cell (row, column) has its centre at
/// x = column + 0.5, y = 9.5 - row.
struct Board {
    Raster<FlowCode> codes = Raster<FlowCode>(10, 10, flow_root);
    Raster<FixedArea> area = Raster<FixedArea>(10, 10, to_fixed_area(1));
    Ground ground = Ground::planar(metres(1), metres(1));
    Grid grid = {.rows = 10, .columns = 10, .left = 0, .top = 10, .cell_width = 1, .cell_height = 1};

    void set(RowColumn at, double square_metres_upstream) {
        area[grid.cell(at)] = to_fixed_area(square_metres_upstream);
    }
    [[nodiscard]] PlacedPoints place(const std::vector<StatedPoint>& stated, double move_within_m) const {
        const auto area_at = [this](Cell cell) {
            return codes[cell] == flow_void ? std::nullopt : std::optional(area[cell]);
        };
        return place_points(stated, {.grid = grid, .ground = ground, .area = area_at}, metres(move_within_m));
    }
    [[nodiscard]] PlacedPoints find(double least_share) const {
        const FlowForest forest(codes);
        return find_points(reference::ways_out(forest, area), grid, least_share);
    }
};

const StatedPoint middle{"middle", {5.5, 4.5}};  // the centre of cell (5, 5)

Cell at(std::int64_t row, std::int64_t column) {
    return static_cast<Cell>(row * 10 + column);
}

std::vector<std::string> codes_of(const Notices& notices) {
    std::vector<std::string> codes;
    for (const Notice& notice : notices) codes.push_back(notice.code);
    return codes;
}

TEST_CASE("a point moves to the cell of largest contributing area within reach") {
    Board board;
    board.set({5, 7}, 5);
    board.set({4, 5}, 3);
    board.set({5, 8}, 9);  // 3 m away
    const PlacedPoints placed = board.place({middle}, 2.0);
    CHECK(placed.points.at(0).cell == at(5, 7));
    CHECK(in_metres(placed.points.at(0).moved) == 2.0);
    CHECK_FALSE(placed.points.at(0).found);
}

StatedPoint surveyed_as(double square_metres) {
    StatedPoint point = middle;
    point.surveyed = to_fixed_area(square_metres);
    return point;
}

TEST_CASE("a point with a surveyed area moves to the cell nearest to it in the logarithm") {
    Board board;
    board.set({5, 7}, 400);
    board.set({4, 5}, 52);   // 100 / 52 is 1.92, 190 / 100 is 1.9
    board.set({6, 5}, 190);
    const PlacedPoints placed = board.place({surveyed_as(100)}, 2.0);
    CHECK(placed.points.at(0).cell == at(6, 5));
    CHECK(placed.points.at(0).surveyed == to_fixed_area(100));
    CHECK(board.place({surveyed_as(60)}, 2.0).points.at(0).cell == at(4, 5));
    CHECK(board.place({surveyed_as(1e9)}, 2.0).points.at(0).cell == at(5, 7));
}

TEST_CASE("of cells with equal areas a surveyed point moves to the nearest, then to the smaller index") {
    Board board;
    for (const RowColumn equal : {RowColumn{5, 7}, RowColumn{5, 6}, RowColumn{5, 4}}) board.set(equal, 100);
    CHECK(board.place({surveyed_as(100)}, 2.0).points.at(0).cell == at(5, 4));
}

TEST_CASE("a surveyed area more than a tenth off is told, either way, with their ratio") {
    Board board;
    board.set({5, 5}, 190);
    const Notices above = board.place({surveyed_as(100)}, 0.0).notices;
    REQUIRE(codes_of(above) == std::vector<std::string>{"surveyed-area-differs"});
    CHECK(*above[0].value == Approx(1.9));
    CHECK(codes_of(board.place({surveyed_as(210)}, 0.0).notices) == std::vector<std::string>{"surveyed-area-differs"});
    CHECK(board.place({surveyed_as(173)}, 0.0).notices.empty());   // 1.098
    CHECK(board.place({surveyed_as(208)}, 0.0).notices.empty());   // 1 / 1.095
}

TEST_CASE("a centre just beyond reach is out of it") {
    Board board;
    board.set({5, 7}, 5);
    CHECK(board.place({middle}, 1.999).points.at(0).cell == at(5, 5));
}

TEST_CASE("among equal areas a point moves to the nearest") {
    Board board;
    board.set({5, 7}, 5);
    board.set({6, 6}, 5);
    CHECK(board.place({middle}, 2.0).points.at(0).cell == at(6, 6));
}

TEST_CASE("among equal areas as near as one another a point moves to the smaller index") {
    Board board;
    for (const RowColumn beside : {RowColumn{5, 6}, RowColumn{5, 4}, RowColumn{6, 5}}) board.set(beside, 5);
    CHECK(board.place({middle}, 2.0).points.at(0).cell == at(5, 4));
}

TEST_CASE("a point stays where no cell within reach has more area, and nothing is said") {
    const PlacedPoints placed = Board().place({middle}, 3.0);
    CHECK(placed.points.at(0).cell == at(5, 5));
    CHECK(placed.notices.empty());
}

TEST_CASE("a point's own cell is always within reach") {
    const PlacedPoints placed = Board().place({{"corner", {5.95, 4.05}}}, 0.0);
    CHECK(placed.points.at(0).cell == at(5, 5));
    CHECK(in_metres(placed.points.at(0).moved) == Approx(0.45 * std::sqrt(2.0)));
}

TEST_CASE("reach is measured on the ground, not in cells") {
    Board board;
    board.ground = Ground::planar(metres(4), metres(1));
    board.set({5, 6}, 9);  // 4 m east
    board.set({7, 5}, 5);  // 2 m south
    CHECK(board.place({middle}, 3.0).points.at(0).cell == at(7, 5));
    CHECK(board.place({middle}, 4.0).points.at(0).cell == at(5, 6));
}

TEST_CASE("reach ends at the edge of the data") {
    Board board;
    board.set({0, 1}, 5);
    CHECK(board.place({{"corner", {0.5, 9.5}}}, 50.0).points.at(0).cell == at(0, 1));
}

TEST_CASE("a move is told with its length and its limit") {
    Board board;
    board.set({5, 7}, 5);
    const Notices notices = board.place({middle}, 2.5).notices;
    REQUIRE(codes_of(notices) == std::vector<std::string>{"point-moved"});
    CHECK(notices[0].point == "middle");
    CHECK(notices[0].value == 2.0);
    CHECK(notices[0].threshold == 2.5);
}

TEST_CASE("a move that makes the area tenfold is told, and one that does not quite is not") {
    Board board;
    board.set({5, 6}, 9.9999);
    CHECK(codes_of(board.place({middle}, 1.0).notices) == std::vector<std::string>{"point-moved"});
    board.set({5, 6}, 10);
    const Notices notices = board.place({middle}, 1.0).notices;
    REQUIRE(codes_of(notices) == std::vector<std::string>{"point-moved", "point-moved-to-larger-stream"});
    CHECK(notices[1].value == 10.0);
}

TEST_CASE("a point off the data is left out with a notice, and the others keep their order") {
    const PlacedPoints placed = Board().place({{"away", {10.0, 5.0}}, middle, {"first", {0.5, 0.5}}}, 1.0);
    REQUIRE(placed.points.size() == 2);
    CHECK(placed.points[0].name == "middle");
    CHECK(placed.points[1].name == "first");
    REQUIRE(codes_of(placed.notices) == std::vector<std::string>{"point-off-data"});
    CHECK(placed.notices[0].point == "away");
}

TEST_CASE("a point on void with no data within reach is left out with a notice") {
    Board board;
    board.codes(5, 5) = flow_void;
    const PlacedPoints placed = board.place({middle, {"other", {0.5, 0.5}}}, 0.9);
    CHECK(placed.points.size() == 1);
    CHECK(codes_of(placed.notices) == std::vector<std::string>{"point-on-void"});
}

TEST_CASE("a point on void with data within reach lands there") {
    Board board;
    board.codes(5, 5) = flow_void;
    board.set({5, 6}, 5);
    const PlacedPoints placed = board.place({middle}, 1.0);
    CHECK(placed.points.at(0).cell == at(5, 6));
    CHECK(codes_of(placed.notices) == std::vector<std::string>{"point-moved"});
}

TEST_CASE("a point never lands on void, whatever area the raster has there") {
    Board board;
    board.codes(5, 6) = flow_void;
    board.set({5, 6}, 99);
    CHECK(board.place({middle}, 1.0).points.at(0).cell == at(5, 5));
}

TEST_CASE("the second of two points that land on one cell is left out, and the notice names the first") {
    Board board;
    board.set({5, 6}, 5);
    const PlacedPoints placed = board.place({middle, {"twin", {6.5, 4.5}}}, 1.0);
    REQUIRE(placed.points.size() == 1);
    CHECK(placed.points[0].name == "middle");
    REQUIRE(codes_of(placed.notices) == std::vector<std::string>{"point-moved", "point-on-taken-cell"});
    CHECK(placed.notices[1].point == "twin");
    CHECK(placed.notices[1].text.find("'middle'") != std::string::npos);
}

TEST_CASE("no point on the data is an error of the inputs that says why") {
    CHECK_THROWS_WITH(Board().place({{"away", {-1.0, 5.0}}}, 1.0),
                      Catch::Contains("'away'") && Catch::Contains("lies off"));
    CHECK_THROWS_WITH(Board().place({}, 1.0), Catch::Contains("holds none"));
    try {
        static_cast<void>(Board().place({}, 1.0));
    } catch (const Error& error) {
        CHECK(error.fault() == Fault::inputs);
    }
}

/// A board that drains at four cells alone: 50, 30, 15 and 5 m² of 100.
Board four_outlets() {
    Board board;
    board.codes = Raster<FlowCode>(10, 10, flow_void);
    for (const auto& [cell, share] : {std::pair{at(9, 0), 5.0}, {at(3, 0), 30.0}, {at(4, 0), 50.0}, {at(8, 0), 15.0}}) {
        board.codes[cell] = flow_root;
        board.area[cell] = to_fixed_area(share);
    }
    return board;
}

TEST_CASE("where water leaves the data with at least the share upstream there is a point, the largest first") {
    const PlacedPoints found = four_outlets().find(0.15);
    REQUIRE(found.points.size() == 3);
    CHECK(found.points[0].cell == at(4, 0));
    CHECK(found.points[1].cell == at(3, 0));
    CHECK(found.points[2].cell == at(8, 0));
    CHECK(found.points[0].name == "outlet 1");
    CHECK(found.points[0].found);
    CHECK(found.points[0].stated.x == 0.5);
    CHECK(found.points[0].stated.y == 5.5);
}

TEST_CASE("just under the share there is no point") {
    CHECK(four_outlets().find(0.1501).points.size() == 2);
}

TEST_CASE("where no outlet has the share the largest is the one point") {
    const PlacedPoints found = four_outlets().find(0.6);
    REQUIRE(found.points.size() == 1);
    CHECK(found.points[0].cell == at(4, 0));
}

TEST_CASE("equal outlets are numbered by their index") {
    Board board = four_outlets();
    board.set({3, 0}, 50);
    CHECK(board.find(0.3).points.at(0).cell == at(3, 0));
}

}  // namespace
}  // namespace rillclock
