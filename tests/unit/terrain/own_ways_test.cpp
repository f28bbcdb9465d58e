#include "rillclock/terrain/own_ways.hpp"

#include <catch2/catch.hpp>

#include "reference/drawings.hpp"

namespace rillclock {
namespace {

/// Flow drawn in the keys of `drawings::arrows`.
Raster<FlowCode> drawn_flow(std::string_view drawing) {
    constexpr std::string_view keys = "89632147o#";
    const auto lines = drawings::lines_of(drawing);
    Raster<FlowCode> codes(static_cast<std::int64_t>(lines.size()), static_cast<std::int64_t>(lines[0].size()));
    for (std::int64_t row = 0; row < codes.rows(); ++row) {
        for (std::int64_t column = 0; column < codes.columns(); ++column) {
            codes(row, column) = static_cast<FlowCode>(keys.find(lines[static_cast<std::size_t>(row)][static_cast<std::size_t>(column)]));
        }
    }
    return codes;
}

FlowLines lines_of(const std::vector<std::vector<Cell>>& ways) {
    FlowLines lines;
    for (const auto& way : ways) lines.add(way, [](Cell) { return false; });
    return lines;
}

const Ground cells_of_two_metres = Ground::planar(metres(2), metres(2));

/// A crossing leads the water along the northern row; by the ground alone it goes round by the southern one.
const Raster<FlowCode> led = drawn_flow(R"(
    66662
    66662
    6666o
)");
const Raster<FlowCode> own = drawn_flow(R"(
    21112
    21112
    6666o
)");

TEST_CASE("the own way of a line's water departs by its cell that is farthest from the way led, and ends where it comes back") {
    const auto ways = own_ways(lines_of({{0, 1, 2, 3, 4}}), {led, own, cells_of_two_metres}, metres(3.9));
    REQUIRE(ways.size() == 1);
    CHECK(ways[0].start == 0);
    CHECK(ways[0].cells == std::vector<Cell>{0, 5, 10, 11, 12, 13, 14});
    CHECK(in_metres(ways[0].departure) == Approx(4.0));   // two rows of 2 m
    CHECK(ways[0].farthest == 10);                        // of those equally far the smaller cell
    CHECK(ways[0].comes_back);
}

TEST_CASE("an own way that departs no farther than is asked for is left out") {
    CHECK(own_ways(lines_of({{0, 1, 2, 3, 4}}), {led, own, cells_of_two_metres}, metres(4)).empty());
}

TEST_CASE("where the ground leads the way the line does there is nothing to tell") {
    CHECK(own_ways(lines_of({{0, 1, 2, 3, 4}}), {led, led, cells_of_two_metres}, metres(0)).empty());
}

TEST_CASE("an own way that leaves the data elsewhere ends there, and does not come back") {
    const auto ways = own_ways(lines_of({{0, 1, 2, 3, 4}}), {led, drawn_flow(R"(
        2ooo2
        2ooo2
        oooo2
    )"), cells_of_two_metres}, metres(1));
    REQUIRE(ways.size() == 1);
    CHECK(ways[0].cells == std::vector<Cell>{0, 5, 10});
    CHECK_FALSE(ways[0].comes_back);
}

TEST_CASE("lines are looked at reach by reach: below where they meet once, not once for each line above") {
    // Two lines meet in the middle of the northern row and go on as one; only beyond does the ground lead elsewhere.
    const auto both = lines_of({{0, 1, 2, 3, 4}, {7, 2}});
    const auto ways = own_ways(both, {drawn_flow(R"(
        66662
        66862
        6666o
    )"), drawn_flow(R"(
        66312
        66822
        6666o
    )"), cells_of_two_metres}, metres(1));
    REQUIRE(ways.size() == 1);
    CHECK(ways[0].start == 2);
}

}  // namespace
}  // namespace rillclock
