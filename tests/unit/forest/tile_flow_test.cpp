#include "rillclock/forest/tile_flow.hpp"

#include <catch2/catch.hpp>
#include <cstdint>
#include <vector>

namespace rillclock {
namespace {

TEST_CASE("a tile holds its own cells and no others, and knows the position of each") {
    const Raster<FlowCode> codes(7, 11, flow_root);
    const TileGrid tiles(7, 11, 4);
    TileFlow flow;
    for (Tile tile = 0; tile < tiles.count(); ++tile) {
        flow.read(codes, tiles.window(tile));
        for (Cell cell = 0; cell < static_cast<Cell>(codes.size()); ++cell) {
            INFO("tile " << tile << ", cell " << cell);
            const bool is_own = tiles.tile_of({cell / codes.columns(), cell % codes.columns()}) == tile;
            REQUIRE(flow.holds(cell) == is_own);
            if (is_own) REQUIRE(flow.cell(flow.local(cell)) == cell);
        }
    }
}

TEST_CASE("a tile knows which of its cells water of other tiles passes, each after the one it drains to") {
    Raster<FlowCode> codes(4, 8, flow_root);
    //     . . . > ↘ . . .     the tile is that of the four columns to the east
    //     . . . > > > > .
    //     . . . . . ^ . .     (2,5) drains into the way, and lets nothing in
    //     . . . . < . . .     (3,4) drains out of the tile
    for (const std::int64_t column : {3, 4, 5, 6}) codes(1, column) = flow_code(Direction::east);
    codes(0, 3) = flow_code(Direction::east);
    codes(0, 4) = flow_code(Direction::south_east);
    codes(2, 5) = flow_code(Direction::north);
    codes(3, 4) = flow_code(Direction::west);
    TilePassage passage;
    passage.read(codes, TileGrid(4, 8, 4).window(1));
    std::vector<Local> cells, below;
    for (const TilePassage::Passed& passed : passage.cells()) {
        cells.push_back(passed.cell);
        below.push_back(passed.below);
    }
    // From (0,4) by (1,5) and (1,6) to the root at (1,7), which comes first; then (1,4), whose way goes on along the other.
    CHECK(cells == std::vector<Local>{7, 6, 5, 0, 4});
    CHECK(below == std::vector<Local>{ends_here, 7, 6, 5, 5});
    const auto exits = passage.exits();
    CHECK(std::vector<Local>(exits.begin(), exits.end()) == std::vector<Local>{12});
}

}  // namespace
}  // namespace rillclock
