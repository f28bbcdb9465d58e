#pragma once

#include <cstdint>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/raster.hpp"
#include "rillclock/travel/travel_rules.hpp"

namespace rillclock {

/// What a cell's ground asks of the water, before slope is known. The slope ahead of a cell depends on it:
///
/// The slope ahead is the fall of spill elevation over the next `window` of flow path, if that is at least `vertical_step`; otherwise
/// `vertical_step` over the distance at which the path has fallen by it.
///
/// - Both places are interpolated between two cells, so the answer does not jump with the cell size.
/// - For an overland cell the window ends where the path turns into channel or water, if that comes first.
/// - Both searches end at the root; a path that falls less than the step before it gets its whole fall over its whole length. A
///   root's own slope is the floor of its kind.
/// - No slope is under the floor of the cell's kind (or `least_slope` where that is 0).
///
/// Why: time grows with 1/√S, so noise in a profile always makes water slower, and a fall credited to the flat before it makes it
/// faster.
enum class GroundKind : std::uint8_t { overland, channel, water };

}  // namespace rillclock
