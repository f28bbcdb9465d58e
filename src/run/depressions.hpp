#pragma once

#include "rillclock/terrain/depressions.hpp"
#include "study_data.hpp"

namespace rillclock {

/// The deepest depressions of a study, at most 10 000, those on governing paths marked.
[[nodiscard]] Depressions depressions_of(const TiledTravel& travel, const std::vector<Outlet>& outlets);

/// What the table of depressions leaves out, if anything.
[[nodiscard]] Notices notices_of(const Depressions& depressions, double metres_per_elevation_unit);

}  // namespace rillclock
