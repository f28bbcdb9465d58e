#include "rillclock/study/handbook_cases.hpp"

#include <algorithm>

namespace rillclock {

HandbookCases handbook_cases(std::vector<LumpSubarea> subareas, const IntensityOfDuration& rain, Duration least_time,
                             RationalConversion conversion) {
    std::sort(subareas.begin(), subareas.end(), [](const LumpSubarea& a, const LumpSubarea& b) { return a.arrival < b.arrival; });
    HandbookCases best;
    double later_per_second = 0.0;  // Σ C·A / arrival of those that come later, m²/s
    for (const LumpSubarea& s : subareas) {
        if (s.arrival > least_time) later_per_second += from_fixed_area(s.runoff) / in_seconds(s.arrival);
    }
    double arrived_m2 = 0.0;
    for (std::size_t i = 0; i < subareas.size(); ++i) {
        const LumpSubarea& s = subareas[i];
        arrived_m2 += from_fixed_area(s.runoff);
        if (s.arrival > least_time) later_per_second -= from_fixed_area(s.runoff) / in_seconds(s.arrival);
        // Rain is no shorter than the least time, and those that arrive together count together.
        const Duration time = std::max(s.arrival, least_time);
        if (i + 1 < subareas.size() && subareas[i + 1].arrival <= time) continue;
        const std::optional<Intensity> intensity = rain(time);
        if (!intensity) break;
        const Area share = square_metres(std::max(0.0, later_per_second * in_seconds(time)));
        const Discharge alone = rational_peak(square_metres(arrived_m2), *intensity, conversion);
        const Discharge shared = rational_peak(square_metres(arrived_m2) + share, *intensity, conversion);
        best.part_alone = std::max(best.part_alone, alone);
        if (shared > best.part_and_share) best.time_of_part = time;
        best.part_and_share = std::max(best.part_and_share, shared);
    }
    return best;
}

}  // namespace rillclock
