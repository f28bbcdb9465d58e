#pragma once

#include <vector>

#include "rillclock/study/peaks.hpp"

namespace rillclock {

/// A subarea as handbooks know it: a lump that arrives at one time.
struct LumpSubarea {
    Duration arrival;
    FixedArea runoff = 0;  ///< C·A
};

/// The shortcut of the handbooks: rain as long as the time of some subarea, and the C·A of those that have arrived, alone
/// (a highly impervious part at the downstream end) or with t / arrival of each later one beside (a small tributary that
/// joins a larger area). Source: FHWA, HEC-22, 3rd ed., 2009, section 7.2, two exceptions (from memory).
[[nodiscard]] HandbookCases handbook_cases(std::vector<LumpSubarea> subareas, const IntensityOfDuration& rain,
                                           Duration least_time, RationalConversion conversion);

}  // namespace rillclock
