#pragma once

#include "rillclock/terrain/descent.hpp"
#include "tiled_terrain.hpp"

namespace rillclock {

/// Distance of a cell of level ground that is not reached yet.
inline constexpr std::uint32_t unreached = UINT32_MAX;

/// Mark of a cell of an open flat while its direction is awaited; the two lowest bits are its distance to the exit
/// modulo 4.
inline constexpr FlowCode flow_awaited = 16;

/// Whether a cell's direction is still to be found: undecided or awaited.
[[nodiscard]] constexpr bool is_flat(FlowCode code) {
    return code >= flow_undecided;
}

/// Where a tile has level ground that is to be settled: nowhere; within it; or where it may go on in other tiles.
enum class LevelGround : std::uint8_t { none, within, across };

/// Whether an undecided cell of the tile's rim lies level with a neighbour; where none does, no way along level ground crosses the rim. Takes
/// elevations with their halo, and codes.
template <class Z>
[[nodiscard]] bool has_level_rim(const Desk<Z>& desk);

/// What is asked of every cell of a tile with level ground, row by row in vector registers. All take elevations and
/// codes with their halo, and cost time linear in the cells.

/// Sets `desk.numbers`: 1 where a flat cell has a level neighbour that is decided, unreached at other flat cells, 0
/// elsewhere.
template <class Z>
void begin_distance_to_exit(Desk<Z>& desk);

/// Sets `desk.numbers`: 1 where an awaited cell has a higher neighbour, unreached at other awaited cells, 0 elsewhere.
template <class Z>
void begin_distance_from_higher(Desk<Z>& desk);

/// Sets `desk.numbers`: unreached at flat cells, 0 elsewhere.
template <class Z>
void begin_distance_to_entry(Desk<Z>& desk);

/// Turns undecided cells that have a distance to the exit into awaited ones.
template <class Z>
void mark_awaited(Desk<Z>& desk);

/// Gives awaited cells, in `desk.settled`, the direction of the first level neighbour that is one step nearer to the
/// exit; among these the one farthest from higher ground, by `desk.numbers` with their halo.
template <class Z>
void decide_awaited(Desk<Z>& desk);

}  // namespace rillclock
