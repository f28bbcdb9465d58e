#include "tile_passes.hpp"

#include <utility>

#include "tile_nodes.hpp"

namespace rillclock {
namespace {

/// Keeps the passes that the forest names, in a form that no longer needs the patch.
template <class Z>
class PassKeeper {
public:
    PassKeeper(const Desk<Z>& desk, const TileNodes& nodes, const std::vector<KeyedEdge<PassKey<Z>>>& edges)
        : desk_(desk), nodes_(nodes), edges_(edges) {}

    [[nodiscard]] TilePasses keep(const PartialForest& forest) {
        for (const PartEdge edge : forest.towards_open) kept_.ways.push_back(edge == no_part_edge ? edge : keep(edge));
        for (const PartEdge edge : forest.doubtful) {
            kept_.doubtful_places.push_back(keep(edge));
            kept_.doubtful.push_back(pass(edges_[edge], forest));
        }
        return std::move(kept_);
    }

private:
    PartEdge keep(PartEdge edge) {
        kept_.passes.push_back({edges_[edge].a, edges_[edge].b, edges_[edge].key.crossing});
        return static_cast<PartEdge>(kept_.passes.size() - 1);
    }
    [[nodiscard]] Pass pass(const KeyedEdge<PassKey<Z>>& edge, const PartialForest& forest) const {
        return {.higher = edge.key.higher,
                .lower = LiesLower<Z>(desk_.z).lower_of(edge.key.crossing),
                .cell = desk_.z.shape().cell(edge.key.crossing.position),
                .code = edge.key.crossing.code,
                .basin = nodes_.open[forest.tree[edge.a]],
                .other_basin = nodes_.open[forest.tree[edge.b]]};
    }

    const Desk<Z>& desk_;
    const TileNodes& nodes_;
    const std::vector<KeyedEdge<PassKey<Z>>>& edges_;
    TilePasses kept_;
};

}  // namespace

template <class Z>
TilePasses find_tile_passes(Desk<Z>& desk, bool level, const TileBasins& basins, const std::vector<Node>& open,
                            const std::vector<Node>& around) {
    const TileNodes nodes = number_nodes(desk, basins, open, around);
    const std::vector<KeyedEdge<PassKey<Z>>> edges = find_crossings(desk, level);
    PartialForestSolver<PassKey<Z>, LiesLower<Z>> solver(edges, nodes.count, static_cast<Node>(nodes.open.size()),
                                                         LiesLower<Z>(desk.z));
    return PassKeeper<Z>(desk, nodes, edges).keep(solver.solve());
}

template TilePasses find_tile_passes(Desk<float>&, bool, const TileBasins&, const std::vector<Node>&,
                                     const std::vector<Node>&);
template TilePasses find_tile_passes(Desk<double>&, bool, const TileBasins&, const std::vector<Node>&,
                                     const std::vector<Node>&);

}  // namespace rillclock
