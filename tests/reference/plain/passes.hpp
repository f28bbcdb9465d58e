#pragma once

#include <vector>

#include "reference/plain/basins.hpp"
#include "rillclock/terrain/passes.hpp"

namespace rillclock {

/// The lowest pass between each two neighbouring basins, lowest first. Every border cell is also a possible pass to the outside, at
/// its own elevation. Cost: O(p log p) in the neighbouring pairs of cells with different basins.
[[nodiscard]] std::vector<Pass> find_passes(const Elevations& elevations, const Basins& basins);

/// The pass over which each basin (by number; entry 0, the outside, is unused) sends its water on, so that every basin reaches the
/// outside over passes that are as low as they can be: the minimum spanning tree, rooted at the outside.
/// Source: Cordonnier, Bovy & Braun 2019.
[[nodiscard]] std::vector<Pass> passes_to_outside(const Elevations& elevations, const Basins& basins);

}  // namespace rillclock
