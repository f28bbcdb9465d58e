#include "reference/plain/flow_directions.hpp"

#include <catch2/catch.hpp>

#include "reference/drawings.hpp"

namespace rillclock {
namespace {

const Ground square = Ground::planar(metres(1), metres(1));

std::string flow(std::string_view drawing) {
    return drawings::arrows(flow_forest_of(drawings::terrain(drawing), square).codes());
}

TEST_CASE("water takes the steepest way, and a diagonal has to fall further to be steeper") {
    CHECK(flow(R"(
        999
        953
        993
    )").substr(5, 1) == "6");
    CHECK(flow(R"(
        999
        954
        991
    )").substr(5, 1) == "3");
}

TEST_CASE("among equally steep ways the first clockwise from north is taken") {
    CHECK(flow(R"(
        939
        353
        939
    )").substr(5, 1) == "8");
}

TEST_CASE("a border cell with no lower neighbour is where water leaves the data") {
    CHECK(flow("1") == "o\n");
    CHECK(flow("121") == "o6o\n");
}

TEST_CASE("an open flat drains by the shortest way to where it is left") {
    CHECK(flow(R"(
        99999
        95554
        99999
    )") == drawings::drawn(R"(
        32222
        6666o
        98888
    )"));
}

TEST_CASE("a depression is opened over its lowest pass, and only the way to the pass is turned") {
    CHECK(flow(R"(
        9999999
        9313748
        9999999
    )").substr(8, 7) == "666666o");
}

TEST_CASE("a closed flat is left at one cell, to which all of it drains") {
    CHECK(flow(R"(
        99999
        92225
        92229
        99999
    )") == drawings::drawn(R"(
        32221
        6666o
        69984
        98887
    )"));
}

TEST_CASE("beside a void water leaves the data, and the void stays void") {
    CHECK(flow(R"(
        99999
        98#89
        97679
        99999
    )").substr(6, 5) == "33#11");
}

TEST_CASE("spill elevation is the lowest level at which water gets out") {
    const Elevations z = drawings::terrain(R"(
        9999
        9217
        9999
    )");
    const Elevations spill = spill_elevations(flow_forest_of(z, square), z);
    CHECK(spill(1, 1) == 7);
    CHECK(spill(1, 2) == 7);
    CHECK(spill(1, 3) == 7);
}

}  // namespace
}  // namespace rillclock
