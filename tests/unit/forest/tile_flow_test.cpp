#include "rillclock/forest/tile_flow.hpp"

#include <catch2/catch.hpp>

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

}  // namespace
}  // namespace rillclock
