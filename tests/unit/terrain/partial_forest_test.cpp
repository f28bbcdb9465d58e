#include "rillclock/graph/partial_forest.hpp"

#include <catch2/catch.hpp>
#include <functional>
#include <random>
#include <set>

namespace rillclock {
namespace {

using WeightedEdge = KeyedEdge<int>;

PartialForest solve(const std::vector<WeightedEdge>& edges, std::size_t nodes, Node open_nodes) {
    return PartialForestSolver<int, std::less<>>(edges, nodes, open_nodes, std::less<>()).solve();
}

TEST_CASE("a closed node takes its lowest edge, and what an open node takes is left to the whole") {
    // Node 0 is open; 1 and 2 are closed.
    const std::vector<WeightedEdge> edges = {{0, 1, 5}, {1, 2, 3}, {0, 2, 9}};
    const PartialForest forest = solve(edges, 3, 1);
    CHECK(forest.towards_open == std::vector<PartEdge>{no_part_edge, 0, 1});
    CHECK(forest.tree == std::vector<Node>{0, 0, 0});
    CHECK(forest.doubtful.empty());
}

TEST_CASE("between trees with open nodes the highest edge of a cycle is dropped, the others stay doubtful") {
    const std::vector<WeightedEdge> edges = {{0, 1, 1}, {1, 2, 2}, {2, 0, 3}};
    CHECK(solve(edges, 3, 3).doubtful == std::vector<PartEdge>{0, 1});
}

TEST_CASE("a tree turned towards a node leaves from there, and the way between is turned round") {
    const std::vector<WeightedEdge> edges = {{0, 1, 0}, {1, 2, 0}, {2, 3, 0}, {3, 9, 0}};
    std::vector<PartEdge> towards = {no_part_edge, 0, 1, 2};
    turn_tree(std::span<const WeightedEdge>(edges), towards, 2, 3);
    CHECK(towards == std::vector<PartEdge>{0, 1, 3, 2});
}

/// Weights of the spanning forest by Kruskal's rule.
std::set<int> spanning_weights(std::vector<WeightedEdge> edges, std::size_t nodes) {
    std::sort(edges.begin(), edges.end(), [](const auto& a, const auto& b) { return a.key < b.key; });
    DisjointSets sets(nodes);
    std::set<int> weights;
    for (const WeightedEdge& edge : edges) {
        if (sets.join(edge.a, edge.b)) weights.insert(edge.key);
    }
    return weights;
}

/// A part with nodes of its own beside those it shares: the first `shared` nodes of both parts are the same.
struct Part {
    std::vector<WeightedEdge> edges;
    Node nodes = 0;
};

Part random_part(std::mt19937& random, Node shared, int first_weight) {
    Part part{.edges = {}, .nodes = shared + std::uniform_int_distribution<Node>(0, 20)(random)};
    std::uniform_int_distribution<Node> node(0, part.nodes - 1);
    std::vector<int> weights(60);
    std::iota(weights.begin(), weights.end(), 0);
    std::shuffle(weights.begin(), weights.end(), random);
    for (const int weight : weights) part.edges.push_back({node(random), node(random), first_weight + 2 * weight});
    // Every node can reach a shared one.
    for (Node n = shared; n < part.nodes; ++n) {
        part.edges.push_back({n, node(random) % shared, first_weight + 200 + 2 * static_cast<int>(n)});
    }
    std::erase_if(part.edges, [](const WeightedEdge& edge) { return edge.a == edge.b; });
    return part;
}

/// The edges of `part` as edges of a whole, in which its own nodes come after `before` others.
std::vector<WeightedEdge> in_whole(const Part& part, Node shared, Node before) {
    std::vector<WeightedEdge> edges = part.edges;
    for (WeightedEdge& edge : edges) {
        edge.a += edge.a < shared ? 0 : before;
        edge.b += edge.b < shared ? 0 : before;
    }
    return edges;
}

/// Keeps the certain weights of a part, and adds its doubtful edges, between shared nodes, to `doubtful`.
void solve_part(const Part& part, Node shared, std::set<int>& certain, std::vector<WeightedEdge>& doubtful) {
    const PartialForest forest = solve(part.edges, part.nodes, shared);
    for (const PartEdge edge : forest.towards_open) {
        if (edge != no_part_edge) certain.insert(part.edges[edge].key);
    }
    for (const PartEdge place : forest.doubtful) {
        const WeightedEdge& edge = part.edges[place];
        doubtful.push_back({forest.tree[edge.a], forest.tree[edge.b], edge.key});
    }
}

TEST_CASE("two parts solved apart and what they leave open give the spanning forest of the whole") {
    for (unsigned seed = 0; seed < 500; ++seed) {
        std::mt19937 random(seed);
        const Node shared = std::uniform_int_distribution<Node>(1, 8)(random);
        const Part first = random_part(random, shared, 0);
        const Part second = random_part(random, shared, 1);
        std::vector<WeightedEdge> whole = in_whole(first, shared, 0);
        const std::vector<WeightedEdge> others = in_whole(second, shared, first.nodes - shared);
        whole.insert(whole.end(), others.begin(), others.end());

        std::set<int> weights;
        std::vector<WeightedEdge> doubtful;
        solve_part(first, shared, weights, doubtful);
        solve_part(second, shared, weights, doubtful);
        weights.merge(spanning_weights(doubtful, shared));
        INFO("seed " << seed);
        REQUIRE(weights == spanning_weights(whole, first.nodes + second.nodes - shared));
    }
}

}  // namespace
}  // namespace rillclock
