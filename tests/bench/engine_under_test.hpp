#pragma once

#include "bench/terrain_generator.hpp"
#include "rillclock/forest/flow_forest.hpp"
#include "rillclock/raster/ground.hpp"

#if __has_include("rillclock/terrain/tiled_directions.hpp")
#include "rillclock/terrain/tiled_directions.hpp"
#else
#include "rillclock/terrain/flow_directions.hpp"
#endif

namespace rillclock::bench {

/// The ground that all terrains of the bench lie on: cells of 1 m.
[[nodiscard]] inline Ground bench_ground() {
    return Ground::planar(metres(1), metres(1));
}

/// Directions complete, by the fastest way the library has: over tiles; in a library without it, over the whole raster
/// on one thread.
[[nodiscard]] inline Raster<FlowCode> engine_directions(const Raster<float>& elevations, const Ground& ground,
                                                        const Executor& executor) {
#if __has_include("rillclock/terrain/tiled_directions.hpp")
    return flow_codes(elevations, ground, TileGrid(elevations.rows(), elevations.columns()), executor);
#else
    (void)executor;
    Elevations wide(elevations.rows(), elevations.columns());
    std::copy(elevations.values().begin(), elevations.values().end(), wide.values().begin());
    return flow_forest_of(wide, ground).codes();
#endif
}

}  // namespace rillclock::bench
