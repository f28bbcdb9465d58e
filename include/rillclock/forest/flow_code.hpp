#pragma once

#include <cstdint>

#include "rillclock/raster/direction.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// What a cell does with its water: a number 0 to 7 is a Direction; the others are below. A raster of them is a *flow forest*: each cell names
/// the one neighbour it drains to, every cell but voids reaches a root, and there is no circle.
using FlowCode = std::uint8_t;
inline constexpr FlowCode flow_root = 8;  ///< water leaves the data here, or stays
inline constexpr FlowCode flow_void = 9;  ///< no data, no flow

/// The code of a cell that drains in a direction.
[[nodiscard]] constexpr FlowCode flow_code(Direction d) { return static_cast<FlowCode>(d); }
/// Whether the cell drains to a neighbour; else it is a root or void.
[[nodiscard]] constexpr bool is_direction(FlowCode code) { return code < 8; }

}  // namespace rillclock
