#include "rillclock/catchment/outlet.hpp"

#include <numeric>
#include <utility>

#include "heads_at.hpp"

namespace rillclock {
namespace {

std::vector<double> distances_m(std::size_t cells, std::span<const PathPiece> pieces) {
    std::vector<double> distance(cells, 0.0);
    for (const PathPiece& piece : pieces) distance[piece.position + 1] += piece.part.length_m;
    std::partial_sum(distance.begin(), distance.end(), distance.begin());
    return distance;
}

}  // namespace

std::vector<PointHeads> heads_of(std::vector<Arrivals> subareas, const PointTree& tree, double storm_factor,
                                 double ignore_tail) {
    return join_down(std::move(subareas), tree, storm_factor, [&](const Arrivals& catchment, PointNumber) {
        return heads_at(catchment, catchment.bins, storm_factor, ignore_tail);
    });
}

PointPath point_path(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces, const SegmentRules& rules) {
    PointPath made;
    made.cells.reserve(path.size());
    for (const PathCell& cell : path) made.cells.push_back(cell.cell);
    made.distance_m = distances_m(path.size(), pieces);
    made.segments = segments_of(ground, path, pieces, rules);
    made.summary = summary_of(ground, path, pieces);
    made.doubts = doubts_of(ground, pieces);
    made.seconds = in_seconds(made.summary.time.under(ground.storm_factor));
    for (const Segment& segment : made.segments) made.end_to_end_s += segment.end_to_end_s;
    return made;
}

Outlet outlet_of(OutletParts parts, const PathGround& ground) {
    const StepTime at_point = parts.cell.time_to_root;
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
    made.governing = std::move(parts.governing);
    made.longest = std::move(parts.longest);
    made.ground = parts.heads.ground;
    made.way = std::move(parts.way);
    made.time_to_root = at_point;
    made.own_front = parts.heads.own_front;
    made.own_land = parts.heads.own_land;
    made.rain_zone = parts.heads.rain_zone;
    made.elevation_m = parts.cell.spill * ground.metres_per_elevation_unit;
    made.storm_factor = ground.storm_factor;
    made.storms = parts.heads.storms;
    return made;
}

}  // namespace rillclock
