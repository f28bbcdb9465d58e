#pragma once

#include <vector>

#include "rillclock/catchment/drawn_catchments.hpp"
#include "rillclock/catchment/study_regions.hpp"
#include "study_data.hpp"

namespace rillclock {

/// The file of hand-drawn catchments of a study, as points that have no place yet. Throws an input error where the file cannot be used or two
/// catchments have the same name.
[[nodiscard]] StatedPoints read_drawn_catchments(const Study& study, const ReferenceSystem& system);

/// Places the point of each drawn catchment in the lowest cell in which water leaves it (`lowest_crossings`; of several the one with the largest
/// contributing area, then the smaller index), with the drawn area as surveyed. Those that hold no cell with data are left out, and
/// those that reach beyond the data told, each with a notice.
[[nodiscard]] StatedPoints with_crossings(StatedPoints stated, const ResolvedStudy& resolved, const TiledTravel& travel, const TerrainData& terrain);

/// Each drawn catchment beside that of the elevations, by number of the point.
[[nodiscard]] std::vector<DrawnDifference> drawn_differences(const std::optional<StatedPoints>& stated, const std::vector<DesignPoint>& points,
                                                             const StudyRegions& regions, const TiledTravel& travel, const TerrainData& terrain);

/// A notice where the two have less than nine tenths in common.
[[nodiscard]] Notices notices_of(const std::vector<DrawnDifference>& differences, const std::vector<DesignPoint>& points);

}  // namespace rillclock
