#pragma once

#include <functional>
#include <optional>
#include <string_view>
#include <vector>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// Intensity of rain for a storm of some duration; none where the source of rain does not reach that duration.
using IntensityOfDuration = std::function<std::optional<Intensity>(Duration)>;
/// Time of travel under rain of some intensity; falls as the intensity grows.
using TimeOfIntensity = std::function<Duration(Intensity)>;

/// Whose time is the duration of the storm that drives sheet flow: two readings are in use.
enum class StormDuration {
    whole_path,  ///< from the head to the point
    sheet_part,  ///< of sheet flow alone
};

/// "whole path", "sheet part".
[[nodiscard]] std::string_view words(StormDuration duration);

/// One line of the iteration, as a reviewer writes it by hand.
struct StormIteration {
    Duration assumed;
    Intensity intensity;  ///< read at the assumed duration
    Duration computed;    ///< the time under that intensity
};

/// How an iteration ended.
enum class StormEnd {
    settled,          ///< the computed time is the assumed one within the tolerance
    beyond_the_rain,  ///< the source of rain does not reach the last computed time
    not_settling,     ///< the most rows were made without settling, or a time is no number
};

/// "settled", "beyond the rain", "not settling".
[[nodiscard]] std::string_view words(StormEnd end);

/// The time under the storm that lasts as long as that time.
struct StormTime {
    StormEnd end = StormEnd::not_settling;
    std::vector<StormIteration> rows;

    /// The computed time of the last row; the answer where the end is `settled`.
    [[nodiscard]] Duration time() const;
    /// The intensity of the last row.
    [[nodiscard]] Intensity intensity() const;
};

/// Where the iteration begins and ends.
struct StormSearch {
    Duration start = minutes(5);        ///< the first assumed time, above 0
    Duration tolerance = seconds(0.1);  ///< between assumed and computed time
    int most_rows = 50;
};

/// Solves t = time(intensity(t)): assume a time, read the intensity for that duration, compute the time, assume that
/// one.
///
/// Why it converges: let the time fall with the intensity at most as i^-p, and the intensity with the duration at most
/// as d^-c; in logarithms one round then changes a difference of times by a factor from 0 to q = p·c, and q < 1 makes
/// the rounds close in on the one solution, from one side (a longer assumption gives a longer answer). For the
/// kinematic wave p = 0.4, and for any front of times A·i^-0.4 + B no more than that; c ≤ 1 wherever depth does not
/// fall with duration; so each round leaves at most 0.4 of the difference, and the settled time is within q/(1 − q) =
/// 0.67 of the tolerance. A kink of the table at the solution changes nothing, since the bound holds on both sides of
/// it. Where intensity rises with duration, or falls faster than d^(-1/p), the rounds may swing or run away: then the
/// end says so and the rows show it. Where the rain ends before the solution, the rounds from below it reach that end.
/// The same holds for the formulas with i^-0.38, i^-0.519 and i^(-2/3).
/// Source of the procedure: FHWA, HEC-22, 3rd ed., 2009, section 3.2 (from memory). Throws an input error for a start
/// or a tolerance not above 0.
[[nodiscard]] StormTime solve_storm_time(const TimeOfIntensity& time, const IntensityOfDuration& intensity,
                                         const StormSearch& search = {});

}  // namespace rillclock
