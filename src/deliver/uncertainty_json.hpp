#pragma once

#include <nlohmann/json.hpp>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// What `result.json` says of the ranges of all inputs, and of one point under them. The result must hold an uncertainty.
[[nodiscard]] nlohmann::ordered_json uncertainty_json(const StudyResult& result);
[[nodiscard]] nlohmann::ordered_json point_uncertainty_json(const StudyResult& result, const Outlet& outlet);

}  // namespace rillclock
