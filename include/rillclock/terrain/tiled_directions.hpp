#pragma once

#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/tiles/executor.hpp"
#include "rillclock/tiles/tile_grid.hpp"

namespace rillclock {

/// The flow codes of a terrain, found tile by tile: what `flow_forest_of` finds in a whole raster, cell for cell,
/// whatever the tiles and the number of threads.
///
/// `elevations` are float or double, NaN where void; floats are compared as the doubles that they are. `tiles` cuts the
/// same raster.
///
/// Method: every stage is local work in each tile with a halo of one cell, a small graph between tiles, and local work
/// again (Barnes 2016, 2017). What one stage hands to the next is one code and one number a cell, and a summary a tile;
/// so the answer does not depend on which tile was worked first. Memory: 5 bytes a cell beyond the elevations, and
/// about 40 bytes a basin. Cost: linear in the cells but for log factors on what lies on borders of basins.
template <class Z>
[[nodiscard]] Raster<FlowCode> flow_codes(const Raster<Z>& elevations, const Ground& ground, const TileGrid& tiles,
                                          const Executor& executor);

}  // namespace rillclock
