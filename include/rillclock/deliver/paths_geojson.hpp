#pragma once

#include <cstddef>
#include <string>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// Which of a point's two paths.
enum class PathKind { governing, longest };

/// Beyond so many points the files of paths hold those of the last points alone, from which no water goes on to another: paths to points
/// along one stream lie upon one another, and text files of thousands of them open nowhere. study.gpkg holds all.
inline constexpr std::size_t most_points_with_paths = 500;

/// Whether the paths of the last points alone are written, and the sentence that says so; empty where all are.
[[nodiscard]] std::string words_on_left_out_paths(std::size_t points);

/// Paths of the points as GeoJSON after RFC 7946: longitude and latitude on WGS 84 with seven decimals (about a centimetre), a
/// `bbox`, no `crs` member.
///
/// Governing paths have a feature a segment; longest paths a feature a path. Coordinates run downstream, neighbouring segments share
/// their end point, places on a straight line between others are left out; a line over the 180th meridian is cut there.
/// Fields carry their units, which are SI.
[[nodiscard]] std::string paths_geojson(const StudyResult& result, PathKind kind);

}  // namespace rillclock
