#include "rillclock/rainfall/intensity_formula.hpp"

#include <cmath>

#include "rillclock/core/number_text.hpp"

namespace rillclock {

Intensity IntensityFormula::operator()(Duration duration, double return_period) const {
    const double denominator = std::pow(std::pow(duration / time_unit, time_exponent) + added, outer_exponent);
    return intensity_unit * (factor * std::pow(return_period, period_exponent) / denominator);
}

std::optional<Duration> IntensityFormula::depth_falls_beyond() const {
    const double steepest = outer_exponent * time_exponent;
    if (!(steepest > 1)) return std::nullopt;
    return time_unit * std::pow(added / (steepest - 1), 1 / time_exponent);
}

Notices notices_about(const IntensityFormula& formula, std::string_view subject) {
    const auto from = formula.depth_falls_beyond();
    if (!from) return {};
    const double exponent = formula.outer_exponent * formula.time_exponent;
    return {{.code = "rain-depth-falls",
             .text = std::string(subject) + " has the exponent " + significant(exponent) +
                     " over the duration, above 1, so its depth falls with duration beyond " +
                     significant(in_minutes(*from), 4) +
                     " min; a peak may come before the whole area contributes: check the formula",
             .value = exponent,
             .threshold = 1.0}};
}

}  // namespace rillclock
