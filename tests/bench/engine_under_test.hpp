#pragma once

#include <algorithm>

#include "bench/terrain_generator.hpp"
#include "rillclock/terrain/flow_directions.hpp"

namespace rillclock::bench {

/// Elevations in the type that the engine takes.
using EngineElevations = Elevations;

[[nodiscard]] inline EngineElevations engine_elevations(TerrainKind kind, std::int64_t side) {
    const Raster<float> terrain = terrain_raster(TerrainGenerator(kind), side, side, Executor());
    EngineElevations elevations(side, side);
    std::copy(terrain.values().begin(), terrain.values().end(), elevations.values().begin());
    return elevations;
}

/// Directions complete, by whatever the command itself calls. It works on one thread whatever the executor has.
[[nodiscard]] inline FlowForest engine_directions(const EngineElevations& elevations, const Ground& ground, const Executor&) {
    return flow_forest_of(elevations, ground);
}

}  // namespace rillclock::bench
