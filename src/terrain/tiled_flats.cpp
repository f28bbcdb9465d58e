#include "tiled_flats.hpp"

#include <utility>

namespace rillclock {
namespace {

std::vector<Tile> tiles_with(LevelGround asked, std::span<const LevelGround> of_tiles) {
    std::vector<Tile> tiles;
    for (Tile tile = 0; tile < of_tiles.size(); ++tile) {
        if (of_tiles[tile] == asked) tiles.push_back(tile);
    }
    return tiles;
}

/// Makes a field of distances over the flat cells of some tiles; `begin(tile, desk)` spreads it within one and returns
/// what that means for others.
template <class Z, class Begin>
void measure_distances(TiledTerrain<Z>& terrain, std::span<const Tile> level, const Begin& begin) {
    auto sent = terrain.template for_tiles<std::vector<Arrival>>(level, [&](Tile tile, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        auto letters = begin(tile, desk);
        desk.numbers.store(terrain.numbers);
        return letters;
    });
    spread_between_tiles(terrain, std::move(sent));
}

template <class Z>
std::vector<Arrival> spread_from_exits(Desk<Z>& desk) {
    begin_distance_to_exit(desk);
    return spread_from_ones(desk);
}

template <class Z>
std::vector<Arrival> spread_from_higher(Desk<Z>& desk) {
    begin_distance_from_higher(desk);
    return spread_from_ones(desk);
}

template <class Z>
std::vector<Arrival> spread_from_entries(Desk<Z>& desk, std::span<const WayOut> entries) {
    begin_distance_to_entry(desk);
    std::vector<Arrival> arrivals;
    for (const WayOut& entry : entries) arrivals.push_back({entry.cell, 0});
    return spread(desk, std::move(arrivals));
}

/// Keeps of the distance to the exit what the choice of a direction needs.
template <class Z>
void mark_awaited(TiledTerrain<Z>& terrain, std::span<const Tile> level) {
    terrain.template for_tiles<char>(level, [&](Tile tile, Desk<Z>& desk) {
        desk.codes.load_tile(terrain.codes, terrain.shape(tile), flow_void);
        desk.numbers.load_tile(terrain.numbers, terrain.shape(tile), 0);
        mark_awaited(desk);
        desk.codes.store(terrain.codes);
        return char{};
    });
}

/// The first level neighbour of a closed flat that is one step nearer to its entry.
template <class Z>
FlowCode way_to_entry(const Desk<Z>& desk, Position p) {
    for (const Direction d : all_directions) {
        const Position beside = p + desk.z.shape().step(d);
        const bool same_flat = is_flat(desk.codes[beside]) && desk.z[beside] == desk.z[p];
        if (same_flat && desk.numbers[beside] + 1 == desk.numbers[p]) return flow_code(d);
    }
    return flow_undecided;
}

/// Decides cells of some tiles: `measure(tile, desk)` brings the distances, by which `decide(desk)` writes to `desk.settled`. Tiles look at one
/// another's rims, so rims change only when all have looked.
template <class Z, class Measure, class Decide>
void decide_in_tiles(TiledTerrain<Z>& terrain, std::span<const Tile> level, const Measure& measure, const Decide& decide) {
    const auto rims = terrain.template for_tiles<std::vector<FlowCode>>(level, [&](Tile tile, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        measure(tile, desk);
        desk.settled = desk.codes;
        decide(desk);
        return terrain.store_inner_codes(desk.settled);
    });
    for (std::size_t i = 0; i < level.size(); ++i) terrain.store_rim_codes(level[i], rims[i]);
}

/// For `decide_in_tiles`: the distances that were measured before.
template <class Z>
auto measured_before(const TiledTerrain<Z>& terrain) {
    return [&terrain](Tile tile, Desk<Z>& desk) { desk.numbers.load(terrain.numbers, terrain.shape(tile), 0); };
}

template <class Z>
void decide_closed(Desk<Z>& desk) {
    const PatchShape& shape = desk.codes.shape();
    for (std::int64_t row = 0; row < shape.rows(); ++row) {
        const Position last = shape.position(row, shape.columns());
        for (Position p = shape.position(row, 0); p < last; ++p) {
            if (is_flat(desk.codes[p]) && desk.numbers[p] != 0) desk.settled[p] = way_to_entry(desk, p);
        }
    }
}

}  // namespace

template <class Z>
void settle_open_flats_within(Desk<Z>& desk) {
    (void)spread_from_exits(desk);   // offers nothing to others
    mark_awaited(desk);
    (void)spread_from_higher(desk);
    desk.settled = desk.codes;
    decide_awaited(desk);
    std::swap(desk.codes, desk.settled);
}

template <class Z>
void settle_open_flats(TiledTerrain<Z>& terrain, std::span<const LevelGround> level) {
    const std::vector<Tile> across = tiles_with(LevelGround::across, level);
    measure_distances(terrain, across, [](Tile, Desk<Z>& desk) { return spread_from_exits(desk); });
    mark_awaited(terrain, across);
    measure_distances(terrain, across, [](Tile, Desk<Z>& desk) { return spread_from_higher(desk); });
    decide_in_tiles(terrain, across, measured_before(terrain), [](Desk<Z>& desk) { decide_awaited(desk); });
}

template <class Z>
void settle_closed_flats(TiledTerrain<Z>& terrain, std::span<const LevelGround> closed, const Mail<WayOut>& entries) {
    const auto decide = [](Desk<Z>& desk) { decide_closed(desk); };
    const std::vector<Tile> across = tiles_with(LevelGround::across, closed);
    measure_distances(terrain, across, [&](Tile tile, Desk<Z>& desk) { return spread_from_entries(desk, entries[tile]); });
    decide_in_tiles(terrain, across, measured_before(terrain), decide);
    decide_in_tiles(
        terrain, tiles_with(LevelGround::within, closed),
        [&](Tile tile, Desk<Z>& desk) { (void)spread_from_entries(desk, entries[tile]); }, decide);
    for (const auto& of_tile : entries) {
        for (const WayOut& entry : of_tile) terrain.codes[entry.cell] = entry.code;
    }
}

template void settle_open_flats_within(Desk<float>&);
template void settle_open_flats_within(Desk<double>&);
template void settle_open_flats(TiledTerrain<float>&, std::span<const LevelGround>);
template void settle_open_flats(TiledTerrain<double>&, std::span<const LevelGround>);
template void settle_closed_flats(TiledTerrain<float>&, std::span<const LevelGround>, const Mail<WayOut>&);
template void settle_closed_flats(TiledTerrain<double>&, std::span<const LevelGround>, const Mail<WayOut>&);

}  // namespace rillclock
