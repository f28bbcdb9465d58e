#pragma once

#include <string>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// `tables/outlets.csv`: one row a design point, in the order of their numbers. Column names carry the units.
[[nodiscard]] std::string outlets_table(const StudyResult& result);

/// `tables/segments.csv`: one row a segment of every point's governing path, then of its longest path where that is another.
///
/// A row holds what its formula needs; recomputed from the printed numbers it holds to 0.1 %. Times in seconds have six
/// decimals, so that the rows of a path add up to its time to a millisecond.
[[nodiscard]] std::string segments_table(const StudyResult& result);

/// `tables/review.csv`: one row a notice, those with the greatest effect on the time first; the last column is a person's.
[[nodiscard]] std::string review_table(const StudyResult& result);

}  // namespace rillclock
