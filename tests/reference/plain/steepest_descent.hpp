#pragma once

#include "rillclock/raster/ground.hpp"
#include "rillclock/raster/raster.hpp"
#include "rillclock/terrain/descent.hpp"

namespace rillclock {

/// Elevations of the cells in the file's own unit, NaN where void.
using Elevations = Raster<double>;

/// Whether water may leave the data from a cell: it lies on the edge of the grid or has a void beside it.
[[nodiscard]] bool is_border(const Elevations& elevations, RowColumn at);

/// The neighbour with the greatest fall over distance, of those strictly lower; the first in the order of Direction among equals.
///
/// A border cell with no lower neighbour is a root: there the water leaves the data. An inner one is `flow_undecided`, but for a
/// cell at the `swallowing_level`, which is a root. Falls are
/// compared in double precision over the ground lengths of each row, so rectangular and geographic cells are judged by true slope.
/// Source: the D8 rule, O'Callaghan & Mark 1984.
[[nodiscard]] Raster<FlowCode> steepest_descent(const Elevations& elevations, const Ground& ground);

/// Calls `visit(cell, direction)` for each neighbour on the grid, in the order of Direction.
template <class Visit>
void for_each_neighbour(const Elevations& z, Cell cell, Visit visit) {
    const RowColumn at{cell / z.columns(), cell % z.columns()};
    for (const Direction d : all_directions) {
        const RowColumn beside = neighbour(at, d);
        if (beside.row < 0 || beside.row >= z.rows() || beside.column < 0 || beside.column >= z.columns()) continue;
        visit(static_cast<Cell>(beside.row * z.columns() + beside.column), d);
    }
}

}  // namespace rillclock
