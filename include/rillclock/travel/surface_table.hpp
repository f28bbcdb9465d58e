#pragma once

#include <cstdint>
#include <memory>
#include <optional>
#include <vector>

#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/velocity_table.hpp"
#include "rillclock/raster/raster.hpp"
#include "rillclock/surface/land.hpp"

namespace rillclock {

/// What step times need to know of a surface class.
struct SurfaceHydraulics {
    double sheet_n = 0.0;                          ///< roughness of sheet flow
    Speed shallow_k = {};                          ///< velocity of shallow flow at a slope of 1: V = k·√S
    std::optional<Length> water_depth = {};        ///< mean depth, where the class is open water
    double sheet_factor = 1.0;                     ///< of kinematic sheet flow's time: C^-0.4 where it takes C·i
    std::shared_ptr<const VelocityLine> shallow_line = {};  ///< velocity by slope where a chart gives it, in place of shallow_k
};

/// The surface of each cell: a position in `classes`, and its soil where that differs from cell to cell.
struct SurfaceTable {
    std::vector<SurfaceHydraulics> classes;
    Raster<std::uint8_t> index;
    Raster<CellSoil> soil = {};                        ///< without cells where one soil is everywhere
    CellSoil soil_everywhere = CellSoil::unknown;      ///< where `soil` has no cells

    /// The hydraulics of a cell's class.
    [[nodiscard]] const SurfaceHydraulics& at(Cell cell) const { return classes[index[cell]]; }
    /// The soil of a cell.
    [[nodiscard]] CellSoil soil_at(Cell cell) const { return soil.size() > 0 ? soil[cell] : soil_everywhere; }
};

}  // namespace rillclock
