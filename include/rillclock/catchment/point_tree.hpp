#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/catchment/design_points.hpp"

namespace rillclock {

/// Number of a design point, from 1; 0 is none.
using PointNumber = std::uint32_t;

/// Which point's subarea each cell belongs to, and how the points follow one another downstream. Points are labels on the flow
/// forest: one more changes nothing about the cells below it.
struct PointTree {
    Raster<PointNumber> owner;               ///< the nearest point on the way down, the cell's own included; 0 none
    std::vector<PointNumber> next;           ///< by number − 1: the next point below; 0 none
    std::vector<PointNumber> upstream_first; ///< all numbers, each before its next

    [[nodiscard]] PointNumber next_of(PointNumber number) const { return next[number - 1]; }
    /// By number, from 0: the last point on the way down from each; entry 0 is 0.
    [[nodiscard]] std::vector<PointNumber> last_points() const;
};

[[nodiscard]] PointTree point_tree(const FlowForest& forest, std::span<const DesignPoint> points);

}  // namespace rillclock
