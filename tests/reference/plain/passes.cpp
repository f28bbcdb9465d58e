#include "reference/plain/passes.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/core/error.hpp"
#include "rillclock/graph/spanning_tree.hpp"

namespace rillclock {
namespace {

auto basin_pair(const Pass& pass) { return std::minmax(pass.basin, pass.other_basin); }

/// Every crossing between neighbouring cells of different basins, once: from the cell with the smaller index.
std::vector<Pass> all_crossings(const Elevations& z, const Basins& basins) {
    std::vector<Pass> crossings;
    const auto size = static_cast<Cell>(z.size());
    for (Cell cell = 0; cell < size; ++cell) {
        if (std::isnan(z[cell])) continue;
        const std::uint32_t own = basins.label[cell];
        for_each_neighbour(z, cell, [&](Cell beside, Direction d) {
            if (beside < cell || std::isnan(z[beside]) || basins.label[beside] == own) return;
            crossings.push_back({.higher = std::max(z[cell], z[beside]), .lower = std::min(z[cell], z[beside]),
                                 .cell = cell, .code = flow_code(d), .basin = own, .other_basin = basins.label[beside]});
        });
        if (own != 0 && is_border(z, {cell / z.columns(), cell % z.columns()})) {
            crossings.push_back({.higher = z[cell], .lower = z[cell], .cell = cell, .code = flow_root, .basin = own});
        }
    }
    return crossings;
}

}  // namespace

std::vector<Pass> find_passes(const Elevations& z, const Basins& basins) {
    std::vector<Pass> passes = all_crossings(z, basins);
    std::sort(passes.begin(), passes.end(), [](const Pass& a, const Pass& b) {
        const auto pair_a = basin_pair(a);
        const auto pair_b = basin_pair(b);
        return pair_a == pair_b ? lies_lower(a, b) : pair_a < pair_b;
    });
    const auto last = std::unique(passes.begin(), passes.end(), [](const Pass& a, const Pass& b) {
        return basin_pair(a) == basin_pair(b);
    });
    passes.erase(last, passes.end());
    std::sort(passes.begin(), passes.end(), lies_lower);
    return passes;
}

std::vector<Pass> passes_to_outside(const Elevations& z, const Basins& basins) {
    const std::vector<Pass> passes = find_passes(z, basins);
    std::vector<Edge> edges;
    edges.reserve(passes.size());
    for (const Pass& pass : passes) edges.push_back({pass.basin, pass.other_basin});

    const std::size_t nodes = basins.count + 1U;
    const std::vector<std::size_t> chosen = minimum_spanning_forest(nodes, edges);
    std::vector<Edge> tree;
    tree.reserve(chosen.size());
    for (const std::size_t position : chosen) tree.push_back(edges[position]);
    const std::vector<std::size_t> towards = edges_towards_root(nodes, tree, 0);

    std::vector<Pass> ways(nodes);
    for (std::size_t basin = 1; basin < nodes; ++basin) {
        if (towards[basin] == no_edge) throw bug("a basin has no way out of the data");
        ways[basin] = passes[chosen[towards[basin]]];
    }
    return ways;
}

}  // namespace rillclock
