#pragma once

#include <span>
#include <vector>

#include "rillclock/catchment/segments.hpp"

namespace rillclock {

/// Where segments begin, as positions among the pieces; the first is 0.
[[nodiscard]] std::vector<std::size_t> segment_starts(std::span<const PathPiece> pieces, std::span<const SurfaceHydraulics> classes,
                                                      double shortest_m);

}  // namespace rillclock
