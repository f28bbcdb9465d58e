#pragma once

#include "json_values.hpp"
#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// Adds what a point's peaks are, in SI: "runoff_land", the land of its catchment by what its runoff coefficient depends on, the greatest
/// area first (the last row may stand for the rest), and "peaks", by return period.
void add_peaks(const StudyResult& result, const Outlet& outlet, Json& json);
/// How the study's peaks were made.
[[nodiscard]] Json peak_parameters_json(const Study& study);

}  // namespace rillclock
