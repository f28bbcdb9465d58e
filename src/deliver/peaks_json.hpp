#pragma once

#include "json_values.hpp"
#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// The peaks of a point by return period, in SI.
[[nodiscard]] Json peaks_json(const StudyResult& result, const Outlet& outlet);
/// The land of a point's catchment by what its runoff coefficient depends on, the greatest area first; the last row may stand for the rest.
[[nodiscard]] Json runoff_land_json(const StudyResult& result, const Outlet& outlet);
/// How the study's peaks were made.
[[nodiscard]] Json peak_parameters_json(const Study& study);

}  // namespace rillclock
