#include "rillclock/hydraulics/rational.hpp"

#include <algorithm>
#include <array>
#include <cmath>

namespace rillclock {
namespace {

struct PrintedFactor {
    double return_period;
    double factor;
};

constexpr double cubic_metres_per_cubic_foot = metres_per_foot * metres_per_foot * metres_per_foot;
/// Cubic feet a second of an acre-inch an hour: 43 560 / 43 200.
constexpr double acre_inches_per_hour = 43560.0 / (12.0 * 3600.0);

constexpr std::array no_factors{PrintedFactor{1, 1.0}, PrintedFactor{1e6, 1.0}};
constexpr std::array wright{PrintedFactor{2, 1.0}, PrintedFactor{10, 1.0}, PrintedFactor{25, 1.1},
                            PrintedFactor{50, 1.2}, PrintedFactor{100, 1.25}};
constexpr std::array australia{PrintedFactor{1, 0.80},  PrintedFactor{2, 0.85},  PrintedFactor{5, 0.95},
                               PrintedFactor{10, 1.00}, PrintedFactor{20, 1.05}, PrintedFactor{50, 1.15},
                               PrintedFactor{100, 1.20}};

std::span<const PrintedFactor> printed(FrequencyFactors factors) {
    switch (factors) {
        case FrequencyFactors::none: return no_factors;
        case FrequencyFactors::wright_mclaughlin: return wright;
        case FrequencyFactors::australian: return australia;
    }
    return no_factors;
}

}  // namespace

Discharge rational_peak(Area runoff_area, Intensity intensity, RationalConversion conversion) {
    const double exact = in_square_metres(runoff_area) * intensity.si();
    return Discharge::from_si(conversion == RationalConversion::exact ? exact : exact / acre_inches_per_hour);
}

double in_cubic_metres_per_second(Discharge flow) { return flow.si(); }
double in_cubic_feet_per_second(Discharge flow) { return flow.si() / cubic_metres_per_cubic_foot; }

std::string_view words(FrequencyFactors factors) {
    switch (factors) {
        case FrequencyFactors::none: return "none";
        case FrequencyFactors::wright_mclaughlin: return "wright-mclaughlin";
        case FrequencyFactors::australian: return "australian 1987";
    }
    return "";
}

double frequency_factor(FrequencyFactors factors, double return_period) {
    const auto table = printed(factors);
    const auto above = std::find_if(table.begin(), table.end(),
                                    [&](const PrintedFactor& p) { return p.return_period >= return_period; });
    if (above == table.begin()) return table.front().factor;
    if (above == table.end()) return table.back().factor;
    const PrintedFactor& below = *(above - 1);
    const double share = std::log(return_period / below.return_period) / std::log(above->return_period / below.return_period);
    return below.factor + share * (above->factor - below.factor);
}

bool is_printed_range(FrequencyFactors factors, double return_period) {
    const auto table = printed(factors);
    return return_period >= table.front().return_period && return_period <= table.back().return_period;
}

double urbonas_coefficient(double impervious) {
    return ((0.858 * impervious - 0.78) * impervious + 0.774) * impervious + 0.04;
}

double schueler_coefficient(double impervious) { return 0.05 + 0.9 * impervious; }

}  // namespace rillclock
