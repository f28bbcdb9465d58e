#pragma once

#include "rillclock/deliver/study_result.hpp"
#include "rillclock/io/vector_output.hpp"

namespace rillclock {

/// The layer `network`: a feature for each point that has a next one, along the flow path or, where a pipe leads on, straight to its end.
void write_network(const StudyResult& result, VectorFile& file);

/// The layer `peaks`: a feature for each point and return period, as in `tables/peaks.csv`. The result must hold peaks.
void write_peaks(const StudyResult& result, VectorFile& file);

}  // namespace rillclock
