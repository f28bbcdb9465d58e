#pragma once

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <string>

#include "chart.hpp"
#include "palette.hpp"
#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// Classes of travel time in round minutes, with a colour each.
struct TimeClasses {
    double step = 1.0;   ///< min
    std::size_t count = 1;

    [[nodiscard]] std::size_t of(double minutes) const { return std::min(count - 1, static_cast<std::size_t>(std::max(0.0, minutes) / step)); }
    [[nodiscard]] std::string colour(std::size_t number) const {
        return colour_of_time(static_cast<double>(number), count > 1 ? static_cast<double>(count - 1) : 1.0);
    }
};

/// About ten classes, up to the greatest time of any point.
[[nodiscard]] inline TimeClasses time_classes(const StudyResult& result) {
    constexpr double most_classes = 10.0;
    double greatest = 0.0;
    for (const Outlet& outlet : result.outlets) greatest = std::max(greatest, outlet.greatest_s / 60.0);
    const double step = round_step(greatest, most_classes);
    return {.step = step, .count = std::max<std::size_t>(1, static_cast<std::size_t>(std::ceil(greatest / step)))};
}

}  // namespace rillclock
