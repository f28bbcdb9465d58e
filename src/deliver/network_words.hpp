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

/// The peak of a point at the return period that paths and maps are for; null where there is none.
[[nodiscard]] const PointPeak* raster_peak(const StudyResult& result, PointNumber number);

/// The time of concentration of a point as it is shown first, in s: the one its peaks are made with, at the return period that paths and
/// maps are for. With pipes or overrides in the study it is that of the network.
[[nodiscard]] double time_shown_s(const StudyResult& result, const Outlet& outlet);

/// The area that goes with it: with pipes, of all whose water comes to the point.
[[nodiscard]] FixedArea area_shown(const StudyResult& result, const Outlet& outlet);

/// "*" where pipes or what is stated act on the point, else nothing.
[[nodiscard]] std::string stated_mark(const StudyResult& result, const Outlet& outlet);

/// What the mark says, beneath a table of points; empty where none has it.
[[nodiscard]] std::string stated_mark_words(const StudyResult& result);

}  // namespace rillclock
