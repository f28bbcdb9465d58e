#pragma once

#include <span>
#include <string>

#include "rillclock/deliver/study_result.hpp"
#include "rillclock/terrain/depressions.hpp"

namespace rillclock {

/// `tables/depressions.csv`: one row a depression, in the order given. Column names carry the units; x and y are of the deepest cell.
[[nodiscard]] std::string depressions_table(const StudyResult& result, std::span<const Depression> depressions);

}  // namespace rillclock
