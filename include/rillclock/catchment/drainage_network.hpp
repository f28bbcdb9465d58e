#pragma once

#include <optional>
#include <span>
#include <vector>

#include "rillclock/catchment/arrivals.hpp"
#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/graph/downstream_tree.hpp"

namespace rillclock {

/// A design point as the network knows it.
struct NetworkPoint {
    PointNumber next = 0;                    ///< the next point below; 0 none
    StepTime to_root;                        ///< from the point's cell
    Front own;                               ///< of its own subarea, with times to the root
    std::optional<StepTime> stated_way = {};  ///< time to the next point, where it is not that of the flow path
};

/// When the last water of a subarea arrives at a point below it.
struct SubareaArrival {
    PointNumber subarea = 0;  ///< the number of the point it drains to first
    FixedTime own = 0;        ///< from its last cell to that point
    FixedTime way = 0;        ///< from there on
    FixedTime slack = 0;      ///< by how much its own time could grow before it would arrive last

    [[nodiscard]] FixedTime arrival() const { return own + way; }
};

/// The arrivals of all subareas at one point, under one storm.
struct PointArrivals {
    FixedTime time = 0;                      ///< the greatest arrival
    PointNumber last = 0;                    ///< whose it is; of equal ones the smaller number
    std::optional<FixedTime> lead = {};      ///< the least slack of the others; none where there are none
    std::vector<SubareaArrival> subareas;    ///< by number
};

/// Design points and the ways between them: a directed tree in which each point's own subarea has a time of its own.
///
/// Times are whole units of 2⁻²⁰ s. A time to the root under a storm factor s is A·s, rounded to a unit, + B; own times
/// and ways are differences of such, so that they add up without any rounding: the greatest of own + way over the
/// subareas above a point is the point's time, to the unit. A stated way moves all that comes from above it.
class DrainageNetwork {
public:
    /// By number − 1. Every point has cells of its own (its own cell at least).
    explicit DrainageNetwork(std::vector<NetworkPoint> points);

    [[nodiscard]] std::size_t size() const { return points_.size(); }
    /// The next point below, or at the end of a stated way; 0 where there is none.
    [[nodiscard]] PointNumber next_of(PointNumber number) const { return points_[number - 1].next; }
    /// The subareas that drain through a point, by number, its own included.
    [[nodiscard]] std::vector<PointNumber> above(PointNumber number) const;
    /// The points from one down to another, both included.
    [[nodiscard]] std::vector<PointNumber> way(PointNumber from, PointNumber to) const;
    /// The time from a point to the next below.
    [[nodiscard]] StepTime way_time(PointNumber number) const;
    /// By how much times to the root of a subarea differ from those over the ground alone; 0 without stated ways below.
    [[nodiscard]] StepTime shift(PointNumber number) const { return shifts_[number - 1]; }
    /// Time from a point's cell to the root, stated ways counted.
    [[nodiscard]] StepTime to_root(PointNumber number) const { return points_[number - 1].to_root + shift(number); }
    /// The time from the last cell of a point's own subarea to the point.
    [[nodiscard]] FixedTime own_time(PointNumber number, double storm_factor) const;
    /// All subareas above a point, its own included, by their arrival under a storm factor.
    [[nodiscard]] PointArrivals arrivals_at(PointNumber number, double storm_factor) const;

private:
    std::vector<NetworkPoint> points_;
    DownstreamTree tree_;
    std::vector<StepTime> shifts_;
};

/// A time under a storm factor, rounded to a unit in the part that the storm multiplies.
[[nodiscard]] FixedTime fixed_under(const StepTime& time, double storm_factor);

/// The one that arrives last and the `most` others of least slack, those with less slack first; of equal ones the
/// smaller number first.
[[nodiscard]] std::vector<SubareaArrival> least_slacks(const PointArrivals& arrivals, std::size_t most);

}  // namespace rillclock
