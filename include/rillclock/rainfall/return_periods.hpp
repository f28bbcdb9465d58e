#pragma once

#include <cstddef>
#include <span>
#include <string>
#include <string_view>

namespace rillclock {

/// Where a return period lies among stated ones: a value for it is (1 − w) · value of `lower` + w · value of `upper`.
struct BetweenPeriods {
    std::size_t lower = 0;
    std::size_t upper = 0;
    double weight_of_upper = 0.0;  ///< linear in the logarithm of the period; 0 at a stated one
};

/// Finds the period (years) among `stated` (rising, at least one). Throws an input error, begun by `source`, for a
/// period outside the stated ones or no number.
[[nodiscard]] BetweenPeriods between_periods(std::span<const double> stated, double return_period,
                                             std::string_view source);

/// "1, 2, 5, 10".
[[nodiscard]] std::string list_of_years(std::span<const double> return_periods);

}  // namespace rillclock
