#pragma once

#include "rillclock/catchment/outlet.hpp"

namespace rillclock {

/// What a person should look at in a point's answer: catchments that touch the edge of the data, long ponded or floor-slope shares, a
/// fall ratio off 1, a slow tail, and a sum of segments far from what end-to-end slopes give.
[[nodiscard]] Notices notices_of(const Outlet& outlet, const Grid& grid);

}  // namespace rillclock
