#pragma once

#include <string>
#include <vector>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// The three most interesting sentences of an answer: the governing path of the point with the largest catchment, what makes its time,
/// and what most needs a person's eye.
[[nodiscard]] std::vector<std::string> headlines(const StudyResult& result);

/// A short table of the points, for a terminal: name, area, time, path; at most `most` rows, the largest catchments first.
[[nodiscard]] std::string outlets_overview(const StudyResult& result, std::size_t most);

}  // namespace rillclock
