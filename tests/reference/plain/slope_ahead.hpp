#pragma once

#include "reference/plain/flow_forest.hpp"
#include "reference/plain/steepest_descent.hpp"
#include "rillclock/core/fixed_point.hpp"
#include "rillclock/travel/slope_ahead.hpp"

namespace rillclock {

struct SlopeInputs {
    const FlowForest& forest;
    const Raster<FixedLength>& flow_distance;  ///< to the root
    const Elevations& spill;
    double metres_per_elevation_unit;
    const Raster<GroundKind>& kind;
};

struct SlopeAhead {
    Raster<float> slope;               ///< rise over run, at least the floor of the cell's kind; 0 at voids
    Raster<std::uint8_t> falls_within; ///< 1 where the path falls more than the vertical step within the window
};

/// The slope ahead of every cell (see rillclock/travel/slope_ahead.hpp). Cost: O(log path length) a cell, by bisection on the path below, kept
/// on a stack while the forest is walked upward.
[[nodiscard]] SlopeAhead slope_ahead(const SlopeInputs& inputs, const SlopeRules& rules);

}  // namespace rillclock
