#pragma once

#include "rillclock/forest/flow_code.hpp"

namespace rillclock {

/// Of a cell that has no lower neighbour and from which water does not leave the data: its way is still to be found.
inline constexpr FlowCode flow_undecided = 10;

/// The elevation of a cell that swallows the water of all its neighbours: a root wherever it lies. Terrain edits are made of it.
/// Far below any ground, so that a neighbour's own elevation is lost in the fall and it drains to the nearest such cell; a power of
/// two, so that single and double precision hold the same.
inline constexpr double swallowing_level = -0x1p100;

}  // namespace rillclock
