#pragma once

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/travel/slope_ahead.hpp"
#include "rillclock/travel/surface_table.hpp"
#include "rillclock/travel/travel_rules.hpp"

namespace rillclock {

/// What a cell's ground is before slope is known: open water by its cover, channel by contributing area, else overland.
/// `cell_area` is that of the cell alone.
[[nodiscard]] GroundKind kind_of(const SurfaceHydraulics& surface, const ChannelRules& rules, FixedArea contributing,
                                 FixedArea cell_area);

}  // namespace rillclock
