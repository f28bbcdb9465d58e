#pragma once

#include <vector>

#include "tile_basins.hpp"

namespace rillclock {

/// The nodes of a tile's graph of basins: the outside, then the basins that reach beyond the tile, the open ones, then
/// those that lie within it, the closed ones.
struct TileNodes {
    std::vector<Node> open;  ///< the basin of each open node, by its number in RimBasins; the outside first
    std::size_t count = 0;   ///< of nodes, open and closed
};

/// Writes to each position of `desk.numbers`, halo included, the node it belongs to; there stood the ends of the ways
/// of the tile's cells. `open` are the basins of the rim ends, `around` those of the halo's cells in the order of
/// `for_each_halo`, 0 where there is none. Cost: linear in the cells, by gathers from a table of ends.
template <class Z>
[[nodiscard]] TileNodes number_nodes(Desk<Z>& desk, const TileBasins& basins, const std::vector<Node>& open,
                                     const std::vector<Node>& around);

}  // namespace rillclock
