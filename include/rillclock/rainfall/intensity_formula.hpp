#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "rillclock/core/notice.hpp"
#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// Intensity by duration as a formula: i = K · T^m / (t^e + b)^c, of which the forms in use are cases.
///
/// a/(t + b)^c (Sherman, 1931); a/(t + b) (Talbot); c/(t^e + f) (Wenzel, 1982, in Chow, Maidment and Mays, Applied
/// Hydrology, 1988, table 14.2.3); b/(t + d)^e (Texas Department of Transportation, Hydraulic Design Manual, equation
/// 4-21); K·T^m/(t + b)^n for all return periods at once. Forms from memory, but for the last two.
struct IntensityFormula {
    double factor = 0.0;           ///< K, above 0, in the unit of intensity
    double period_exponent = 0.0;  ///< m, 0 or more; 0 where the formula is for one return period
    double time_exponent = 1.0;    ///< e, above 0
    double added = 0.0;            ///< b, 0 or more, in the unit of time to the power e
    double outer_exponent = 1.0;   ///< c, above 0
    Intensity intensity_unit = inches_per_hour(1);
    Duration time_unit = minutes(1);

    /// The intensity of a storm of that duration (above 0) and return period in years (above 0).
    [[nodiscard]] Intensity operator()(Duration duration, double return_period) const;

    /// Whether it gives the intensity of every return period.
    [[nodiscard]] bool for_all_periods() const { return period_exponent > 0; }

    /// The duration beyond which the depth i·t falls as the duration grows; none where it never does. Depth grows as
    /// long as c·e·t^e < t^e + b, so it never falls where c·e ≤ 1, and falls beyond b/(c − 1) where e = 1.
    [[nodiscard]] std::optional<Duration> depth_falls_beyond() const;

    bool operator==(const IntensityFormula&) const = default;
};

/// Reads a formula as a manual prints it, with its units beside i and t: "i[in/h] = 94.9 / (t[min]^0.88 + 9.04)".
///
/// Numbers may be letters whose values follow after a semicolon: "i[mm/h] = K T^m / (t[min] + b)^n; K = 900, m = 0.2,
/// b = 10, n = 0.8". Units of i: in/h, mm/h, cm/h; of t: min, h. T is the return period in years. `subject` begins the
/// sentence of the input error that is thrown for a text of another form, a letter without a value or a value without
/// its letter, a unit that is missing or unknown, and numbers outside the ranges above.
[[nodiscard]] IntensityFormula intensity_formula_from_text(std::string_view text, std::string_view subject);

/// Says, where it is so, that the depth of the formula falls with duration: a peak can then come before the whole area
/// contributes. `subject` begins the sentence.
[[nodiscard]] Notices notices_about(const IntensityFormula& formula, std::string_view subject);

}  // namespace rillclock
