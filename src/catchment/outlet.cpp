#include "rillclock/catchment/outlet.hpp"

#include <utility>

#include "heads_at.hpp"

namespace rillclock {
namespace {

PointPath path_of(const PathCells& cells, const PathGround& ground, const SegmentRules& rules) {
    PointPath path;
    for (const PathCell& cell : cells) path.cells.push_back(cell.cell);
    path.pieces = path_pieces(ground, cells);
    path.segments = segments_of(ground, cells, path.pieces, rules);
    path.summary = summary_of(ground, cells, path.pieces);
    path.doubts = doubts_of(ground, path.pieces);
    path.seconds = in_seconds(path.summary.time.under(ground.storm_factor));
    for (const Segment& segment : path.segments) path.end_to_end_s += segment.end_to_end_s;
    return path;
}

}  // namespace

std::vector<PointHeads> heads_of(std::vector<Arrivals> subareas, const PointTree& tree, double storm_factor,
                                 double ignore_tail) {
    return join_down(std::move(subareas), tree, storm_factor, [&](const Arrivals& catchment, PointNumber) {
        return heads_at(catchment, catchment.bins, storm_factor, ignore_tail);
    });
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
    made.ground = parts.heads.ground;
    made.way = way_of(ground, parts.way);
    made.time_to_root = at_point;
    made.own_front = parts.heads.own_front;
    made.own_land = parts.heads.own_land;
    made.rain_zone = parts.heads.rain_zone;
    made.elevation_m = parts.longest.back().spill * ground.metres_per_elevation_unit;
    made.storm_factor = ground.storm_factor;
    made.storms = parts.heads.storms;
    return made;
}

}  // namespace rillclock
