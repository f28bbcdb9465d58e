#pragma once

#include <string>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

// The result must hold an uncertainty for all of these.

/// `tables/uncertainty.csv`: one row a point and input, those that move the point's time most first: the input's range, and the time at
/// either end with all else as in the study.
[[nodiscard]] std::string uncertainty_table(const StudyResult& result);

/// `tables/uncertain_times.csv`: one row a point: time with all inputs fast, typical and slow, and percentiles of the draws.
[[nodiscard]] std::string uncertain_times_table(const StudyResult& result);

/// `tables/last_subareas.csv`: one row a point and subarea whose water arrived last in any draw, with in how many.
[[nodiscard]] std::string last_subareas_table(const StudyResult& result);

/// `tables/draws.csv`: one row a draw: its inputs' values to 17 digits, so that it can be run again, and the times of the points
/// with the largest catchments, at most twenty.
[[nodiscard]] std::string draws_table(const StudyResult& result);

/// What the ranges make of the time of a point, in a sentence.
[[nodiscard]] std::string uncertainty_sentence(const StudyResult& result, const Outlet& outlet);

}  // namespace rillclock
