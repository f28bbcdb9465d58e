#pragma once

#include <vector>

#include "tile_passes.hpp"

namespace rillclock {

/// That the water of a basin leaves over one of the doubtful passes of a tile.
struct Leaving {
    std::uint32_t doubtful = 0;  ///< which of them
    bool from_other = false;     ///< from the other side of the pass, not that of its cell
};

/// The minimum spanning tree over what the tiles left open, rooted at the outside: for each tile which of its doubtful
/// passes carry water, one pass for each basin that reaches a rim. Together with the tiles' certain passes this is the
/// tree of the whole raster.
///
/// Why it is right: a tile gave up only passes that are highest on a cycle, and decided only those that are lowest
/// across a cut, so the tree of what is left, joined with what is decided, is the one tree of all passes (they are in a
/// strict total order). Source: Cordonnier, Bovy & Braun 2019. Cost: O(p log p) in the passes left open, about a
/// hundred for a tile of 256².
[[nodiscard]] std::vector<std::vector<Leaving>> solve_pass_tree(const std::vector<TilePasses>& tiles,
                                                                std::size_t basins);

}  // namespace rillclock
