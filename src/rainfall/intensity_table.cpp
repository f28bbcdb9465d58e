#include "rillclock/rainfall/intensity_table.hpp"

#include <algorithm>
#include <cmath>
#include <string>

#include "rillclock/core/error.hpp"
#include "rillclock/rainfall/return_periods.hpp"

namespace rillclock {

TabulatedRain IntensityTable::of_period(double return_period, std::string_view source) const {
    const BetweenPeriods between = between_periods(return_periods, return_period, source);
    TabulatedRain rain;
    for (std::size_t row = 0; row < durations.size(); ++row) {
        const std::size_t start = row * return_periods.size();
        const Intensity lower = intensities[start + between.lower];
        const Intensity upper = intensities[start + between.upper];
        rain.points.push_back({durations[row], lower + between.weight_of_upper * (upper - lower)});
    }
    return rain;
}

}  // namespace rillclock
