#pragma once

#include <array>
#include <cstddef>
#include <span>
#include <vector>

#include "rillclock/catchment/flow_path.hpp"

namespace rillclock {

/// The flow path from a design point to the next one below.
struct PointWay {
    std::vector<Cell> cells;                    ///< from the point's to the next point's, both included; none where there is no way
    FixedLength length = 0;
    StepTime time;
    double fall_m = 0.0;                        ///< of spill elevation
    std::array<double, 5> regime_length_m = {};  ///< by the number of the regime

    /// Share of the length that runs in a regime; 0 where the way has no length.
    [[nodiscard]] double share(Regime regime) const;
};

/// `path`: the cells from one point to the next, both included, with their pieces; none makes a way of nothing.
[[nodiscard]] PointWay way_of(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces);

}  // namespace rillclock
