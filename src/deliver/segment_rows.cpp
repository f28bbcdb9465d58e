#include "segment_rows.hpp"

#include <algorithm>

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
    return segment_places(result, row, row.path->cells.size() - 1);
}

std::vector<Place> segment_places(const StudyResult& result, const SegmentRow& row, std::size_t steps) {
    const Segment& segment = *row.segment;
    if (segment.from.position >= steps) return {};
    std::vector<Place> places{segment_begin(result, row)};
    for (std::size_t position = segment.from.position + 1; position <= std::min(segment.to.position, steps); ++position) {
        places.push_back(result.grid.centre(row.path->cells[position]));
    }
    if (segment.to.share > 0.0 && segment.to.position < steps) places.push_back(segment_end(result, row));
    return places;
}

Place segment_begin(const StudyResult& result, const SegmentRow& row) { return place_at(result.grid, *row.path, row.segment->from); }

Place segment_end(const StudyResult& result, const SegmentRow& row) {
    const PathSpot& to = row.segment->to;
    return to.share > 0.0 ? place_at(result.grid, *row.path, to) : result.grid.centre(row.path->cells[to.position]);
}

}  // namespace rillclock
