#pragma once

#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

/// What the slope ahead of a tile's cells needs of the whole raster: fields that are kept for all cells.
struct SlopeGround {
    const TiledGround& in;
    const SpillStore& spill;
    const SlopeRules& rules;
};

/// The slope ahead of every cell of a tile whose flow, flow distances and spill elevations were read, by slope_ahead.hpp's rules. `kind` is read for
/// cells beyond the tile too; open water of this tile that falls on its way is made channel in it. `slope` is set for the tile alone.
void find_tile_slopes(const SlopeGround& ground, const TileDesk& desk, Raster<GroundKind>& kind, Raster<float>& slope);

}  // namespace rillclock
