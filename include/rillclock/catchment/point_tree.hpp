#pragma once

#include <cstdint>
#include <vector>

#include "rillclock/catchment/design_points.hpp"

namespace rillclock {

/// Number of a design point, from 1; 0 is none.
using PointNumber = std::uint32_t;

/// How the design points follow one another downstream. Points are labels on the flow forest: one more changes nothing about the cells
/// below it.
struct PointTree {
    std::vector<PointNumber> next;           ///< by number − 1: the next point below; 0 none
    std::vector<PointNumber> upstream_first; ///< all numbers, each before its next

    /// The next point below; 0 where there is none.
    [[nodiscard]] PointNumber next_of(PointNumber number) const { return next[number - 1]; }
    /// By number, from 0: the last point on the way down from each; entry 0 is 0.
    [[nodiscard]] std::vector<PointNumber> last_points() const;
};

/// The tree that the points' next ones make. Of points that may come in any order the smaller number comes first.
[[nodiscard]] PointTree point_tree(std::vector<PointNumber> next);

}  // namespace rillclock
