#include "segment_rows.hpp"

namespace rillclock {
namespace {

Place place_at(const Grid& grid, const PointPath& path, const PathSpot& spot) {
    const Place from = grid.centre(path.cells[spot.position]);
    const Place to = grid.centre(path.cells[spot.position + 1]);
    return {from.x + spot.share * (to.x - from.x), from.y + spot.share * (to.y - from.y)};
}

}  // namespace

std::vector<SegmentRow> segment_rows(const Outlet& outlet, const PointPath& path, std::string_view path_name) {
    std::vector<SegmentRow> rows;
    StepTime running;
    for (const Segment& segment : path.segments) {
        running += segment.time;
        const double s = outlet.storm_factor;
        rows.push_back({.outlet = &outlet, .path = &path, .segment = &segment, .path_name = path_name,
                        .number = rows.size() + 1, .time_s = in_seconds(segment.time.under(s)),
                        .pond_time_s = in_seconds(segment.pond_time.under(s)), .running_s = in_seconds(running.under(s))});
    }
    return rows;
}

std::vector<SegmentRow> segment_rows(const Outlet& outlet) {
    std::vector<SegmentRow> rows = segment_rows(outlet, outlet.governing, "governing");
    if (outlet.longest.cells.front() == outlet.governing.cells.front()) return rows;
    const std::vector<SegmentRow> longest = segment_rows(outlet, outlet.longest, "longest");
    rows.insert(rows.end(), longest.begin(), longest.end());
    return rows;
}

std::vector<Place> segment_places(const StudyResult& result, const SegmentRow& row) {
    const Segment& segment = *row.segment;
    std::vector<Place> places{place_at(result.grid, *row.path, segment.from)};
    for (std::size_t position = segment.from.position + 1; position <= segment.to.position; ++position) {
        places.push_back(result.grid.centre(row.path->cells[position]));
    }
    if (segment.to.share > 0.0) places.push_back(place_at(result.grid, *row.path, segment.to));
    return places;
}

}  // namespace rillclock
