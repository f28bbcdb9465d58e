#include "rillclock/deliver/paths_geojson.hpp"

#include "feature_collection.hpp"
#include "geographic_lines.hpp"
#include "rillclock/core/number_text.hpp"
#include "segment_rows.hpp"

namespace rillclock {
namespace {

using Json = nlohmann::ordered_json;

Json segment_properties(const StudyResult& result, const SegmentRow& row) {
    const Segment& segment = *row.segment;
    const CoverClass* cover = cover_of(result, segment);
    return {{"point", row.outlet->point.name},
            {"segment", row.number},
            {"regime", name_of(segment.regime)},
            {"cover", cover == nullptr ? Json(nullptr) : Json(cover->name)},
            {"length_m", rounded(segment.whole_length_m())},
            {"ponded_length_m", rounded(segment.pond_length_m)},
            {"slope_equivalent", rounded(segment.slope_equivalent)},
            {"fall_m", rounded(segment.fall_m)},
            {"time_min", to_decimals(row.time_s / 60.0, 4)},
            {"running_time_min", to_decimals(row.running_s / 60.0, 4)}};
}

Json path_properties(const Outlet& outlet, const PointPath& path) {
    return {{"point", outlet.point.name},
            {"length_m", rounded(from_fixed(path.summary.length))},
            {"fall_m", rounded(path.summary.fall_m)},
            {"time_min", to_decimals(path.seconds / 60.0, 4)}};
}

/// A place alone is no line: a path of one cell has a feature without geometry.
Json line_or_nothing(GeographicLines& lines, const std::vector<Place>& places) {
    return places.size() < 2 ? Json(nullptr) : lines.geometry(places);
}

void add_segments(const StudyResult& result, const Outlet& outlet, GeographicLines& lines, Json& features) {
    for (const SegmentRow& row : segment_rows(outlet, outlet.governing, "governing")) {
        features.push_back(feature(line_or_nothing(lines, segment_places(result, row)), segment_properties(result, row)));
    }
}

void add_path(const StudyResult& result, const Outlet& outlet, GeographicLines& lines, Json& features) {
    std::vector<Place> places;
    for (const Cell cell : outlet.longest.cells) places.push_back(result.grid.centre(cell));
    features.push_back(feature(line_or_nothing(lines, places), path_properties(outlet, outlet.longest)));
}

}  // namespace

std::string words_on_left_out_paths(std::size_t points) {
    if (points <= most_points_with_paths) return {};
    return "governing_paths.geojson and longest_paths.geojson hold the paths of the last points alone, since there are more than " +
           std::to_string(most_points_with_paths) + " points; study.gpkg holds those of all, each stretch once";
}

std::string paths_geojson(const StudyResult& result, PathKind kind) {
    const bool of_last_alone = result.outlets.size() > most_points_with_paths;
    GeographicLines lines(result.system);
    Json features = Json::array();
    for (const Outlet& outlet : result.outlets) {
        if (of_last_alone && outlet.next != 0) continue;
        if (kind == PathKind::governing) add_segments(result, outlet, lines, features);
        if (kind == PathKind::longest) add_path(result, outlet, lines, features);
    }
    return collection_text(features, lines);
}

}  // namespace rillclock
