#pragma once

#include <vector>

#include "level_ground.hpp"
#include "pass_tree.hpp"

namespace rillclock {

/// A cell, and the code by which its water is to leave it.
struct WayOut {
    Cell cell = no_cell;
    FlowCode code = flow_root;
};

/// Opens every basin of a tile towards its pass: turns round the way from the pass down to the basin's lowest ground.
///
/// Lowest ground that may be a closed flat, that is in tiles where `closed` says so, stays undecided; returns by
/// tile the cells by which water enters it and leaves it again. `passes` are used up.
///
/// Why tiles need no order: each cell belongs to one basin and is turned at most once; a way that goes on in another
/// tile is a letter to that tile. Source: Cordonnier, Bovy & Braun 2019 (carving, after their minimum spanning tree), here along tiles. Cost: one pass over the codes, and the cells turned, a few in a hundred.
template <class Z>
[[nodiscard]] Mail<WayOut> carve(TiledTerrain<Z>& terrain, std::vector<TilePasses>& passes,
                                 const std::vector<std::vector<Leaving>>& leaving, std::span<const LevelGround> closed);

}  // namespace rillclock
