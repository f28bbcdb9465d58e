#pragma once

#include <cstdint>
#include <vector>

#include "reference/plain/steepest_descent.hpp"

namespace rillclock {

/// Gives a way out to the undecided cells of *open* flats: level ground some cell of which is already decided.
///
/// Each takes the first level neighbour, in the order of Direction, that is one step nearer to the decided cells (exact
/// breadth-first distance, a unique integer field); among these one that is farther from higher ground (a second such field), so
/// that flow gathers away from the foot of slopes. Undecided afterwards are pits and closed flats alone.
/// Linear. Source: Garbrecht & Martz 1997 and Barnes, Lehman & Mulla 2014, as two fields asked in turn rather than summed.
void settle_open_flats(const Elevations& elevations, Raster<FlowCode>& codes);

/// Directs the closed flats that water enters at `entries` (already decided): each cell takes the first level neighbour that is one
/// step nearer to its entry. Linear in the cells of the flats.
void settle_closed_flats(const Elevations& elevations, const std::vector<Cell>& entries, Raster<FlowCode>& codes);

}  // namespace rillclock
