#pragma once

#include <compare>
#include <cstdint>
#include <vector>

#include "rillclock/terrain/basins.hpp"

namespace rillclock {

/// Where water may cross between two basins: from `cell` one step in the way of `code`, or the other way; `flow_root` as code
/// means out of the data.
///
/// Passes are compared by (higher elevation, lower elevation, cell, code), a strict total order, `cell` being the one of the two
/// with the smaller index: therefore the minimum spanning tree over them is unique.
struct Pass {
    double higher = 0.0;
    double lower = 0.0;
    Cell cell = no_cell;
    FlowCode code = flow_root;
    std::uint32_t basin = 0;         ///< of `cell`
    std::uint32_t other_basin = 0;   ///< at the other side; 0 the outside
};

[[nodiscard]] bool lies_lower(const Pass& a, const Pass& b);

/// The lowest pass between each two neighbouring basins, lowest first. Every border cell is also a possible pass to the outside, at
/// its own elevation. Cost: O(p log p) in the neighbouring pairs of cells with different basins.
[[nodiscard]] std::vector<Pass> find_passes(const Elevations& elevations, const Basins& basins);

/// The pass over which each basin (by number; entry 0, the outside, is unused) sends its water on, so that every basin reaches the
/// outside over passes that are as low as they can be: the minimum spanning tree, rooted at the outside.
/// Source: Cordonnier, Bovy & Braun 2019.
[[nodiscard]] std::vector<Pass> passes_to_outside(const Elevations& elevations, const Basins& basins);

}  // namespace rillclock
