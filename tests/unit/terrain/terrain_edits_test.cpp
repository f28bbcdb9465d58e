#include "rillclock/terrain/terrain_edits.hpp"

#include <catch2/catch.hpp>

#include "reference/drawings.hpp"
#include "reference/plain/flow_directions.hpp"

namespace rillclock {
namespace {

using drawings::drawn;

/// A drawn terrain; cells have side 1, and places are written as {column, row} of cell centres.
struct Edited {
    Edited(std::string_view drawing, EditShapes shapes, double turn_from = 0.5)
        : ground(drawings::terrain(drawing)), z(ground.rows(), ground.columns(), ElevationStore::Width::four_bytes) {
        for (Cell cell = 0; cell < static_cast<Cell>(ground.size()); ++cell) z.put(cell, ground[cell]);
        const Grid grid{.rows = ground.rows(), .columns = ground.columns(), .left = -0.5, .top = 0.5};
        edits = place_edits(shapes, grid, z, turn_from);
        flow = edited_flow(z, edits, [](const ElevationStore& store) {
            Elevations levels(store.rows(), store.columns());
            for (Cell cell = 0; cell < static_cast<Cell>(levels.size()); ++cell) levels[cell] = store[cell];
            return flow_forest_of(levels, Ground::planar(metres(1), metres(1))).codes();
        });
    }
    [[nodiscard]] std::string arrows() const { return drawings::arrows(flow.codes); }

    Elevations ground;
    ElevationStore z;
    TerrainEdits edits;
    EditedFlow flow;
};

Line line(std::initializer_list<RowColumn> column_row) {
    Line line;
    for (const auto& [column, row] : column_row) line.push_back({static_cast<double>(column), -static_cast<double>(row)});
    return line;
}

TEST_CASE("a crossing carries flow through an embankment, from the higher to the lower end") {
    constexpr auto ground = R"(
        99999999
        95489321
        99999999)";
    Edited edited(ground, {.channels = {}, .crossings = {line({{5, 1}, {2, 1}})}, .barriers = {}, .kept_places = {}, .kept_areas = {}});
    CHECK(edited.arrows().substr(9, 8) == "6666666o");
    CHECK(edited.edits.crossings.used == 1);
    CHECK(edited.edits.crossings.cells == 4);
    CHECK(lower_to_beds(edited.z, edited.edits.lines) == 5);
    CHECK(edited.z[8 + 3] == 4);
    CHECK(edited.z[8 + 4] == 4);
    CHECK(edited.z[8 + 5] == 3);
}

TEST_CASE("a channel is followed over ground that rises, and all beside it enters it") {
    CHECK(Edited("555\n567\n555", {.channels = {line({{0, 1}, {2, 1}})}, .crossings = {}, .barriers = {}, .kept_places = {}, .kept_areas = {}}, 3)
              .arrows() == drawn("222\n66o\n888"));
}

TEST_CASE("a channel drawn upstream is turned, one that rises no more than noise does not") {
    const EditShapes shapes{.channels = {line({{0, 1}, {4, 1}})}, .crossings = {}, .barriers = {}, .kept_places = {}, .kept_areas = {}};
    const Edited upstream("99999\n23456\n99999", shapes);
    CHECK(upstream.edits.channels.turned == 1);
    CHECK(upstream.arrows().substr(6, 5) == "o4444");
    const Edited noise("99999\n23223\n99999", shapes, 1.0);
    CHECK(noise.edits.channels.turned == 0);
    CHECK(noise.arrows().substr(6, 5) == "6666o");
}

TEST_CASE("a channel that ends in the ground goes on over the lowest way, over a pass if it must") {
    // The line ends in a pit whose natural way out would be back over the line.
    const Edited edited("9999999\n9321451\n9999999",
                        {.channels = {line({{1, 1}, {3, 1}})}, .crossings = {}, .barriers = {}, .kept_places = {}, .kept_areas = {}});
    CHECK(edited.arrows().substr(8, 7) == "666666o");
    CHECK(edited.flow.ends_without_way.empty());
}

TEST_CASE("a barrier turns water aside, on the diagonal too") {
    const Edited edited("99999\n98769\n96549\n94329\n99919",
                        {.channels = {}, .crossings = {}, .barriers = {line({{1, 3}, {3, 1}})}, .kept_places = {}, .kept_areas = {}});
    CHECK(edited.edits.barrier == std::vector<Cell>{8, 12, 13, 16, 17});
    for (const Cell wall : edited.edits.barrier) CHECK(edited.flow.codes[wall] < 8);
    CHECK(edited.flow.codes[6] != flow_code(Direction::south_east));
    CHECK(edited.flow.enclosed.empty());
}

TEST_CASE("water that a barrier shuts in stays beside it") {
    const Edited edited("11111\n11111\n11511\n11111\n11111",
                        {.channels = {}, .crossings = {},
                         .barriers = {line({{1, 1}, {3, 1}, {3, 3}, {1, 3}, {1, 1}})}, .kept_places = {}, .kept_areas = {}});
    CHECK(edited.flow.enclosed == std::vector<Cell>{12});
    CHECK(edited.flow.codes[12] == flow_root);
}

TEST_CASE("a line through a barrier is a gate in it") {
    const Edited edited("99999\n98769\n95559\n94329\n99919",
                        {.channels = {line({{2, 1}, {2, 3}})}, .crossings = {}, .barriers = {line({{0, 2}, {4, 2}})},
                         .kept_places = {}, .kept_areas = {}});
    CHECK(edited.edits.barrier == std::vector<Cell>{10, 11, 13, 14});
    CHECK(edited.flow.codes[7] == flow_code(Direction::south));
    CHECK(edited.flow.codes[12] == flow_code(Direction::south));
}

TEST_CASE("a line that reaches kept water ends there, and what it has beyond begins anew") {
    const Edited edited("99999\n54321\n99999",
                        {.channels = {line({{0, 1}, {4, 1}})}, .crossings = {}, .barriers = {}, .kept_places = {{2.0, -1.0}}, .kept_areas = {}});
    CHECK(edited.arrows().substr(6, 5) == "66o6o");
    CHECK(edited.edits.kept == std::vector<Cell>{7});
}

TEST_CASE("a line ends at a void and begins anew beyond it") {
    const Edited edited("99999\n54#21\n99999",
                        {.channels = {line({{0, 1}, {4, 1}})}, .crossings = {}, .barriers = {}, .kept_places = {}, .kept_areas = {}});
    CHECK(edited.arrows().substr(6, 5) == "6o#6o");
}

TEST_CASE("shapes that claim nothing are counted") {
    const Edited edited("111\n111\n111",
                        {.channels = {line({{8, 8}, {9, 9}}), line({{1, 1}, {1, 1}})}, .crossings = {}, .barriers = {line({{7, 7}, {9, 7}})},
                         .kept_places = {{-5, -5}}, .kept_areas = {}});
    CHECK(edited.edits.empty());
    CHECK(edited.edits.channels.unused == 2);
    CHECK(edited.edits.barriers.unused == 1);
    CHECK(edited.edits.kept_waters.unused == 1);
}

TEST_CASE("shapes whose cells others have already are counted apart from those off the data") {
    const Edited edited("99999\n54321\n99999",
                        {.channels = {line({{0, 1}, {3, 1}}), line({{1, 1}, {2, 1}}), line({{4, 1}, {4, 2}})},
                         .crossings = {line({{2, 1}, {0, 1}}), line({{8, 1}, {9, 1}})},
                         .barriers = {line({{0, 1}, {2, 1}}), line({{0, 0}, {4, 0}}), line({{1, 0}, {3, 0}}), line({{9, 9}, {9, 7}})},
                         .kept_places = {{4, -1}, {4, -1}, {4, -2}}, .kept_areas = {}});
    const auto counts = [](const EditCount& count) { return std::vector<std::size_t>{count.used, count.covered, count.unused, count.cells}; };
    CHECK(counts(edited.edits.kept_waters) == std::vector<std::size_t>{2, 1, 0, 2});
    CHECK(counts(edited.edits.channels) == std::vector<std::size_t>{1, 2, 0, 4});    // one on the first, one in kept water
    CHECK(counts(edited.edits.crossings) == std::vector<std::size_t>{0, 1, 1, 0});   // against the first channel, which came first
    CHECK(counts(edited.edits.barriers) == std::vector<std::size_t>{1, 2, 1, 5});
    CHECK(edited.edits.barrier == std::vector<Cell>{0, 1, 2, 3, 4});
}

TEST_CASE("a line that only leads on from the end of another is used, though it claims no cell") {
    const Edited edited("99999\n54321\n99999",
                        {.channels = {line({{0, 1}, {1, 1}}), line({{2, 1}, {4, 1}}), line({{1, 1}, {2, 1}})},
                         .crossings = {}, .barriers = {}, .kept_places = {}, .kept_areas = {}});
    CHECK(edited.edits.channels.used == 3);
    CHECK(edited.edits.channels.cells == 5);
    CHECK(edited.arrows().substr(6, 5) == "6666o");
}

TEST_CASE("of lines that meet, cross or lie on one another, the first in the file keeps its cells") {
    FlowLines lines;
    const auto never = [](Cell) { return false; };
    lines.add(Way{1, 2, 3, 4}, never);
    lines.add(Way{8, 3, 9, 10}, never);   // crosses at 3
    lines.add(Way{4, 3, 2}, never);       // lies on the first, the other way round
    lines.add(Way{4, 5}, never);          // goes on from its last cell
    CHECK(lines.next(3) == 4);
    CHECK(lines.next(8) == 3);
    CHECK(lines.next(9) == 10);
    CHECK(lines.next(4) == 5);
    CHECK(lines.next(5) == no_cell);
    CHECK(lines.ends().at(8) == 5);
}

TEST_CASE("lines never close a circle") {
    FlowLines lines;
    const auto never = [](Cell) { return false; };
    lines.add(Way{1, 2, 3}, never);
    lines.add(Way{3, 4, 1}, never);
    CHECK(lines.next(3) == 4);
    CHECK(lines.next(4) == no_cell);
}

}  // namespace
}  // namespace rillclock
