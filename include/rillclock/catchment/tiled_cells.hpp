#pragma once

#include <optional>
#include <span>
#include <unordered_map>
#include <vector>

#include "rillclock/catchment/path_cell.hpp"
#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

/// Single cells looked up in tiles that are made again for them, each tile once. Cost: a pass over the tiles that hold any of the cells.

/// Contributing areas of cells; voids are left out. `cells` may repeat.
[[nodiscard]] std::unordered_map<Cell, FixedArea> areas_at(const TiledTravel& travel, std::vector<Cell> cells);

/// All about cells that paths run through, each once, by index. `cells` may repeat.
[[nodiscard]] std::vector<PathCell> path_cells_by_index(const TiledTravel& travel, std::vector<Cell> cells);
/// The same, to be asked by cell.
[[nodiscard]] std::unordered_map<Cell, PathCell> path_cells_at(const TiledTravel& travel, std::vector<Cell> cells);

/// All about a cell of the tile that `read_tile` left on the desk, or `read_ways` for that cell.
[[nodiscard]] PathCell path_cell(const TiledTravel& travel, const TileDesk& desk, Local local, Cell cell);

/// The next point below each point (by number − 1).
[[nodiscard]] std::vector<PointNumber> next_points(const Raster<FlowCode>& codes, const TiledOwners& owners,
                                                   std::span<const DesignPoint> points, const Executor& executor);

}  // namespace rillclock
