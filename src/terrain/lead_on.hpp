#pragma once

#include <vector>

#include "rillclock/forest/flow_code.hpp"
#include "rillclock/terrain/descent.hpp"
#include "rillclock/terrain/elevation_store.hpp"
#include "rillclock/terrain/flow_lines.hpp"

namespace rillclock {

/// The elevation of barriers while flow is found, as far above the ground as lines lie below it.
inline constexpr double wall_level = -swallowing_level;

/// Leads the water on from the ends of lines, in codes where lines are followed already and their ends are roots: see `edited_flow`,
/// 3. `elevations` are those of the routing, barriers at the `wall_level`. Returns the ends where the water stays.
///
/// Ends are taken by increasing cell. From each the ground is flooded, always at the cell that is reached at the lowest level, then at
/// the lowest cell, then at the smallest index; the flood runs through the ways of unsettled lines that it meets, and goes on at
/// their ends. Source: Barnes, Lehman & Mulla 2014 (flooding from a heap). Cost: O(n log n) in the cells flooded, one end after the other; the
/// flood reaches as far over the raster as the pond would that forms there.
[[nodiscard]] std::vector<Cell> lead_on(const ElevationStore& elevations, const FlowLines& lines, Raster<FlowCode>& codes);

}  // namespace rillclock
