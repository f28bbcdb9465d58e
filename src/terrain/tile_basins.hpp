#pragma once

#include <utility>
#include <vector>

#include "rillclock/graph/spanning_tree.hpp"
#include "tiled_terrain.hpp"

namespace rillclock {

/// Where ways end in a tile, and what of it the tiles around need to know.
///
/// An end is a position: a pit or the first cell of a closed flat; a cell of the halo, into which the way leaves the
/// tile; or `shape.size()`, the outside.
struct TileBasins {
    std::vector<Position> lowest;    ///< the pits and closed flats in the tile, by their first cell
    std::vector<Position> rim_ends;  ///< the different ends of the ways from the rim, in order
    std::vector<std::uint32_t> rim;  ///< of each rim cell, by `rim_place`: which of `rim_ends` its way has
    /// Cells of closed flats that go on in another tile: which of `rim_ends` they belong to, and the cell beyond.
    std::vector<std::pair<std::uint32_t, Cell>> level_joins;
    bool has_closed_flat = false;  ///< of more cells than one, here or together with another tile
};

/// Place of a rim cell among the rim cells of its tile: corners have two, of which it takes the first.
[[nodiscard]] inline std::size_t rim_place(const PatchShape& shape, RowColumn at) {
    const std::int64_t rows = shape.rows();
    const std::int64_t columns = shape.columns();
    const bool north = at.row == 0;
    const bool south = at.row == rows - 1;
    const std::int64_t along = north || south ? at.column : at.row;
    const std::int64_t side = north ? 0 : south ? columns : at.column == 0 ? 2 * columns : 2 * columns + rows;
    return static_cast<std::size_t>(side + along);
}
[[nodiscard]] inline std::size_t rim_places(const PatchShape& shape) {
    return static_cast<std::size_t>(2 * (shape.rows() + shape.columns()));
}

/// Writes to `desk.numbers` where each cell's way ends; the halo's own positions there are ends too. Takes codes with
/// their halo, in which open flats are settled, and where `level`, that is where undecided cells may lie level with
/// others, elevations.
///
/// Method: every cell points to the next; then all point to where that one points, until nothing changes. A way of n
/// cells needs about log n turns, in vector registers where they can gather. Source: Wyllie 1979 (pointer jumping; from memory). Cost: O(cells × log of the longest way).
template <class Z>
[[nodiscard]] TileBasins find_ends(Desk<Z>& desk, bool level);

/// The basins to which the ways from the rims of all tiles lead in the end.
struct RimBasins {
    std::vector<Node> first;  ///< of each tile: place of its first rim end in `basin`
    std::vector<Node> basin;  ///< of each rim end; 0 the outside
    std::size_t count = 0;    ///< of basins that reach a rim, with the outside

    [[nodiscard]] Node of(Tile tile, std::uint32_t rim_end) const { return basin[first[tile] + rim_end]; }
};

/// Follows ways from tile to tile, all at once: a way that leaves a tile and the way from the cell it comes to have one
/// end, and so have the parts of a closed flat. Source: Barnes 2016 (labels joined at the rims of tiles). Cost: near to linear in the rim ends.
[[nodiscard]] RimBasins join_basins(const TileGrid& tiles, const std::vector<TileBasins>& basins);

/// The basin of a rim cell.
[[nodiscard]] Node basin_of(const TileGrid& tiles, const std::vector<TileBasins>& basins, const RimBasins& joined,
                            Cell rim_cell);

}  // namespace rillclock
