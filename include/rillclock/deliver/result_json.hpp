#pragma once

#include <string>

#include "rillclock/deliver/study_result.hpp"
#include "rillclock/tiles/executor.hpp"

namespace rillclock {

/// `result.json`, the manifest of a result: every figure, the parameters as used, the checksums of the inputs, the versions, the
/// notices and the cautions. In SI whatever the study reports in; times also in minutes. The same inputs give the same bytes.
/// The points are put into words on the executor's threads.
[[nodiscard]] std::string result_json(const StudyResult& result, const Executor& executor);

}  // namespace rillclock
