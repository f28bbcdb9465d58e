#pragma once

#include <filesystem>
#include <optional>
#include <span>
#include <string>

#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/deliver/depressions_geojson.hpp"
#include "rillclock/deliver/study_result.hpp"
#include "rillclock/terrain/own_ways.hpp"

namespace rillclock {

/// Beyond so many points study.gpkg has the whole catchments of the last points alone, unless those of all are asked for: along a river
/// they lie within one another, and thousands of them are most of the file. The subareas, of which they are made up, it has of all.
inline constexpr std::size_t most_points_with_catchments = 500;

/// Whether all points have their whole catchment in study.gpkg.
[[nodiscard]] bool has_all_catchments(const Study& study, std::size_t points);

/// The sentence that says whose catchments are left out though nobody asked for that; empty where none are.
[[nodiscard]] std::string words_on_left_out_catchments(const Study& study, std::size_t points);

/// What study.gpkg shows besides the result.
struct StudyShapes {
    const StudyRegions& regions;
    std::span<const OutlinedDepression> depressions;
    std::optional<std::span<const OwnWay>> own_ways = {};   ///< where lines are mapped
};

/// Writes `study.gpkg`: outlets, catchments, subareas, paths, segments, depressions and, where they are asked for or there is a cause, isochrones and
/// others, in the reference system of the elevations; whole catchments by `has_all_catchments`. Lengths are in metres, areas in square metres, times
/// in minutes, whatever the units of the report.
void write_study_geopackage(const std::filesystem::path& path, const StudyResult& result, const StudyShapes& shapes);

/// `isochrones.geojson`: the bands, in longitude and latitude (RFC 7946).
[[nodiscard]] std::string isochrones_geojson(const StudyResult& result, const StudyRegions& regions);

}  // namespace rillclock
