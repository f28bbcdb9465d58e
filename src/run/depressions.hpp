#pragma once

#include "rillclock/deliver/depressions_geojson.hpp"
#include "rillclock/terrain/depressions.hpp"
#include "study_data.hpp"

namespace rillclock {

/// The deepest depressions of a study, at most 10 000, those on governing paths marked.
[[nodiscard]] Depressions depressions_of(const TiledTravel& travel, const std::vector<Outlet>& outlets);

/// Outlines of the 1 000 deepest of them, and of all on governing paths.
[[nodiscard]] std::vector<OutlinedDepression> outlined(const TiledTravel& travel, const Grid& grid, const std::vector<Depression>& deepest_first);

/// What the table of depressions leaves out, if anything.
[[nodiscard]] Notices notices_of(const Depressions& depressions, double metres_per_elevation_unit);

}  // namespace rillclock
