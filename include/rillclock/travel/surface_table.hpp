#pragma once

#include <cstdint>
#include <optional>
#include <vector>

#include "rillclock/core/quantity.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// What step times need to know of a surface class.
struct SurfaceHydraulics {
    double sheet_n = 0.0;                          ///< roughness of sheet flow
    Speed shallow_k = {};                          ///< velocity of shallow flow at a slope of 1: V = k·√S
    std::optional<Length> water_depth = {};        ///< mean depth, where the class is open water
};

/// The surface of each cell: a position in `classes`.
struct SurfaceTable {
    std::vector<SurfaceHydraulics> classes;
    Raster<std::uint8_t> index;

    [[nodiscard]] const SurfaceHydraulics& at(Cell cell) const { return classes[index[cell]]; }
};

}  // namespace rillclock
