#pragma once

#include <vector>

#include "rillclock/raster/grid_shapes.hpp"

namespace rillclock {

/// The ground that a set of cells covers, as polygons along the edges of cells, in the coordinates of the grid.
///
/// Cells that share an edge are of one polygon; where two parts touch at a corner alone they are polygons of their own. Each polygon is valid by
/// the rules of simple features: the outer ring first, counterclockwise (north up), then its holes, clockwise; rings are closed and have corners
/// only where they turn; rings of one polygon touch at most at corners. Polygons are in the order of their northernmost, westernmost cell.
///
///     # # . #        two polygons: the three cells of the north-west and the one in the north-east
///     # . . .
///
/// `cells` in any order, each once. Cost: that of sorting them; memory for each run of cells in a row, not for each cell.
[[nodiscard]] std::vector<Polygon> cell_outlines(std::vector<Cell> cells, const Grid& grid);

}  // namespace rillclock
