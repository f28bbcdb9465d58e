#include "tile_nodes.hpp"

#include <algorithm>

#include "rillclock/core/vectorised.hpp"

namespace rillclock {
namespace {

constexpr Node no_node = UINT32_MAX;

RILLCLOCK_VECTORISED
void look_up(const Node* __restrict nodes, Position* __restrict ends, Position count) {
    for (Position i = 0; i < count; ++i) ends[i] = nodes[ends[i]];
}

std::vector<Node> sorted_basins(const std::vector<Node>& open, const std::vector<Node>& around) {
    std::vector<Node> basins = {0};
    basins.insert(basins.end(), open.begin(), open.end());
    basins.insert(basins.end(), around.begin(), around.end());
    std::sort(basins.begin(), basins.end());
    basins.erase(std::unique(basins.begin(), basins.end()), basins.end());
    return basins;
}

/// Numbers the basins of a tile that have none yet, from `count` on.
void number_closed(const TileBasins& basins, std::vector<Node>& nodes_of_ends, std::size_t& count) {
    for (const Position end : basins.lowest) {
        if (nodes_of_ends[end] == no_node) nodes_of_ends[end] = static_cast<Node>(count++);
    }
}

}  // namespace

template <class Z>
TileNodes number_nodes(Desk<Z>& desk, const TileBasins& basins, const std::vector<Node>& open,
                       const std::vector<Node>& around) {
    TileNodes nodes{.open = sorted_basins(open, around)};
    const auto node_of = [&](Node basin) {
        return static_cast<Node>(std::lower_bound(nodes.open.begin(), nodes.open.end(), basin) - nodes.open.begin());
    };
    const PatchShape& shape = desk.z.shape();
    desk.nodes_of_ends.resize(std::size_t{shape.size()} + 1);
    for (const Position end : basins.lowest) desk.nodes_of_ends[end] = no_node;
    for (std::size_t i = 0; i < open.size(); ++i) desk.nodes_of_ends[basins.rim_ends[i]] = node_of(open[i]);
    std::size_t place = 0;
    shape.for_each_halo([&](Position p) {
        desk.numbers[p] = p;
        desk.nodes_of_ends[p] = node_of(around[place++]);
    });
    desk.nodes_of_ends[shape.size()] = 0;
    nodes.count = nodes.open.size();
    number_closed(basins, desk.nodes_of_ends, nodes.count);
    look_up(desk.nodes_of_ends.data(), desk.numbers.data(), shape.size());
    return nodes;
}

template TileNodes number_nodes(Desk<float>&, const TileBasins&, const std::vector<Node>&, const std::vector<Node>&);
template TileNodes number_nodes(Desk<double>&, const TileBasins&, const std::vector<Node>&, const std::vector<Node>&);

}  // namespace rillclock
