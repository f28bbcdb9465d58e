#pragma once

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/storm_time.hpp"

namespace rillclock {

/// C·A by time of arrival, in bins of equal width: bin p holds what arrives within [p, p + 1) widths. Where it is not sure which bin land
/// arrives in, `runoff` has it spread over those it may, and the two beside have it whole in the first and in the last of these.
struct ArrivalCurve {
    std::int64_t first_bin = 0;         ///< the place of the first one
    std::vector<FixedArea> runoff;      ///< C·A of each bin from there on, in cm²
    Duration bin = seconds(5);          ///< width
    std::vector<FixedArea> by_earliest = {};  ///< as long as `runoff`, or empty where all is sure
    std::vector<FixedArea> by_latest = {};
};

/// What a search is made with.
struct PartialAreaSearch {
    const IntensityOfDuration& rain;  ///< falls with duration, or stays
    Duration least_time;
    Duration whole_time;              ///< by which all of the area has arrived
};

/// A stretch of rain, and what arrives within it.
struct RainWindow {
    Duration duration;                ///< of the rain
    std::int64_t first_bin = 0;       ///< of the window in which most arrives; the earliest of equal ones
    std::int64_t bins = 0;            ///< how many; all where the duration is the whole time
    FixedArea runoff = 0;             ///< C·A within
    double product = 0.0;             ///< i·C·A, m³/s

    /// Whether a bin lies in the window.
    [[nodiscard]] bool holds(std::int64_t place) const { return place >= first_bin && place < first_bin + bins; }
};

/// The duration whose rain makes the greatest flow.
struct PartialPeak {
    RainWindow best;                  ///< of equal ones the longest duration
    RainWindow whole;
    double least_product = 0.0;       ///< what the flow would be at least were times not binned; never above `best`
    double greatest_product = 0.0;    ///< and at most; never below
};

/// The greatest over durations d, from the least time to the whole-area time, of i(d) times the most C·A that arrives
/// within any stretch of length d; never below the whole area's, since that is one of them. None where the rain does
/// not reach the whole time.
///
/// d is the least time, every whole number of bins between, and the whole time. A stretch holds as many bins as fit into it. The C·A of
/// land that can arrive in these bins alone is never more than that of the exact arrivals; the C·A of land that may arrive in them, or in
/// the two beside that a stretch can touch, is never less: those are the two bounds. The search halves ranges of durations and drops
/// those whose intensity at the short end times C·A at the long end cannot do better: the answer is that of trying all. Cost: the number
/// of bins for each duration tried, usually some tens.
[[nodiscard]] std::optional<PartialPeak> partial_peak(const ArrivalCurve& curve, const PartialAreaSearch& search);

/// The window in which most arrives for a rain of this duration.
[[nodiscard]] std::optional<RainWindow> rain_window(const ArrivalCurve& curve, const PartialAreaSearch& search,
                                                    Duration duration);

}  // namespace rillclock
