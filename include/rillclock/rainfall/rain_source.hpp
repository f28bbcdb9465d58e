#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/rainfall/intensity_table.hpp"
#include "rillclock/rainfall/rain_curve.hpp"

namespace rillclock {

/// The blocks of an Atlas 14 file: the estimate, and the ends of its 90 % confidence interval.
enum class Atlas14Block { estimate, upper_bound, lower_bound };

/// What was read, so that a slip of unit, block or series is seen at once.
struct RainEcho {
    std::string source;       ///< the file, or the place in the study
    std::string kind;         ///< "NOAA Atlas 14 point file", "table", "formula"
    std::string block = {};   ///< "estimate", "upper bound", "lower bound" of an Atlas 14 file; else empty
    std::string quantity;     ///< "depth" or "intensity"
    std::string unit;         ///< as the source spells it
    std::string series = {};  ///< "partial duration", "annual maximum"; empty where the source does not say
    std::string place = {};   ///< location and volume as an Atlas 14 file states them
    std::vector<double> return_periods = {};  ///< years; empty where a formula holds for all
    RainRange range = {};
};

/// The echo as one sentence: "rain.csv: NOAA Atlas 14 point file, estimate, depth in inches, partial duration, 5 min to
/// 60 days, 1, 2, 5 years".
[[nodiscard]] std::string sentence(const RainEcho& echo);

/// A formula for one return period, or for all where none is stated.
struct PeriodFormula {
    std::optional<double> return_period = {};  ///< years, above 0
    IntensityFormula formula = {};
};

/// Rain from a table or from formulas, with what is to be said about it.
struct RainSource {
    RainEcho echo;
    std::variant<IntensityTable, std::vector<PeriodFormula>> law;
    Notices notices = {};

    /// Intensity by duration at a return period in years, never read below `least_time`. Throws an input error for a
    /// period outside those of the source.
    [[nodiscard]] RainCurve curve(double return_period, Duration least_time) const;

    /// The 2-year 24-hour depth, where the source reaches 2 years and is stated to reach 24 hours. Throws an input
    /// error where that depth is not plausible (`checked_two_year_24_hour`): a unit or a number is then wrong.
    [[nodiscard]] std::optional<Length> two_year_24_hour() const;
};

/// Rain from formulas: either one that holds for all return periods, or one a period, in any order. Between two stated
/// periods the intensity is linear in the logarithm of the period. `range` is where they hold, as the study states it.
/// Throws an input error, begun by `subject`, for none, for two of one period, for a period not above 0, for a formula
/// with T among others or with a period of its own, and for a range that does not rise.
/// Notices: depth falling with duration; intensity falling with the return period at a duration of the range.
[[nodiscard]] RainSource rain_from_formulas(std::vector<PeriodFormula> formulas, RainRange range,
                                            std::string_view subject);

/// Rain from the text of a file: an Atlas 14 point file where its first line says so (the block that is stated, else
/// that of the estimate), else a plain table. `file` names it in errors. Throws an input error as the two readers do,
/// and where a block is stated but the file is a table.
[[nodiscard]] RainSource rain_from_text(std::string_view text, std::string_view file,
                                        std::optional<Atlas14Block> block = {});

}  // namespace rillclock
