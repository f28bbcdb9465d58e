#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/travel/step.hpp"

namespace rillclock {

/// A cell of a flow path with all that is asked of it: so paths need no field of the whole raster.
struct PathCell {
    Cell cell = no_cell;
    StepView step;                    ///< out of the cell
    double spill = 0.0;               ///< spill elevation, in elevation units
    FixedLength flow_distance = 0;    ///< to the root
    StepTime time_to_root;
    std::uint8_t surface = 0;         ///< position of the surface class
};

/// A flow path, from its head down to its end.
using PathCells = std::vector<PathCell>;

/// What is the same for all paths of a study.
struct PathGround {
    std::span<const SurfaceHydraulics> classes;
    double metres_per_elevation_unit = 1.0;
    const TravelRules& rules;
    double storm_factor = 1.0;   ///< of the storm that paths are timed under
};

}  // namespace rillclock
