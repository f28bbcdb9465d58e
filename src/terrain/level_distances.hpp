#pragma once

#include <span>
#include <vector>

#include "level_ground.hpp"

namespace rillclock {

/// A cell of level ground and a distance, in steps, at which it is known to lie from where the count begins.
struct Arrival {
    Cell cell = no_cell;
    std::uint32_t distance = 0;
};

/// Starts a field of distances in a tile: spreads from the cells that have distance 1 as it was begun, and returns what
/// that means for cells of the tiles around. Takes elevations and codes with their halo.
template <class Z>
[[nodiscard]] std::vector<Arrival> spread_from_ones(Desk<Z>& desk);

/// Lowers the distances of a tile, in `desk.numbers`, by breadth-first spread over level flat cells from `arrivals`,
/// and returns what that means for cells of the tiles around. Cells that are not flat have distance 0.
///
/// Promise: tiles that spread in any order and pass on what they are told end with the exact distances, since a
/// distance is only ever lowered to the length of a real way and the last to be lowered has told its neighbours. Source: Barnes, Lehman
/// & Mulla 2014 (the breadth-first fields over flats); the exchange between tiles is ours. Cost:
/// the cells whose distance changes, and the rim.
template <class Z>
[[nodiscard]] std::vector<Arrival> spread(Desk<Z>& desk, std::vector<Arrival> arrivals);

/// The letters that tell a tile something new.
[[nodiscard]] std::vector<Arrival> nearer_arrivals(const CellNumbers& distances, std::span<const Arrival> letters);

/// Ends a field of distances: tiles send arrivals to one another until no distance changes.
template <class Z>
void spread_between_tiles(TiledTerrain<Z>& terrain, Mail<Arrival> sent) {
    exchange_until_quiet(terrain, std::move(sent), [&](Tile tile, std::span<const Arrival> letters, Desk<Z>& desk) {
        std::vector<Arrival> nearer = nearer_arrivals(terrain.numbers, letters);
        if (nearer.empty()) return nearer;
        terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        desk.numbers.load_tile(terrain.numbers, terrain.shape(tile), 0);
        auto further = spread(desk, std::move(nearer));
        desk.numbers.store(terrain.numbers);
        return further;
    });
}

}  // namespace rillclock
