#pragma once

#include <string>
#include <vector>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// The names of points down a way: "Ford > Mill > Weir"; of more than eight the first and the last four, and how many between.
[[nodiscard]] std::string way_in_words(const StudyResult& result, const std::vector<PointNumber>& way);

/// What is stated above a point in place of what is computed: "Mill (time, C), Ford (pipe)"; empty where nothing is.
[[nodiscard]] std::string stated_in_words(const StudyResult& result, const std::vector<PointNumber>& points);

/// The subareas that make a peak, with their shares of its window: "Mill 62 %, Ford 30 %".
[[nodiscard]] std::string makers_in_words(const StudyResult& result, const PointPeak& peak);

}  // namespace rillclock
