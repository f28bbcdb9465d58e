#pragma once

#include <optional>
#include <string>
#include <variant>
#include <vector>

#include "rillclock/core/quantity.hpp"
#include "rillclock/rainfall/intensity_formula.hpp"

namespace rillclock {

/// One point of a table of rain: the intensity of a storm of that duration.
struct RainPoint {
    Duration duration;
    Intensity intensity;
};

/// The points of one return period, durations rising; between two of them the intensity is a power of the duration (a
/// straight line on log-log paper), and at a point it is that point's own, to the bit.
struct TabulatedRain {
    std::vector<RainPoint> points;

    /// The duration must lie between the first and the last.
    [[nodiscard]] Intensity operator()(Duration duration) const;
};

/// Formulas whose weighted sum is the intensity of one return period: one of weight 1 where the formula is stated for
/// that period or holds for all, two where the period lies between two stated ones.
struct FormulatedRain {
    /// A formula and the share with which it counts.
    struct Part {
        IntensityFormula formula;
        double return_period = 0.0;  ///< in years
        double weight = 1.0;
    };
    std::vector<Part> parts;

    [[nodiscard]] Intensity operator()(Duration duration) const;
};

/// Between which durations a source of rain holds.
struct RainRange {
    Duration first;                     ///< shorter ones are read here; 0 where the source has no first
    std::optional<Duration> last = {};  ///< longer ones cannot be read; none where the source has no last
};

/// Intensity by duration for one return period, as the peaks and the iterations read it.
///
/// It is read at the longest of the duration asked for, the least time of the study and the source's first duration,
/// since rain within a shorter time is not known or not to be used. A duration longer than the source's last has no
/// intensity.
class RainCurve {
public:
    /// How intensity goes by duration.
    using Law = std::variant<TabulatedRain, FormulatedRain>;

    /// `source` names where the rain comes from in errors.
    RainCurve(Law law, RainRange range, Duration least_time, std::string source);

    /// The duration at which the intensity is read when this one is asked for.
    [[nodiscard]] Duration read_at(Duration duration) const;
    /// The intensity; none where the duration is longer than the source's last or no number, and where a formula gives
    /// no finite one (a power law at 0).
    [[nodiscard]] std::optional<Intensity> within(Duration duration) const;
    /// The intensity; throws an input error where there is none.
    [[nodiscard]] Intensity at(Duration duration) const;
    /// The table or formulas it is read from.
    [[nodiscard]] const Law& law() const { return law_; }

private:
    Law law_;
    RainRange range_;
    Duration shortest_;
    std::string source_;
};

}  // namespace rillclock
