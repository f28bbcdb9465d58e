#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <vector>

#include "rillclock/graph/spanning_tree.hpp"

namespace rillclock {

/// What a node leads to where it leads nowhere.
inline constexpr Node nowhere = UINT32_MAX;

/// Nodes that each lead to at most one other, so that what drains to what makes a forest of directed trees.
///
/// Numbered once in depth-first order up the trees (by Boost.Graph), all that lies above a node is a stretch of that
/// order. Cost: O(n log n) once, then nothing a question but the length of its answer.
class DownstreamTree {
public:
    /// `next` holds for each node the one it leads to, or `nowhere`. They must not lead in a circle (`circle_in`).
    explicit DownstreamTree(std::vector<Node> next);

    [[nodiscard]] std::size_t size() const { return next_.size(); }
    /// The node that a node leads to, or `nowhere`.
    [[nodiscard]] Node next_of(Node node) const { return next_[node]; }
    /// Each node before the one it leads to.
    [[nodiscard]] std::vector<Node> upstream_first() const;
    /// The node itself and all that lead to it, each after the one it leads to.
    [[nodiscard]] std::span<const Node> above(Node node) const;
    /// Whether the way down from a node meets another; a node is above itself.
    [[nodiscard]] bool is_above(Node node, Node below) const;
    /// From a node down to one below it, both included.
    [[nodiscard]] std::vector<Node> way(Node from, Node to) const;

private:
    std::vector<Node> next_;
    std::vector<Node> order_;         ///< depth first, from the ends of the trees up
    std::vector<std::size_t> place_;  ///< of a node in the order
    std::vector<std::size_t> above_;  ///< how many nodes stand above one, itself included
};

/// Nodes that lead to one another in a circle, from the smallest of the first circle on; none where there is no circle.
[[nodiscard]] std::optional<std::vector<Node>> circle_in(std::span<const Node> next);

}  // namespace rillclock
