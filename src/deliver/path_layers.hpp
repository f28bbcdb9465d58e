#pragma once

#include "rillclock/deliver/study_result.hpp"
#include "rillclock/io/vector_output.hpp"

namespace rillclock {

/// The layers `paths`, two features for each point, and `segments`, a feature for each row of `tables/segments.csv`. Their lines are the paths'
/// branches (`path_branches`): a stretch that many paths share is drawn once, and a feature all of whose way is drawn with others has no line.
void write_paths(const StudyResult& result, VectorFile& file);

}  // namespace rillclock
