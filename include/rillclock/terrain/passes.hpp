#pragma once

#include <compare>
#include <cstdint>
#include <vector>

#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/grid.hpp"

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

/// A strict and total order of passes: by the higher of their two levels, then the lower, then cell and direction.
[[nodiscard]] bool lies_lower(const Pass& a, const Pass& b);

}  // namespace rillclock
