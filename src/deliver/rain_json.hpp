#pragma once

#include "json_values.hpp"
#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// What was read of the rain by duration, its curves and its zones; only where a study has such rain.
[[nodiscard]] Json rain_json(const StudyResult& result);

}  // namespace rillclock
