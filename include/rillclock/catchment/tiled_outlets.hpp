#pragma once

#include "rillclock/catchment/outlet.hpp"
#include "rillclock/catchment/tiled_cells.hpp"

namespace rillclock {

/// Works out every point from the heads of its paths, in the order of their numbers. The tiles that paths cross are made once each, and so
/// are the pieces of each step, however many paths take it.
[[nodiscard]] std::vector<Outlet> outlets_of(const TiledTravel& travel, std::span<const DesignPoint> points, const PointTree& tree,
                                             const std::vector<PointHeads>& heads, const OutletRules& rules);

}  // namespace rillclock
