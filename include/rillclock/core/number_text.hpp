#pragma once

#include <string>

namespace rillclock {

/// The number with at most `digits` significant digits (1 to 17): "0.0959", "1613", "61.034". Zeros at the end of the
/// decimals are dropped; digits before the decimal point are all kept. No exponent from 1e-6 to below 1e15; the same
/// bytes in every locale. Zero of either sign is "0"; NaN and infinities are "nan", "inf", "-inf".
[[nodiscard]] std::string significant(double value, int digits = 5);

/// The number with exactly `decimals` decimals (0 to 17), rounded to nearest: "1.50". A result of zero has no sign.
[[nodiscard]] std::string fixed_decimals(double value, int decimals);

}  // namespace rillclock
