#include "rillclock/terrain/tiled_directions.hpp"

#include <algorithm>
#include <utility>

#include "carving.hpp"
#include "pass_tree.hpp"
#include "tile_basins.hpp"
#include "tile_descent.hpp"
#include "tile_passes.hpp"
#include "tiled_flats.hpp"

namespace rillclock {
namespace {

/// Gives every cell its steepest way down; returns for each tile whether it has level ground.
template <class Z>
std::vector<char> descend(TiledTerrain<Z>& terrain, const Ground& ground) {
    return terrain.template for_all_tiles<char>([&](Tile tile, Desk<Z>& desk) {
        terrain.load_elevations(desk, tile);
        const bool level = descend_in_tile(desk.z, ground, desk.codes);
        desk.codes.store(terrain.codes);
        return static_cast<char>(level);
    });
}

/// Which tiles have a closed flat.
std::vector<char> mark_closed_flats(const std::vector<TileBasins>& basins) {
    std::vector<char> marks(basins.size());
    std::transform(basins.begin(), basins.end(), marks.begin(),
                   [](const TileBasins& of_tile) { return static_cast<char>(of_tile.has_closed_flat); });
    return marks;
}

std::vector<Tile> marked_tiles(const std::vector<char>& marks) {
    std::vector<Tile> tiles;
    for (Tile tile = 0; tile < marks.size(); ++tile) {
        if (marks[tile] != 0) tiles.push_back(tile);
    }
    return tiles;
}

/// Follows every way to its end in its tile.
template <class Z>
std::vector<TileBasins> find_basins(TiledTerrain<Z>& terrain, const std::vector<char>& is_level) {
    return terrain.template for_all_tiles<TileBasins>([&](Tile tile, Desk<Z>& desk) {
        if (is_level[tile] != 0) terrain.load_elevations(desk, tile);
        terrain.load_codes(desk, tile);
        TileBasins basins = find_ends(desk, is_level[tile] != 0);
        desk.numbers.store(terrain.numbers);
        return basins;
    });
}

/// Finds the passes of every tile, and which of them are certain.
template <class Z>
std::vector<TilePasses> find_passes(TiledTerrain<Z>& terrain, const std::vector<char>& is_level,
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
        return find_tile_passes(desk, is_level[tile] != 0, basins[tile], open, around);
    });
}

}  // namespace

template <class Z>
Raster<FlowCode> flow_codes(const Raster<Z>& elevations, const Ground& ground, const TileGrid& tiles,
                            const Executor& executor) {
    TiledTerrain<Z> terrain(elevations, tiles, executor);
    const std::vector<char> is_level = descend(terrain, ground);
    settle_open_flats(terrain, marked_tiles(is_level));

    const std::vector<TileBasins> basins = find_basins(terrain, is_level);
    const std::vector<char> is_closed = mark_closed_flats(basins);
    const RimBasins joined = join_basins(tiles, basins);

    std::vector<TilePasses> passes = find_passes(terrain, is_level, basins, joined);
    const auto leaving = solve_pass_tree(passes, joined.count);
    const Mail<WayOut> entries = carve(terrain, passes, leaving, is_closed);
    settle_closed_flats(terrain, marked_tiles(is_closed), entries);
    return std::move(terrain.codes);
}

template Raster<FlowCode> flow_codes(const Raster<float>&, const Ground&, const TileGrid&, const Executor&);
template Raster<FlowCode> flow_codes(const Raster<double>&, const Ground&, const TileGrid&, const Executor&);

}  // namespace rillclock
