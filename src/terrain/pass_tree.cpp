#include "pass_tree.hpp"

#include <algorithm>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

struct Origin {
    Tile tile = 0;
    std::uint32_t doubtful = 0;
};

const Pass& pass_at(const std::vector<TilePasses>& tiles, const Origin& origin) {
    return tiles[origin.tile].doubtful[origin.doubtful];
}

std::vector<Origin> lowest_first(const std::vector<TilePasses>& tiles) {
    std::vector<Origin> origins;
    for (Tile tile = 0; tile < tiles.size(); ++tile) {
        for (std::uint32_t i = 0; i < tiles[tile].doubtful.size(); ++i) origins.push_back({tile, i});
    }
    std::sort(origins.begin(), origins.end(),
              [&](const Origin& a, const Origin& b) { return lies_lower(pass_at(tiles, a), pass_at(tiles, b)); });
    return origins;
}

}  // namespace

std::vector<std::vector<Leaving>> solve_pass_tree(const std::vector<TilePasses>& tiles, std::size_t basins) {
    const std::vector<Origin> origins = lowest_first(tiles);
    std::vector<Edge> edges;
    edges.reserve(origins.size());
    for (const Origin& origin : origins)
        edges.push_back({pass_at(tiles, origin).basin, pass_at(tiles, origin).other_basin});

    const std::vector<std::size_t> chosen = minimum_spanning_forest(basins, edges);
    std::vector<Edge> tree;
    tree.reserve(chosen.size());
    for (const std::size_t position : chosen) tree.push_back(edges[position]);
    const std::vector<std::size_t> towards = edges_towards_root(basins, tree, 0);

    std::vector<std::vector<Leaving>> leaving(tiles.size());
    for (std::size_t basin = 1; basin < basins; ++basin) {
        if (towards[basin] == no_edge) throw bug("a basin has no way out of the data");
        const Origin& origin = origins[chosen[towards[basin]]];
        leaving[origin.tile].push_back({origin.doubtful, pass_at(tiles, origin).basin != basin});
    }
    return leaving;
}

}  // namespace rillclock
