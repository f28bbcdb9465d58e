#pragma once

#include <cstdint>

#include "reference/plain/steepest_descent.hpp"

namespace rillclock {

/// Which basin each cell drains into, before depressions are opened: 0 the outside (water leaves the data), else a pit or a closed
/// flat, numbered from 1 by the smallest of its lowest cells. Voids keep 0.
struct Basins {
    Raster<std::uint32_t> label;
    std::uint32_t count = 0;  ///< of basins, without the outside
};

/// Labels every cell with the basin at the end of its way. Takes codes in which open flats are settled. Linear; no recursion.
[[nodiscard]] Basins label_basins(const Elevations& elevations, const Raster<FlowCode>& codes);

}  // namespace rillclock
