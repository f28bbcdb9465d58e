#pragma once

#include <cmath>

#include "patch.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/terrain/descent.hpp"

namespace rillclock {

/// Whether every neighbour of a cell has data; the patch holds NaN beyond the raster too, so this is "not a border
/// cell".
template <class Z>
[[nodiscard]] bool is_surrounded(const Patch<Z>& z, Position p) {
    bool surrounded = true;
    for (const Position step : z.shape().steps()) surrounded = surrounded && !std::isnan(z[p + step]);
    return surrounded;
}

/// Whether a neighbour of a cell has the same elevation.
template <class Z>
[[nodiscard]] bool has_level_neighbour(const Patch<Z>& z, Position p) {
    bool level = false;
    for (const Position step : z.shape().steps()) level = level || z[p + step] == z[p];
    return level;
}

/// For each row of a patch, the first halo row being row 0, whether a value of it is missing.
template <class Z>
[[nodiscard]] std::vector<bool> rows_with_voids(const Patch<Z>& z);

/// Writes the code of each cell of a tile: the direction of steepest descent, else `flow_root` at border cells,
/// `flow_void` at voids and `flow_undecided`. Returns whether the tile has level ground: an undecided cell with a level
/// neighbour.
///
/// Promise: the codes of `steepest_descent`. Falls are compared in double precision whatever elevations are stored in.
/// Source: O'Callaghan & Mark 1984 (steepest of eight directions; from memory). Cost: linear, in vector registers; voids and undecided
/// cells are looked at again one by one.
template <class Z>
[[nodiscard]] bool descend_in_tile(const Patch<Z>& z, const Ground& ground, Patch<FlowCode>& codes);

}  // namespace rillclock
