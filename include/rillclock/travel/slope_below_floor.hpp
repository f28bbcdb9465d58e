#pragma once

#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

/// The slope ahead of a cell by slope_ahead.hpp's rules, with floors of one's own: what lies under the floor that `travel` was made with.
/// `flow_distance`: of the cell, to its root. A root's own slope is the floor of its kind. Cost: the path below the cell, as far as
/// its slope needs it. Every slope above both floors is the one that `travel` has, bit for bit.
[[nodiscard]] float slope_with_floors(const TiledTravel& travel, Cell cell, FixedLength flow_distance, double overland_floor,
                                      double channel_floor);

}  // namespace rillclock
