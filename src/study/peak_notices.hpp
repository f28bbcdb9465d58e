#pragma once

#include "rillclock/study/peaks.hpp"

namespace rillclock {

/// What a reviewer should know of the peaks: areas beyond the limit of the method, times below the least, coefficients
/// outside what is printed or cut to 1, return periods beyond the printed factors, points without a peak, pipes that cannot take theirs.
[[nodiscard]] Notices peak_notices(const PeakInputs& in, const std::vector<std::vector<PointPeak>>& points);

}  // namespace rillclock
