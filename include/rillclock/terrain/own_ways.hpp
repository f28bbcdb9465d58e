#pragma once

#include <vector>

#include "rillclock/core/quantity.hpp"
#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/terrain/flow_lines.hpp"

namespace rillclock {

/// Where the water of a mapped line would go by the ground alone.
struct OwnWay {
    Cell start = no_cell;       ///< where the line begins, or where lines meet and go on as one
    std::vector<Cell> cells;    ///< from the start on; see below where it ends
    Length departure;           ///< of the cell that is farthest from the way the water is led
    Cell farthest = no_cell;    ///< that cell
    bool comes_back = false;    ///< whether it comes back to the way the water is led
};

/// The flow with edits, and the flow of the ground alone.
struct BothFlows {
    const Raster<FlowCode>& led;
    const Raster<FlowCode>& own;
    const Ground& ground;
};

/// The own ways that depart by more than `than` from the way their water is led, the farthest first; those equally far by their start.
///
/// Lines are looked at reach by reach: from where a line begins, or lines meet, to where it meets another, or ends. From the start of a
/// reach the water is followed twice: as it is led, over the line and on to its root, and by the ground alone. The own way ends where it
/// first comes back to the way led, at the end of the reach or beyond, or at its own root. Its departure is the greatest distance, in a
/// straight line between cell centres, of one of its cells from the nearest cell of the way led up to there. On a geographic grid a
/// distance is measured in the lengths of the row of the own way's cell.
///
///     led      → → → → ↓        the crossing leads the water straight through the embankment; by the ground alone it
///     own      ↓       ↓        goes round by the low end: it departs by two cells, and comes back
///              → → → → →
///
/// Cost: the length of both ways for each reach, and for each way a search that looks at few of the pairs of their cells.
[[nodiscard]] std::vector<OwnWay> own_ways(const FlowLines& lines, const BothFlows& flows, Length than);

}  // namespace rillclock
