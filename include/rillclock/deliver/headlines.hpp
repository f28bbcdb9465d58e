#pragma once

#include <string>
#include <vector>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// The most interesting sentences of an answer: the governing path of the point with the largest catchment, what makes its time, its peak
/// flow where there is one, what the ranges of its inputs make of its time where the study asks for that, at how many points rain by duration
/// gives no peak and why, the points where a part of the area makes the peak, those where the subarea that arrives last is not the one with the
/// greatest share of it, the least leads, and what most needs a person's eye.
[[nodiscard]] std::vector<std::string> headlines(const StudyResult& result);

/// Positions of the points by area, the largest first; of equal ones the earlier number.
[[nodiscard]] std::vector<std::size_t> by_area(const StudyResult& result);

/// A short table of the points, for a terminal: name, area, time, path; at most `most` rows, the largest catchments first.
[[nodiscard]] std::string outlets_overview(const StudyResult& result, std::size_t most);

}  // namespace rillclock
