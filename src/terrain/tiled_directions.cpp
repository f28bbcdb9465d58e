#include "rillclock/terrain/tiled_directions.hpp"

#include <utility>

#include "carving.hpp"
#include "pass_tree.hpp"
#include "tile_basins.hpp"
#include "tile_descent.hpp"
#include "tile_passes.hpp"
#include "tiled_flats.hpp"

namespace rillclock {
namespace {

/// Gives every cell its steepest way down, and open flats that lie within a tile their way out; returns what level ground each tile had.
template <class Z>
std::vector<LevelGround> descend(TiledTerrain<Z>& terrain, const Ground& ground) {
    return terrain.template for_all_tiles<LevelGround>([&](Tile tile, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        LevelGround level = LevelGround::none;
        if (descend_in_tile(desk.z, ground, desk.codes)) level = has_level_rim(desk) ? LevelGround::across : LevelGround::within;
        if (level == LevelGround::within) settle_open_flats_within(desk);
        desk.codes.store(terrain.codes);
        return level;
    });
}

/// Where tiles have closed flats.
std::vector<LevelGround> find_closed_flats(const std::vector<TileBasins>& basins) {
    std::vector<LevelGround> closed(basins.size(), LevelGround::none);
    for (Tile tile = 0; tile < basins.size(); ++tile) {
        if (basins[tile].has_closed_flat) closed[tile] = basins[tile].level_joins.empty() ? LevelGround::within : LevelGround::across;
    }
    return closed;
}

/// Follows every way to its end in its tile.
template <class Z>
std::vector<TileBasins> find_basins(TiledTerrain<Z>& terrain, const std::vector<LevelGround>& level) {
    return terrain.template for_all_tiles<TileBasins>([&](Tile tile, Desk<Z>& desk) {
        const bool is_level = level[tile] != LevelGround::none;
        if (is_level) terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        TileBasins basins = find_ends(desk, is_level);
        desk.numbers.store(terrain.numbers);
        return basins;
    });
}

/// Finds the passes of every tile, and which of them are certain.
template <class Z>
std::vector<TilePasses> find_passes(TiledTerrain<Z>& terrain, const std::vector<LevelGround>& level,
                                    const std::vector<TileBasins>& basins, const RimBasins& joined) {
    return terrain.template for_all_tiles<TilePasses>([&](Tile tile, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        const PatchShape shape = terrain.shape(tile);
        desk.numbers.load_tile(terrain.numbers, shape, 0);
        std::vector<Node> open;
        for (std::uint32_t i = 0; i < basins[tile].rim_ends.size(); ++i) open.push_back(joined.of(tile, i));
        std::vector<Node> around;
        shape.for_each_halo([&](Position p) {
            around.push_back(desk.codes[p] == flow_void ? 0 : basin_of(terrain.tiles, basins, joined, shape.cell(p)));
        });
        return find_tile_passes(desk, level[tile] != LevelGround::none, basins[tile], open, around);
    });
}

}  // namespace

template <class Z>
Raster<FlowCode> flow_codes(const Raster<Z>& elevations, const Ground& ground, const TileGrid& tiles,
                            const Executor& executor) {
    TiledTerrain<Z> terrain(elevations, tiles, executor);
    const std::vector<LevelGround> level = descend(terrain, ground);
    settle_open_flats(terrain, level);

    const std::vector<TileBasins> basins = find_basins(terrain, level);
    const std::vector<LevelGround> closed = find_closed_flats(basins);
    const RimBasins joined = join_basins(tiles, basins);

    std::vector<TilePasses> passes = find_passes(terrain, level, basins, joined);
    const auto leaving = solve_pass_tree(passes, joined.count);
    const Mail<WayOut> entries = carve(terrain, passes, leaving, closed);
    settle_closed_flats(terrain, closed, entries);
    return std::move(terrain.codes);
}

template Raster<FlowCode> flow_codes(const Raster<float>&, const Ground&, const TileGrid&, const Executor&);
template Raster<FlowCode> flow_codes(const Raster<double>&, const Ground&, const TileGrid&, const Executor&);

}  // namespace rillclock
