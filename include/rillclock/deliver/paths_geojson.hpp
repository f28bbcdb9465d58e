#pragma once

#include <string>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// Which of a point's two paths.
enum class PathKind { governing, longest };

/// Paths of all points as GeoJSON after RFC 7946: longitude and latitude on WGS 84 with seven decimals (about a centimetre), a
/// `bbox`, no `crs` member.
///
/// Governing paths have a feature a segment; longest paths a feature a path. Coordinates run downstream, neighbouring segments share
/// their end point, places on a straight line between others are left out; a line over the 180th meridian is cut there.
/// Fields carry their units, which are SI.
[[nodiscard]] std::string paths_geojson(const StudyResult& result, PathKind kind);

}  // namespace rillclock
