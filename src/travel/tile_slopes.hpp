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
///
/// Method: the tree of cells above each exit and root of the tile is walked upward with the path below on a stack. Distance and level never
/// fall along it, so both places are found by bisection from where the cell below found its own. Source: the method is ours; that noise makes
/// slopes of channel profiles wrong, and what to do about it otherwise: Schwanghart & Scherler 2017; the weights of steps that
/// distances are made of: Butt & Maragos 1998 (ground.hpp). Cost: O(log n) a cell, n being the cells of the path within the window or within
/// reach of the vertical step; and for each exit of the tile once the steps beyond it that its searches need, which may run through
/// other tiles down to the root: floors bound them (`vertical_step` over the floor), so a flat river with a thousand steep
/// tributaries costs each tributary's exit that length and no more.
void find_tile_slopes(const SlopeGround& ground, const TileDesk& desk, Raster<GroundKind>& kind, Raster<float>& slope);

}  // namespace rillclock
