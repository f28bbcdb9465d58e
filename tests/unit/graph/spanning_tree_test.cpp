#include "rillclock/graph/spanning_tree.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

TEST_CASE("of a circle of edges the last is left out") {
    const std::vector<Edge> edges = {{0, 1}, {1, 2}, {2, 0}};
    auto chosen = minimum_spanning_forest(3, edges);
    CHECK(chosen == std::vector<std::size_t>{0, 1});
}

TEST_CASE("each node knows the edge towards the root, and the root and the unreached have none") {
    const std::vector<Edge> tree = {{2, 1}, {0, 2}};
    const auto towards = edges_towards_root(4, tree, 0);
    CHECK(towards == std::vector<std::size_t>{no_edge, 0, 1, no_edge});
}

}  // namespace
}  // namespace rillclock
