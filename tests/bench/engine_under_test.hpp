#pragma once

#include "bench/terrain_generator.hpp"
#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/terrain/tiled_directions.hpp"

namespace rillclock::bench {

/// The ground that all terrains of the bench lie on: cells of 1 m.
[[nodiscard]] inline Ground bench_ground() {
    return Ground::planar(metres(1), metres(1));
}

/// Directions complete, as a run of the command finds them: over tiles of the usual side.
[[nodiscard]] inline Raster<FlowCode> engine_directions(const Raster<float>& elevations, const Ground& ground,
                                                        const Executor& executor) {
    return flow_codes(elevations, ground, TileGrid(elevations.rows(), elevations.columns()), executor);
}

}  // namespace rillclock::bench
