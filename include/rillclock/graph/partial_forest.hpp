#pragma once

#include <cstdint>
#include <span>
#include <utility>
#include <vector>

#include "rillclock/graph/disjoint_sets.hpp"

namespace rillclock {

/// An edge of a graph and what it is compared by.
template <class Key>
struct KeyedEdge {
    Node a = 0;
    Node b = 0;
    Key key{};
};

/// Position of an edge among the edges of a part; parts stay below 2³² edges.
using PartEdge = std::uint32_t;
inline constexpr PartEdge no_part_edge = UINT32_MAX;

/// What a part of a graph can say of the minimum spanning forest of the whole.
struct PartialForest {
    /// The edge, certain to belong to the forest, by which a closed node reaches the open node of its tree; none for
    /// open nodes.
    std::vector<PartEdge> towards_open;
    /// The node that stands for a node's tree: its open node.
    std::vector<Node> tree;
    /// Edges between different trees of which only the whole can tell; the others certainly do not belong to the
    /// forest.
    std::vector<PartEdge> doubtful;
};

/// Makes `node` the root of its tree, which leaves from there by `edge`: the way from it to what was the root is turned
/// round. Cost: the length of that way.
template <class Key>
void turn_tree(std::span<const KeyedEdge<Key>> edges, std::vector<PartEdge>& towards, Node node, PartEdge edge) {
    for (;;) {
        edge = std::exchange(towards[node], edge);
        if (edge == no_part_edge) return;
        node = edges[edge].a == node ? edges[edge].b : edges[edge].a;
    }
}

/// Solves as much of a minimum spanning forest as can be solved in a part of the graph by itself.
///
/// Nodes below `open_nodes` may have edges outside the part; all edges of the others, the closed ones, are at hand.
/// `less` compares edges by a strict total order.
///
/// Method, Borůvka's (1926), in two turns. First each tree without an open node takes its lowest edge: a cut that lies
/// wholly within the part, so that edge is certain; this goes on until every tree holds exactly one open node. Then all
/// trees take their lowest edges in turn: an edge that is left over is the highest of a cycle, and certain not to
/// belong. Cost: O(E log V); what is left to the whole is less than one edge for each open node.
template <class Key, class Less>
class PartialForestSolver {
public:
    PartialForestSolver(std::span<const KeyedEdge<Key>> edges, std::size_t nodes, Node open_nodes, Less less)
        : edges_(edges), open_nodes_(open_nodes), less_(less), sets_(nodes), lowest_(nodes) {
        forest_.towards_open.assign(nodes, no_part_edge);
        live_.reserve(edges.size());
        for (PartEdge e = 0; e < edges.size(); ++e) live_.push_back({edges[e].a, edges[e].b, e, edges[e].key});
    }

    [[nodiscard]] PartialForest solve() {
        while (take_lowest_edges(open_nodes_, [&](Node tree, const Live& taken) { hang(tree, taken); })) {
        }
        forest_.tree.resize(lowest_.size());
        for (Node node = 0; node < lowest_.size(); ++node) forest_.tree[node] = sets_.find(node);
        while (take_lowest_edges(0, [&](Node, const Live& taken) { forest_.doubtful.push_back(taken.edge); })) {
        }
        return std::move(forest_);
    }

private:
    using LiveEdge = std::uint32_t;
    struct Live {
        Node a;  ///< the trees it joins at present
        Node b;
        PartEdge edge;
        Key key;
    };
    struct Lowest {
        LiveEdge edge = no_part_edge;
        Key key{};
    };

    /// Every tree from `first_tree` on takes its lowest edge; true where there was one. A tree is named by its smallest
    /// node, so trees with an open node have names below `open_nodes`. Two trees that take the same edge take it once.
    template <class Take>
    bool take_lowest_edges(Node first_tree, Take take) {
        find_lowest_edges(first_tree);
        bool any = false;
        for (Node tree = first_tree; tree < lowest_.size(); ++tree) {
            const LiveEdge taken = std::exchange(lowest_[tree].edge, no_part_edge);
            if (taken == no_part_edge) continue;
            any = true;
            if (sets_.join(live_[taken].a, live_[taken].b)) take(tree, live_[taken]);
        }
        if (any) drop_edges_within_trees();
        return any;
    }

    void find_lowest_edges(Node first_tree) {
        for (LiveEdge i = 0; i < live_.size(); ++i) {
            if (live_[i].a >= first_tree) lower(lowest_[live_[i].a], i);
            if (live_[i].b >= first_tree) lower(lowest_[live_[i].b], i);
        }
    }
    void lower(Lowest& lowest, LiveEdge edge) const {
        const Key& key = live_[edge].key;
        if (lowest.edge == no_part_edge || less_(key, lowest.key)) lowest = {edge, key};
    }

    void drop_edges_within_trees() {
        std::size_t kept = 0;
        for (const Live& live : live_) {
            const Node a = sets_.find(live.a);
            const Node b = sets_.find(live.b);
            if (a != b) live_[kept++] = {a, b, live.edge, live.key};
        }
        live_.resize(kept);
    }

    /// Hangs a tree by the edge it took.
    void hang(Node tree, const Live& taken) {
        const KeyedEdge<Key>& edge = edges_[taken.edge];
        turn_tree(edges_, forest_.towards_open, taken.a == tree ? edge.a : edge.b, taken.edge);
    }

    std::span<const KeyedEdge<Key>> edges_;
    Node open_nodes_;
    Less less_;
    DisjointSets sets_;
    std::vector<Lowest> lowest_;  ///< of each tree
    std::vector<Live> live_;      ///< edges between different trees
    PartialForest forest_;
};

}  // namespace rillclock
