#pragma once

#include <optional>
#include <vector>

#include "rillclock/catchment/arrival_tally.hpp"
#include "rillclock/catchment/point_storms.hpp"
#include "study_data.hpp"

namespace rillclock {

/// Intensity by duration of each of the storms, which must outlive it.
[[nodiscard]] std::vector<IntensityOfDuration> intensities_of(const std::vector<StudyStorm>& storms);

/// The storms that points are timed under; none where one storm times all: without kinematic sheet flow and without zones of rain.
[[nodiscard]] std::optional<OwnStorms> own_storms_of(const Study& study, const TravelRules& rules,
                                                     const StudyRain& rain);

/// Throws an input error that names the first point and return period whose storm did not settle, and says why: the
/// rain ends before, or it rises or falls with duration as no rain does.
void require_settled(const std::vector<PointHeads>& heads, const std::vector<DesignPoint>& points,
                     const StudyRain& rain);

/// The storm of travel_time.tif, and the formula of its sheet flow, in words.
[[nodiscard]] std::string storm_words(const Study& study, const StudyRain& rain);
[[nodiscard]] std::string sheet_words(const Study& study);

}  // namespace rillclock
