#pragma once

#include <cstdint>
#include <span>
#include <vector>

namespace rillclock {

/// A node of a graph, numbered from 0.
using Node = std::uint32_t;

/// An undirected edge of a graph whose nodes are numbered from 0.
struct Edge {
    Node a = 0;
    Node b = 0;
};

/// Positions, in `edges`, of a minimum spanning forest, where an edge that stands earlier weighs less.
///
/// Since the positions are a strict total order the forest is unique, whatever algorithm finds it (here Kruskal's, by Boost.Graph).
/// Cost: O(E log E).
[[nodiscard]] std::vector<std::size_t> minimum_spanning_forest(std::size_t nodes, std::span<const Edge> edges);

/// The edge by which each node of a tree reaches the node nearer to `root`: its position in `tree`, or `no_edge` at the root and at
/// nodes that the root does not reach.
[[nodiscard]] std::vector<std::size_t> edges_towards_root(std::size_t nodes, std::span<const Edge> tree, Node root);
inline constexpr std::size_t no_edge = SIZE_MAX;

}  // namespace rillclock
