#pragma once

#include <span>
#include <vector>

#include "rillclock/catchment/outlet.hpp"
#include "rillclock/catchment/restated_path.hpp"
#include "rillclock/catchment/tiled_cells.hpp"

namespace rillclock {

/// A point of whose own subarea overland flow is stated.
struct RestatedPoint {
    PointNumber number = 0;
    StatedOverland stated;
};

/// The own times of those points: from the last cell of the own subarea, under the point's storm, to the point, with sheet flow as stated.
/// The tiles that these paths cross are made once each.
[[nodiscard]] std::vector<StepTime> restated_own_times(const TiledTravel& travel, std::span<const Outlet> outlets,
                                                       std::span<const RestatedPoint> points);

}  // namespace rillclock
