#include "rillclock/catchment/outlet.hpp"

#include <utility>

namespace rillclock {
namespace {

class Workshop {
public:
    Workshop(const ArrivalInputs& in, const TravelRules& rules, std::span<const DesignPoint> points, const OutletRules& by)
        : in_(in), rules_(rules), points_(points), by_(by) {}

    [[nodiscard]] Outlet outlet(PointNumber number, const Arrivals& catchment, FixedArea own_area) const {
        Outlet made;
        made.number = number;
        made.point = points_[number - 1];
        made.next = in_.tree.next_of(number);
        made.area = catchment.area;
        made.own_area = own_area;
        made.border_cells = catchment.border_cells - border_cells_at(made.point.cell);
        for (std::size_t i = 0; i < told_shares.size(); ++i) {
            made.arrival_s[i] = seconds_to(made.point.cell, catchment.bins.by_share(told_shares[i]));
        }
        const Head last = catchment.front.last_to_arrive(in_.storm_factor);
        made.greatest_s = seconds_to(made.point.cell, last);
        const Head governing = by_.ignore_tail > 0 ? catchment.bins.last_without(by_.ignore_tail) : last;
        made.governing = path(governing.cell, made.point.cell);
        made.longest = path(catchment.farthest, made.point.cell);
        return made;
    }

private:
    [[nodiscard]] double seconds_to(Cell point, const Head& head) const {
        return in_seconds((head.time - in_.field.time_to_root(point)).under(in_.storm_factor));
    }

    [[nodiscard]] PointPath path(Cell head, Cell end) const {
        PointPath made;
        made.cells = flow_path(in_.travel.forest, head, end);
        made.pieces = path_pieces(in_.travel, in_.field, rules_, made.cells);
        made.segments = segments_of(in_.travel, in_.field, rules_, made.cells, by_.segments);
        made.summary = summary_of(in_.travel, in_.field, rules_, made.cells);
        made.seconds = in_seconds(made.summary.time.under(in_.storm_factor));
        for (const Segment& segment : made.segments) made.end_to_end_s += segment.end_to_end_s;
        return made;
    }

    /// Border cells that are the point's own or drain straight into it: an outlet at the edge has some for certain.
    [[nodiscard]] std::int64_t border_cells_at(Cell point) const {
        const FlowForest& forest = in_.travel.forest;
        const auto is_beside_edge = [&](Cell cell) {
            return is_border(in_.travel.elevations, {forest.row(cell), cell % forest.columns()}) ? 1 : 0;
        };
        std::int64_t count = is_beside_edge(point);
        forest.for_each_upstream(point, [&](Cell cell) { count += is_beside_edge(cell); });
        return count;
    }

    const ArrivalInputs& in_;
    const TravelRules& rules_;
    std::span<const DesignPoint> points_;
    const OutletRules& by_;
};

}  // namespace

std::vector<Outlet> outlets_of(const ArrivalInputs& inputs, const TravelRules& rules, std::span<const DesignPoint> points,
                               const OutletRules& outlet_rules) {
    const Workshop workshop(inputs, rules, points, outlet_rules);
    std::vector<Arrivals> arrivals = arrivals_by_subarea(inputs);
    std::vector<FixedArea> own_areas;
    for (const Arrivals& subarea : arrivals) own_areas.push_back(subarea.area);

    std::vector<Outlet> outlets(points.size());
    for (const PointNumber number : inputs.tree.upstream_first) {
        Arrivals& catchment = arrivals[number - 1];  // by now with all that joins from above
        outlets[number - 1] = workshop.outlet(number, catchment, own_areas[number - 1]);
        const PointNumber next = inputs.tree.next_of(number);
        if (next != 0) merge(arrivals[next - 1], std::move(catchment), inputs);
    }
    return outlets;
}

}  // namespace rillclock
