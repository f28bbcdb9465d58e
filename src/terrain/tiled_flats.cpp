#include "tiled_flats.hpp"

namespace rillclock {
namespace {

/// Starts a field in a tile: cells that `is_seed(cell, beside)` picks by one of their neighbours have distance 1.
template <class Z, class IsSeed>
std::vector<Arrival> start_from(Desk<Z>& desk, const IsSeed& is_seed) {
    const PatchShape& shape = desk.z.shape();
    forget_distances(desk);
    const std::vector<std::uint32_t> before = rim_distances(desk.numbers);
    std::vector<Arrival> seeds;
    for_each_flat(desk.codes, [&](Position p) {
        bool seed = false;
        for (const Position step : shape.steps()) seed = seed || is_seed(p, p + step);
        if (seed) seeds.push_back({shape.cell(p), 1});
    });
    return spread(desk, std::move(seeds), before);
}

/// Makes a field of distances over the flat cells of some tiles.
template <class Z, class IsSeedOf>
void measure_distances(TiledTerrain<Z>& terrain, std::span<const Tile> level, const IsSeedOf& is_seed_of) {
    auto sent = terrain.template for_tiles<std::vector<Arrival>>(level, [&](Tile tile, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        auto letters = start_from(desk, is_seed_of(desk));
        desk.numbers.store(terrain.numbers);
        return letters;
    });
    spread_between_tiles(terrain, std::move(sent));
}

template <class Z>
void measure_distance_to_exit(TiledTerrain<Z>& terrain, std::span<const Tile> level) {
    measure_distances(terrain, level, [](const Desk<Z>& desk) {
        return [&](Position p, Position beside) { return desk.z[beside] == desk.z[p] && !is_flat(desk.codes[beside]); };
    });
}

template <class Z>
void measure_distance_from_higher(TiledTerrain<Z>& terrain, std::span<const Tile> level) {
    measure_distances(terrain, level, [](const Desk<Z>& desk) {
        return [&](Position p, Position beside) { return desk.z[beside] > desk.z[p]; };
    });
}

/// Keeps of the distance to the exit what the choice of a direction needs.
template <class Z>
void mark_awaited(TiledTerrain<Z>& terrain, std::span<const Tile> level) {
    terrain.template for_tiles<char>(level, [&](Tile tile, Desk<Z>& desk) {
        const PatchShape shape = terrain.shape(tile);
        desk.codes.load_tile(terrain.codes, shape, flow_void);
        desk.numbers.load_tile(terrain.numbers, shape, 0);
        for_each_flat(desk.codes, [&](Position p) {
            const std::uint32_t distance = desk.numbers[p];
            if (distance != unreached) desk.codes[p] = static_cast<FlowCode>(flow_awaited | (distance & 3U));
        });
        desk.codes.store(terrain.codes);
        return char{};
    });
}

/// Whether the second of two level neighbours is one step nearer to the exit. An exit has distance 0 and is decided.
bool is_nearer(FlowCode own, FlowCode beside) {
    const FlowCode nearer = (own - 1U) & 3U;
    return is_flat(beside) ? (beside & 3U) == nearer : nearer == 0;
}

/// The first level neighbour that is nearer to the exit; among these the one farthest from higher ground.
template <class Z>
FlowCode way_to_exit(const Desk<Z>& desk, Position p) {
    FlowCode code = flow_undecided;
    std::uint32_t farthest = 0;
    for (const Direction d : all_directions) {
        const Position beside = p + desk.z.shape().step(d);
        if (desk.z[beside] != desk.z[p] || !is_nearer(desk.codes[p], desk.codes[beside])) continue;
        const std::uint32_t from_higher = is_flat(desk.codes[beside]) ? desk.numbers[beside] : 0;
        if (code != flow_undecided && from_higher <= farthest) continue;
        farthest = from_higher;
        code = flow_code(d);
    }
    return code;
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

/// Decides cells of some tiles, `decide(tile, desk)` writing to `desk.settled`. Tiles look at one another's rims, so rims change only
/// when all have looked.
template <class Z, class Decide>
void decide_in_tiles(TiledTerrain<Z>& terrain, std::span<const Tile> level, const Decide& decide) {
    const auto rims = terrain.template for_tiles<std::vector<FlowCode>>(level, [&](Tile tile, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        desk.numbers.load(terrain.numbers, terrain.shape(tile), 0);
        desk.settled = desk.codes;
        decide(tile, desk);
        return terrain.store_inner_codes(desk.settled);
    });
    for (std::size_t i = 0; i < level.size(); ++i) terrain.store_rim_codes(level[i], rims[i]);
}

template <class Z>
std::vector<Arrival> start_from_entries(Desk<Z>& desk, std::span<const WayOut> entries) {
    forget_distances(desk);
    const std::vector<std::uint32_t> before = rim_distances(desk.numbers);
    std::vector<Arrival> seeds;
    for (const WayOut& entry : entries) seeds.push_back({entry.cell, 0});
    return spread(desk, std::move(seeds), before);
}

}  // namespace

template <class Z>
void settle_open_flats(TiledTerrain<Z>& terrain, std::span<const Tile> level) {
    measure_distance_to_exit(terrain, level);
    mark_awaited(terrain, level);
    measure_distance_from_higher(terrain, level);
    decide_in_tiles(terrain, level, [](Tile, Desk<Z>& desk) {
        for_each_flat(desk.codes, [&](Position p) {
            if (desk.codes[p] != flow_undecided) desk.settled[p] = way_to_exit(desk, p);
        });
    });
}

template <class Z>
void settle_closed_flats(TiledTerrain<Z>& terrain, std::span<const Tile> level, const Mail<WayOut>& entries) {
    auto sent = terrain.template for_tiles<std::vector<Arrival>>(level, [&](Tile tile, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        auto letters = start_from_entries(desk, entries[tile]);
        desk.numbers.store(terrain.numbers);
        return letters;
    });
    spread_between_tiles(terrain, std::move(sent));
    decide_in_tiles(terrain, level, [&](Tile, Desk<Z>& desk) {
        for_each_flat(desk.codes, [&](Position p) {
            if (desk.numbers[p] != 0) desk.settled[p] = way_to_entry(desk, p);
        });
    });
    for (const auto& letters : entries) {
        for (const WayOut& entry : letters) terrain.codes[entry.cell] = entry.code;
    }
}

template void settle_open_flats(TiledTerrain<float>&, std::span<const Tile>);
template void settle_open_flats(TiledTerrain<double>&, std::span<const Tile>);
template void settle_closed_flats(TiledTerrain<float>&, std::span<const Tile>, const Mail<WayOut>&);
template void settle_closed_flats(TiledTerrain<double>&, std::span<const Tile>, const Mail<WayOut>&);

}  // namespace rillclock
