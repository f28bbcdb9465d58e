#pragma once

#include <algorithm>
#include <numeric>
#include <vector>

#include "rillclock/graph/spanning_tree.hpp"

namespace rillclock {

/// Nodes gathered into sets that only grow together. The smallest node of a set stands for it, so the answer does not
/// depend on the order in which sets were joined.
///
/// Cost: near to constant for a call. Source: Galler & Fischer 1964, with paths halved as in Tarjan & van Leeuwen 1984.
class DisjointSets {
public:
    explicit DisjointSets(std::size_t nodes) : parents_(nodes) { std::iota(parents_.begin(), parents_.end(), Node{0}); }

    /// The node that stands for the set of `node`.
    [[nodiscard]] Node find(Node node) {
        while (parents_[node] != node) {
            parents_[node] = parents_[parents_[node]];
            node = parents_[node];
        }
        return node;
    }
    /// Makes one set of two; false where they are one already.
    bool join(Node a, Node b) {
        const Node first = find(a);
        const Node second = find(b);
        parents_[std::max(first, second)] = std::min(first, second);
        return first != second;
    }

private:
    std::vector<Node> parents_;
};

}  // namespace rillclock
