#include "rillclock/graph/downstream_tree.hpp"

#include <catch2/catch.hpp>

#include <algorithm>
#include <random>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

using Nodes = std::vector<Node>;

// 3 ── 1 ── 0     5 alone
// 4 ──/    /
//      2 ─/
const Nodes small{nowhere, 0, 0, 1, 1, nowhere};

Nodes sorted(std::span<const Node> nodes) {
    Nodes copy(nodes.begin(), nodes.end());
    std::sort(copy.begin(), copy.end());
    return copy;
}

TEST_CASE("above a node stand itself and all that lead to it") {
    const DownstreamTree tree(small);
    CHECK(sorted(tree.above(0)) == Nodes{0, 1, 2, 3, 4});
    CHECK(sorted(tree.above(1)) == Nodes{1, 3, 4});
    CHECK(sorted(tree.above(2)) == Nodes{2});
    CHECK(sorted(tree.above(5)) == Nodes{5});
    CHECK(tree.is_above(3, 0));
    CHECK_FALSE(tree.is_above(2, 1));
    CHECK_FALSE(tree.is_above(0, 1));
}

TEST_CASE("a way names every node from one end to the other") {
    const DownstreamTree tree(small);
    CHECK(tree.way(4, 0) == Nodes{4, 1, 0});
    CHECK(tree.way(2, 2) == Nodes{2});
    CHECK_THROWS_AS(tree.way(2, 1), Error);
}

TEST_CASE("on random trees every node stands before the one it leads to, and above it") {
    for (unsigned seed = 0; seed < 50; ++seed) {
        std::mt19937 random(seed);
        Nodes next(1 + seed);
        for (Node node = 0; node < next.size(); ++node) {
            next[node] = node == 0 || random() % 7 == 0 ? nowhere : static_cast<Node>(random() % node);
        }
        const DownstreamTree tree(next);
        const Nodes order = tree.upstream_first();
        INFO("seed " << seed);
        REQUIRE(order.size() == next.size());
        for (auto node = order.begin(); node != order.end(); ++node) {
            if (next[*node] == nowhere) continue;
            REQUIRE(std::find(node, order.end(), next[*node]) != order.end());
            REQUIRE(tree.is_above(*node, next[*node]));
        }
    }
}

TEST_CASE("a chain of a million nodes is numbered without recursion") {
    Nodes next(1'000'000);
    for (Node node = 0; node < next.size(); ++node) next[node] = node == 0 ? nowhere : node - 1;
    const DownstreamTree tree(next);
    CHECK(tree.above(0).size() == 1'000'000);
    CHECK(tree.above(999'999).size() == 1);
}

TEST_CASE("a circle is found with the nodes that make it, not those that lead into it") {
    CHECK(circle_in(Nodes{1, 2, 3, 1, nowhere}) == Nodes{1, 2, 3});
    CHECK(circle_in(Nodes{0}) == Nodes{0});
    CHECK(circle_in(small) == std::nullopt);
    CHECK_THROWS_AS(DownstreamTree(Nodes{1, 0}), Error);
}

}  // namespace
}  // namespace rillclock
