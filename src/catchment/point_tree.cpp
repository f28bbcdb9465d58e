#include "rillclock/catchment/point_tree.hpp"

#include "rillclock/forest/sweep.hpp"

namespace rillclock {
namespace {

/// Numbers such that each stands before its next: as the forest's own order has their cells.
std::vector<PointNumber> by_forest_order(const FlowForest& forest, const Raster<PointNumber>& label) {
    std::vector<PointNumber> numbers;
    for (const Cell cell : forest.order()) {
        if (label[cell] != 0) numbers.push_back(label[cell]);
    }
    return numbers;
}

}  // namespace

std::vector<PointNumber> PointTree::last_points() const {
    std::vector<PointNumber> last(next.size() + 1, 0);
    for (auto number = upstream_first.rbegin(); number != upstream_first.rend(); ++number) {
        last[*number] = next_of(*number) == 0 ? *number : last[next_of(*number)];
    }
    return last;
}

PointTree point_tree(const FlowForest& forest, std::span<const DesignPoint> points) {
    Raster<PointNumber> label(forest.rows(), forest.columns());
    for (std::size_t i = 0; i < points.size(); ++i) label[points[i].cell] = static_cast<PointNumber>(i + 1);

    PointTree tree;
    auto [owner] = sweep_up(forest, up::First{[&](Cell cell) { return label[cell]; }});
    tree.owner = std::move(owner);
    for (const DesignPoint& point : points) {
        const Cell below = forest.downstream(point.cell);
        tree.next.push_back(below == no_cell ? 0 : tree.owner[below]);
    }
    tree.upstream_first = by_forest_order(forest, label);
    return tree;
}

}  // namespace rillclock
