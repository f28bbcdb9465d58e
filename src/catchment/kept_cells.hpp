#pragma once

#include <span>
#include <unordered_map>
#include <unordered_set>
#include <vector>

#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

/// The cells that paths from kept heads run through, and those that sheet flow on them hangs on.
struct KeptCells {
    std::vector<Cell> path;                    ///< each once
    std::unordered_set<Cell> starts;           ///< of path cells: heads, points, and where paths meet
    std::unordered_set<Cell> ends;             ///< last points: nothing below them counts
    std::unordered_set<Cell> sheet;            ///< within the sheet limit of the divide, and all that drains to such
    std::vector<PointNumber> owners;           ///< the first point below each head
};

/// Walks the heads' paths down to the last points. `heads` by cell, each once.
[[nodiscard]] KeptCells kept_cells(const TiledTravel& travel, std::span<const Cell> heads, std::span<const DesignPoint> points,
                                   Length greatest_sheet_limit);

}  // namespace rillclock
