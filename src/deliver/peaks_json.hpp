#pragma once

#include "json_values.hpp"
#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// The peaks of a point by return period, in SI.
[[nodiscard]] Json peaks_json(const StudyResult& result, const Outlet& outlet);
/// How the study's peaks were made.
[[nodiscard]] Json peak_parameters_json(const Study& study);

}  // namespace rillclock
