#pragma once

#include <vector>

#include "rillclock/terrain/passes.hpp"
#include "tile_basins.hpp"
#include "tile_crossings.hpp"

namespace rillclock {

/// The passes of a tile that matter. Its nodes are the outside, then the basins that reach beyond the tile, the open
/// ones, then those that lie within it, the closed ones.
struct TilePasses {
    std::vector<KeyedEdge<Crossing>> passes;
    /// The pass by which each node's water leaves, as far as it is known: towards the open node of its tree.
    std::vector<PartEdge> ways;
    /// Passes between the trees, of which only the whole raster can tell, as passes between the trees' open basins (by
    /// their numbers in RimBasins), and their places in `passes`.
    std::vector<Pass> doubtful;
    std::vector<PartEdge> doubtful_places;
};

/// Finds the passes of a tile and solves their spanning forest as far as that can be done here. Takes elevations and
/// codes with their halo, and the ends of ways in `desk.numbers`; `open` are the basins of the rim ends, `around` those
/// of the halo's cells in the order of `for_each_halo`, 0 where there is none. Where not `level`, every direction in
/// the tile falls.
///
/// Passes and their order are those of passes.hpp. Source: Cordonnier, Bovy & Braun 2019 (a minimum spanning tree over basins) and Barnes 2016
/// (a tile hands on no more than its rim needs); that a tile's own forest is contracted is ours. Cost: linear in the cells; O(p log b) in the pairs of cells across
/// borders of basins.
template <class Z>
[[nodiscard]] TilePasses find_tile_passes(Desk<Z>& desk, bool level, const TileBasins& basins,
                                          const std::vector<Node>& open, const std::vector<Node>& around);

}  // namespace rillclock
