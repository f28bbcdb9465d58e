#pragma once

#include <functional>
#include <vector>

#include "rillclock/raster/grid.hpp"

namespace rillclock {

/// Corners of a line, in the coordinates of the grid's reference system.
using Line = std::vector<Place>;

/// An outer ring and its holes, in any order; whether a ring is closed by repeating its first corner does not matter.
struct Polygon {
    std::vector<Line> rings;
};

/// Cells in the order in which they are passed, each a neighbour of the one before.
using Way = std::vector<Cell>;

/// Every cell that a line touches on its way, in order: each shares an *edge* with the one before, so that no diagonal gap is left.
///
///     a line ──►      its cells          where it runs exactly through a corner it goes along the row first:
///     . . . /.        . . . #            . ./.        . # #
///     . . / . .       . . # #            . / .        . # .
///     ./ . . .        # # # .            /. .         # # .
///
/// Off the grid there are no cells: a line that leaves and comes back has several ways. A line within one cell has a way of one cell;
/// a line that is nowhere on the grid has none. Cost: linear in the cells on the grid and in the corners.
[[nodiscard]] std::vector<Way> cells_crossed(const Line& line, const Grid& grid);

/// A way as water can follow it: without loops, and without corners that a diagonal step saves.
///
/// - Where the way comes back to a cell that it has passed, all that it passed in between is left out.
/// - Then a cell is left out where the cell before it and the cell after it are neighbours:  # # .  becomes  # . .
///                                                                                            . # #            . # #
/// The first and the last cell stay. `columns` are those of the grid.
[[nodiscard]] Way shortened(const Way& way, std::int64_t columns);

/// The cells whose centres lie within a polygon (even–odd rule; of a centre on the outline, the western and northern side counts as
/// within), by increasing index. A polygon that holds no centre claims the cell of its first corner instead, where that is on the grid.
/// Cost: linear in the cells and in the rows that each edge crosses.
[[nodiscard]] std::vector<Cell> cells_within(const Polygon& polygon, const Grid& grid);

/// Calls `look(first, end)` for every run of cells of one row whose centres lie within a polygon, by increasing index; the same cells as
/// above, but for the one of a polygon without centres. For polygons too large to list their cells.
void for_each_run_within(const Polygon& polygon, const Grid& grid, const std::function<void(Cell first, Cell end)>& look);

}  // namespace rillclock
