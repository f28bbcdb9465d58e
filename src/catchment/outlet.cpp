#include "rillclock/catchment/outlet.hpp"

#include <utility>

namespace rillclock {
namespace {

PointHeads heads_at(const Arrivals& catchment, FixedArea own_area, double storm_factor, double ignore_tail) {
    PointHeads heads;
    heads.area = catchment.area;
    heads.own_area = own_area;
    heads.border_cells = catchment.border_cells;
    for (std::size_t i = 0; i < told_shares.size(); ++i) heads.by_share[i] = catchment.bins.by_share(told_shares[i]);
    heads.last = catchment.front.last_to_arrive(storm_factor);
    heads.governing = ignore_tail > 0 ? catchment.bins.last_without(ignore_tail) : heads.last;
    heads.farthest = catchment.farthest;
    return heads;
}

PointPath path_of(const PathCells& cells, const PathGround& ground, const SegmentRules& rules) {
    PointPath path;
    for (const PathCell& cell : cells) path.cells.push_back(cell.cell);
    path.pieces = path_pieces(ground, cells);
    path.segments = segments_of(ground, cells, rules);
    path.summary = summary_of(ground, cells);
    path.seconds = in_seconds(path.summary.time.under(ground.storm_factor));
    for (const Segment& segment : path.segments) path.end_to_end_s += segment.end_to_end_s;
    return path;
}

}  // namespace

std::vector<PointHeads> heads_of(std::vector<Arrivals> subareas, const PointTree& tree, double storm_factor,
                                 double ignore_tail) {
    std::vector<FixedArea> own_areas;
    for (const Arrivals& subarea : subareas) own_areas.push_back(subarea.area);
    std::vector<PointHeads> heads(subareas.size());
    for (const PointNumber number : tree.upstream_first) {
        Arrivals& catchment = subareas[number - 1];  // by now with all that joins from above
        heads[number - 1] = heads_at(catchment, own_areas[number - 1], storm_factor, ignore_tail);
        const PointNumber next = tree.next_of(number);
        if (next != 0) subareas[next - 1].add(std::move(catchment), storm_factor);
    }
    return heads;
}

Outlet outlet_of(const OutletParts& parts, const PathGround& ground, const OutletRules& rules) {
    const StepTime at_point = parts.governing.back().time_to_root;
    const auto seconds_of = [&](const Head& head) {
        return in_seconds((head.time - at_point).under(ground.storm_factor));
    };
    Outlet made;
    made.number = parts.number;
    made.point = parts.point;
    made.next = parts.next;
    made.area = parts.heads.area;
    made.own_area = parts.heads.own_area;
    made.border_cells = parts.heads.border_cells - parts.border_cells_at_point;
    for (std::size_t i = 0; i < told_shares.size(); ++i) made.arrival_s[i] = seconds_of(parts.heads.by_share[i]);
    made.greatest_s = seconds_of(parts.heads.last);
    made.governing = path_of(parts.governing, ground, rules.segments);
    made.longest = path_of(parts.longest, ground, rules.segments);
    return made;
}

}  // namespace rillclock
