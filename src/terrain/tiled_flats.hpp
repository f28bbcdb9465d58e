#pragma once

#include <span>

#include "carving.hpp"
#include "level_distances.hpp"

namespace rillclock {

/// Gives a way out to the undecided cells of open flats, as `settle_open_flats` does in a whole raster, in a tile that has no level rim: no other
/// tile is asked, and nothing is kept but `desk.codes`. Takes elevations with their halo, and codes. Cost: five times the tile, in one visit.
template <class Z>
void settle_open_flats_within(Desk<Z>& desk);

/// The same in the tiles whose level ground may go on in one another, as `level` says by tile.
///
/// Two exact fields one after the other in the same memory, distance to the exit and distance from higher ground. Of
/// the first only its remainder by 4 is kept, in the code: neighbours on level ground differ by at most 1, so it tells
/// which of them is nearer. Source: Garbrecht & Martz 1997 (from memory) and Barnes, Lehman & Mulla 2014 (drainage over flats), as two
/// fields asked in turn and not summed. Cost: these tiles, five times, and once more for each border that a way along level ground
/// crosses.
template <class Z>
void settle_open_flats(TiledTerrain<Z>& terrain, std::span<const LevelGround> level);

/// Directs the closed flats towards their entries, and the entries themselves; `entries` by tile, `closed` where tiles have closed flats.
/// As `settle_closed_flats` in a whole raster. Source: the same, from the entry, so that a lake drains to its own way out. Cost: the tiles
/// with closed flats, once; where they go on in other tiles twice, and once more for each border that a way along level ground crosses.
template <class Z>
void settle_closed_flats(TiledTerrain<Z>& terrain, std::span<const LevelGround> closed, const Mail<WayOut>& entries);

}  // namespace rillclock
