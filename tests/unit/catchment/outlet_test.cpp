#include "rillclock/catchment/outlet.hpp"

#include <catch2/catch.hpp>

#include <cstdlib>

#include "reference/worked_outlets.hpp"

namespace rillclock {
namespace {

using worked::Worked;

/// Cells of 10 m in a row, shallow flow at 1 m/s throughout: cell i is (last − i) · 10 s from the end.
worked::Given even_row(std::int64_t cells) {
    TravelRules rules = worked::bare_rules();
    rules.sheet.limit = metres(0);
    const Elevations z = worked::even_strip(cells, 0.4);
    return {.elevations = z,
            .ground = Ground::planar(metres(10), metres(10)),
            .surface = worked::one_surface(z, 0.1, 5),
            .rules = rules};
}

/// Slopes are kept in single precision, and times rounded to 2⁻²⁰ s.
Approx nearly(double value) {
    return Approx(value).epsilon(1e-7).margin(1e-5);
}

TEST_CASE("the time of a point is that of its last cell, and the shares of its area arrive before") {
    const Worked w(even_row(101));
    const Outlet& outlet = w.outlets.at(0);
    CHECK(outlet.greatest_s == nearly(1000));
    CHECK(outlet.time_of_concentration_s() == nearly(1000));
    // 51 of 101 cells have arrived after 500 s, and 50 are not yet half of them; 86, 96 and 100 cells for the others.
    CHECK(outlet.arrival_s[0] == nearly(500));
    CHECK(outlet.arrival_s[1] == nearly(850));
    CHECK(outlet.arrival_s[2] == nearly(950));
    CHECK(outlet.arrival_s[3] == nearly(990));
    CHECK(from_fixed_area(outlet.area) == 10100.0);
}

TEST_CASE("a nested point has its own time, area and paths, and tells which point comes next") {
    const Worked w(even_row(101), {.points = {100, 40}});
    const Outlet& lower = w.outlets.at(0);
    const Outlet& upper = w.outlets.at(1);
    CHECK(lower.greatest_s == nearly(1000));
    CHECK(upper.greatest_s == nearly(400));
    CHECK(upper.next == 1);
    CHECK(lower.next == 0);
    CHECK(from_fixed_area(lower.area) == 10100.0);
    CHECK(from_fixed_area(lower.own_area) == 6000.0);
    CHECK(from_fixed_area(upper.own_area) == 4100.0);
    CHECK(lower.governing.cells.front() == 0);
    CHECK(upper.governing.cells.back() == 40);
}

TEST_CASE("the tail that is left out changes the time of concentration and not the greatest") {
    worked::Asked asked;
    asked.rules.ignore_tail = 0.05;  // five of 101 cells are just under it
    const Worked w(even_row(101), asked);
    CHECK(w.outlets.at(0).time_of_concentration_s() == nearly(950));
    CHECK(w.outlets.at(0).greatest_s == nearly(1000));
}

TEST_CASE("the governing path and the longest path may have different heads") {
    // Two arms of a T: 20 cells of level-ish ground, and 30 cells of steep ground.
    Elevations z(1, 51);
    Raster<FlowCode> codes(1, 51, flow_code(Direction::east));
    for (std::int64_t i = 0; i < 51; ++i) {
        z(0, i) = i < 20 ? static_cast<double>(20 - i) * 0.01 : static_cast<double>(i - 20) * 4.0;
        if (i > 20) codes(0, i) = flow_code(Direction::west);
    }
    codes(0, 20) = flow_root;
    worked::Given given = even_row(51);
    given.elevations = z;
    given.codes = codes;
    const Worked w(std::move(given));
    CHECK(w.outlets.at(0).governing.cells.front() == 0);
    CHECK(w.outlets.at(0).longest.cells.front() == 50);
    CHECK(w.outlets.at(0).longest.seconds < w.outlets.at(0).governing.seconds);
}

TEST_CASE("of heads as far and as late as one another the smaller index is taken") {
    Elevations z(1, 5);
    Raster<FlowCode> codes(1, 5, flow_code(Direction::east));
    for (std::int64_t i = 0; i < 5; ++i) z(0, i) = static_cast<double>(std::abs(i - 2));
    codes(0, 3) = codes(0, 4) = flow_code(Direction::west);
    codes(0, 2) = flow_root;
    worked::Given given = even_row(5);
    given.elevations = z;
    given.codes = codes;
    const Worked w(std::move(given));
    CHECK(w.outlets.at(0).governing.cells == std::vector<Cell>{0, 1, 2});
    CHECK(w.outlets.at(0).longest.cells == std::vector<Cell>{0, 1, 2});
}

/// A bowl that drains to its south: a border cell of the catchment is one on the edge of the grid.
worked::Given bowl(const Elevations& z) {
    return {.elevations = z, .surface = worked::one_surface(z, 0.1, 5)};
}

TEST_CASE("an outlet at the edge counts as touching it only by cells that do not drain straight into it") {
    Elevations z(7, 7, 50);
    for (std::int64_t row = 1; row < 7; ++row) {
        for (std::int64_t column = 1; column < 6; ++column) {
            z(row, column) = 20 - static_cast<double>(row) + static_cast<double>(column > 3 ? column - 3 : 3 - column);
        }
    }
    const Worked edge(bowl(z), {.points = {6 * 7 + 3}});
    CHECK(edge.outlets.at(0).border_cells > 0);
    CHECK(edge.outlets.at(0).touches_edge());

    // The same point of a valley whose divides lie inside: nothing but the two cells beside the outlet touches the
    // edge.
    Elevations inner(7, 7, 50);
    for (std::int64_t i = 0; i < 7; ++i) inner(0, i) = inner(6, i) = inner(i, 0) = inner(i, 6) = 1;
    for (std::int64_t row = 2; row < 6; ++row) inner(row, 3) = 20 - static_cast<double>(row);
    inner(6, 3) = 0.5;
    const Worked clear(bowl(inner), {.points = {6 * 7 + 3}});
    CHECK(clear.outlets.at(0).border_cells == 0);
    CHECK_FALSE(clear.outlets.at(0).touches_edge());
}

TEST_CASE("a catchment beside a void touches the edge") {
    worked::Given given = even_row(3);
    given.elevations = Elevations(5, 9, 50);
    for (std::int64_t column = 0; column < 9; ++column)
        given.elevations(2, column) = 20.0 - static_cast<double>(column);
    given.surface = worked::one_surface(given.elevations, 0.1, 5);
    given.elevations(1, 3) = std::numeric_limits<double>::quiet_NaN();
    const Worked w(std::move(given), {.points = {2 * 9 + 7}});
    CHECK(w.outlets.at(0).touches_edge());
}

TEST_CASE("a point on its only cell has no path and no time") {
    const Worked w(even_row(5), {.points = {0}});
    CHECK(w.outlets.at(0).greatest_s == 0.0);
    CHECK(w.outlets.at(0).governing.segments.empty());
    CHECK(w.outlets.at(0).arrival_s[3] == 0.0);
}

TEST_CASE("a point more changes no bit of the points below it") {
    const Worked without(even_row(101), {.points = {100, 70}});
    const Worked with(even_row(101), {.points = {100, 70, 33}});
    for (const std::size_t i : {0U, 1U}) {
        CHECK(with.outlets[i].greatest_s == without.outlets[i].greatest_s);
        CHECK(with.outlets[i].arrival_s == without.outlets[i].arrival_s);
        CHECK(with.outlets[i].area == without.outlets[i].area);
        CHECK(with.outlets[i].number == without.outlets[i].number);
    }
}

TEST_CASE("end-to-end times of the segments add up to that of the path") {
    const Worked w(even_row(101));
    // One slope throughout: a reviewer with a map finds the same.
    CHECK(w.outlets.at(0).governing.end_to_end_s == nearly(1000));
}

}  // namespace
}  // namespace rillclock
