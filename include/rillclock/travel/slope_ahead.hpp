#pragma once

#include <cstdint>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/forest/flow_forest.hpp"
#include "rillclock/terrain/descent.hpp"
#include "rillclock/travel/travel_rules.hpp"

namespace rillclock {

/// What a cell's ground asks of the water, before slope is known.
enum class GroundKind : std::uint8_t { overland, channel, water };

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

/// The slope ahead of every cell: the fall of spill elevation over the next `window` of flow path, if that is at least
/// `vertical_step`; otherwise `vertical_step` over the distance at which the path has fallen by it.
///
/// - Both places are interpolated between two cells, so the answer does not jump with the cell size.
/// - For an overland cell the window ends where the path turns into channel or water, if that comes first.
/// - Both searches end at the root; a path that falls less than the step before it gets its whole fall over its whole length. A
///   root's own slope is the floor of its kind.
/// - No slope is under the floor of the cell's kind (or `least_slope` where that is 0).
///
/// Why: time grows with 1/√S, so noise in a profile always makes water slower, and a fall credited to the flat before it makes it
/// faster. Cost: O(log path length) a cell, by bisection on the path below, kept on a stack while the forest is walked upward.
[[nodiscard]] SlopeAhead slope_ahead(const SlopeInputs& inputs, const SlopeRules& rules);

}  // namespace rillclock
