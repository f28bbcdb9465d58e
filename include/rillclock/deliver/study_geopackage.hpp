#pragma once

#include <filesystem>
#include <string>

#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// Writes `study.gpkg`: outlets, catchments, subareas, paths, segments and, where asked for, isochrones, in the reference system of the
/// elevations. Lengths are in metres, areas in square metres, times in minutes, whatever the units of the report.
void write_study_geopackage(const std::filesystem::path& path, const StudyResult& result, const StudyRegions& regions);

/// `isochrones.geojson`: the bands, in longitude and latitude (RFC 7946).
[[nodiscard]] std::string isochrones_geojson(const StudyResult& result, const StudyRegions& regions);

}  // namespace rillclock
