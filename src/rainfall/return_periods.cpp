#include "rillclock/rainfall/return_periods.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"

namespace rillclock {

std::string list_of_years(std::span<const double> return_periods) {
    std::string list;
    for (const double years : return_periods) list += (list.empty() ? "" : ", ") + significant(years, 6);
    return list;
}

BetweenPeriods between_periods(std::span<const double> stated, double return_period, std::string_view source) {
    if (!(return_period >= stated.front() && return_period <= stated.back()))
        throw input_error(std::string(source) + " holds no rain of a return period of " +
                          significant(return_period, 6) + " years; its return periods are " + list_of_years(stated) +
                          " years, and only those and what lies between them can be asked for");
    const auto found = std::lower_bound(stated.begin(), stated.end(), return_period);
    const auto upper = static_cast<std::size_t>(found - stated.begin());
    if (*found == return_period) return {.lower = upper, .upper = upper, .weight_of_upper = 0.0};
    const double weight = std::log(return_period / stated[upper - 1]) / std::log(stated[upper] / stated[upper - 1]);
    return {.lower = upper - 1, .upper = upper, .weight_of_upper = weight};
}

}  // namespace rillclock
