#pragma once

#include "rillclock/raster/ground.hpp"
#include "rillclock/terrain/elevation_store.hpp"
#include "rillclock/tiles/executor.hpp"

namespace rillclock {

/// The steepest slope between two neighbours, and where.
struct SteepestPair {
    double slope = 0.0;     ///< rise over run
    Cell cell = no_cell;    ///< the upper of the two; none where no two cells have data
};

/// Finds the steepest drop between neighbouring cells: slopes that no ground has point at a wrong vertical unit, or at spikes.
/// `metres_per_unit` belongs to the elevations.
[[nodiscard]] SteepestPair steepest_pair(const ElevationStore& elevations, const Ground& ground, double metres_per_unit,
                                         const Executor& executor);

}  // namespace rillclock
