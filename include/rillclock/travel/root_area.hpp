#pragma once

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/raster/grid.hpp"

namespace rillclock {

/// A root, where water leaves the data, and all that drains to it.
struct RootArea {
    Cell cell = no_cell;
    FixedArea area = 0;   ///< contributing area
};

}  // namespace rillclock
