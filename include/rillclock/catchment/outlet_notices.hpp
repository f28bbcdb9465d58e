#pragma once

#include "rillclock/catchment/outlet.hpp"

namespace rillclock {

/// What a person should look at in a point's answer: catchments that touch the edge of the data, long ponded or floor-slope shares, a
/// fall ratio off 1, a slow tail, a sum of segments far from what end-to-end slopes give, flow beyond what its formulas were made for
/// (see path_doubts.hpp), and a head that takes more than a quarter of the time.
[[nodiscard]] Notices notices_of(const Outlet& outlet, const Grid& grid);

}  // namespace rillclock
