#pragma once

#include <vector>

#include "rillclock/study/peaks.hpp"

namespace rillclock {

/// The search for a partial area in at most some thirty rows: steps of a round length, the governing duration and the
/// whole time among them. `begins`: when, counted from the root, water of the point's own cell arrives.
[[nodiscard]] std::vector<TimeAreaRow> time_area_rows(const ArrivalCurve& curve, const PartialAreaSearch& search,
                                                      Duration governing, FixedTime begins, RationalConversion conversion);

/// The step between rows: the first of a round list, and no less than a bin, that makes at most 24 of the whole time.
[[nodiscard]] Duration time_area_step(Duration whole_time, Duration bin);

}  // namespace rillclock
