#include "rillclock/tiles/tile_grid.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

TEST_CASE("tiles cover a raster without gap or overlap, those at the far edges being smaller") {
    const TileGrid tiles(5, 7, 3);
    REQUIRE(tiles.count() == 6);
    std::int64_t cells = 0;
    for (Tile tile = 0; tile < tiles.count(); ++tile) {
        const Window window = tiles.window(tile);
        cells += window.size();
        CHECK(tiles.tile_of({window.row, window.column}) == tile);
        CHECK(tiles.tile_of({window.row + window.rows - 1, window.column + window.columns - 1}) == tile);
    }
    CHECK(cells == 35);
    CHECK(tiles.window(5).rows == 2);
    CHECK(tiles.window(5).columns == 1);
}

}  // namespace
}  // namespace rillclock
