#pragma once

#include <span>
#include <vector>

#include "tiled_terrain.hpp"

namespace rillclock {

/// A cell of level ground and a distance, in steps, at which it is known to lie from where the count begins.
struct Arrival {
    Cell cell = no_cell;
    std::uint32_t distance = 0;
};

inline constexpr std::uint32_t unreached = UINT32_MAX;

/// Mark of a cell of an open flat while its direction is awaited; the two lowest bits are its distance to the exit modulo 4.
inline constexpr FlowCode flow_awaited = 16;

/// Whether a cell's direction is still to be found: undecided or awaited.
[[nodiscard]] constexpr bool is_flat(FlowCode code) { return code >= flow_undecided; }

/// Lowers the distances of a tile, in `desk.numbers`, by breadth-first spread over level flat cells from `arrivals`, and returns what
/// that means for cells of the tiles around. Takes elevations and codes with their halo; `before` are the distances of the rim that
/// the tiles around know of.
///
/// Promise: tiles that spread in any order and pass on what they are told end with the exact distances, since a distance is only ever
/// lowered to the length of a real way and the last to be lowered has told its neighbours.
/// Cost: the cells whose distance changes, and the rim.
template <class Z>
[[nodiscard]] std::vector<Arrival> spread(Desk<Z>& desk, std::vector<Arrival> arrivals, std::span<const std::uint32_t> before);

/// The distances of the rim, in the order of `for_each_rim`.
[[nodiscard]] std::vector<std::uint32_t> rim_distances(const Patch<std::uint32_t>& distances);

/// Sets the distance of every flat cell of a tile: unreached.
template <class Z>
void forget_distances(Desk<Z>& desk);

/// Calls `visit(position)` for each flat cell of a tile, in order.
template <class Visit>
void for_each_flat(const Patch<FlowCode>& codes, Visit visit) {
    const PatchShape& shape = codes.shape();
    for (std::int64_t row = 0; row < shape.rows(); ++row) {
        const Position last = shape.position(row, shape.columns());
        for (Position p = shape.position(row, 0); p < last; ++p) {
            if (is_flat(codes[p])) visit(p);
        }
    }
}

/// Ends a field of distances: tiles send arrivals to one another until no distance changes.
template <class Z>
void spread_between_tiles(TiledTerrain<Z>& terrain, Mail<Arrival> sent) {
    exchange_until_quiet(terrain, std::move(sent), [&](Tile tile, std::span<const Arrival> letters, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        desk.numbers.load_tile(terrain.numbers, terrain.shape(tile), 0);
        auto further = spread(desk, {letters.begin(), letters.end()}, rim_distances(desk.numbers));
        desk.numbers.store(terrain.numbers);
        return further;
    });
}

}  // namespace rillclock
