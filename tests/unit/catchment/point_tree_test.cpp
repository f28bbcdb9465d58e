#include "rillclock/catchment/point_tree.hpp"

#include <catch2/catch.hpp>

#include "reference/plain_catchment.hpp"
#include "reference/worked_terrain.hpp"

namespace rillclock {
namespace {

using Numbers = std::vector<PointNumber>;
using reference::OwnedTree;
using reference::owned_tree;

std::vector<DesignPoint> points_at(const std::vector<Cell>& cells) {
    std::vector<DesignPoint> points(cells.size());
    for (std::size_t i = 0; i < cells.size(); ++i) points[i].cell = cells[i];
    return points;
}

Numbers owners(const OwnedTree& tree) {
    return {tree.owner.values().begin(), tree.owner.values().end()};
}

TEST_CASE("a cell belongs to the nearest point on its way down, the point's own cell included") {
    const FlowForest forest(worked::eastward(6));
    CHECK(owners(owned_tree(forest, points_at({4, 1}))) == Numbers{2, 2, 1, 1, 1, 0});
}

TEST_CASE("each point has the next one below it, and the lowest has none") {
    const FlowForest forest(worked::eastward(6));
    const PointTree tree = owned_tree(forest, points_at({4, 1, 5, 0}));
    CHECK(tree.next == Numbers{3, 1, 0, 2});
    CHECK(tree.next_of(1) == 3);
}

TEST_CASE("every number stands before its next") {
    const FlowForest forest(worked::eastward(6));
    CHECK(owned_tree(forest, points_at({4, 1, 5, 0})).upstream_first == Numbers{4, 2, 1, 3});
}

TEST_CASE("the last point below each is the end of its chain, and no point stays none") {
    // Two trees: a row drains east to cell 3, another to cell 7.
    Raster<FlowCode> codes(2, 4, flow_code(Direction::east));
    codes(0, 3) = codes(1, 3) = flow_root;
    const FlowForest forest(codes);
    const PointTree tree = owned_tree(forest, points_at({0, 2, 4, 1}));
    CHECK(tree.last_points() == Numbers{0, 2, 2, 3, 2});
}

TEST_CASE("without points no cell has an owner") {
    const OwnedTree tree = owned_tree(FlowForest(worked::eastward(3)), {});
    CHECK(owners(tree) == Numbers{0, 0, 0});
    CHECK(tree.last_points() == Numbers{0});
}

}  // namespace
}  // namespace rillclock
