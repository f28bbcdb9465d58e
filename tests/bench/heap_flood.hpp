#pragma once

#include "rillclock/raster/raster.hpp"

namespace rillclock::bench {

/// The depression-filled surface by the textbook method, against which the engine's directions are measured.
///
/// A priority queue holds the rim of what is flooded; its lowest cell is taken, and its neighbours are entered at their
/// own elevation or the level of the water, whichever is higher (R. Barnes, C. Lehman, D. Mulla, Priority-flood,
/// Computers & Geosciences 62, 2014, algorithm 1). All cells must hold finite elevations. O(n log n).
[[nodiscard]] Raster<float> heap_flooded(const Raster<float>& elevations);

}  // namespace rillclock::bench
