#pragma once

#include <cstdint>

namespace rillclock {

/// A length in units of 2⁻²⁰ m. Integers, so that a sum does not depend on the order in which it was made.
using FixedLength = std::int64_t;
/// A time in units of 2⁻²⁰ s.
using FixedTime = std::int64_t;
/// An area in cm².
using FixedArea = std::int64_t;

inline constexpr double fixed_units_per_one = 1048576.0;  // 2^20

/// The nearest whole number, halves away from zero; the value must lie within ±9·10¹⁸. Compiles to a few instructions where
/// std::llround is a call.
[[nodiscard]] constexpr std::int64_t nearest_whole(double value) {
    return value < 0 ? -static_cast<std::int64_t>(0.5 - value) : static_cast<std::int64_t>(value + 0.5);
}

/// Nearest multiple of 2⁻²⁰ of a value in SI; the error is at most 2⁻²¹. The value must lie within ±8·10¹².
[[nodiscard]] constexpr std::int64_t to_fixed(double si) { return nearest_whole(si * fixed_units_per_one); }
/// The SI value of a fixed-point number, exact below 2⁵³ units (about 270 years, or 8.6 million kilometres).
[[nodiscard]] constexpr double from_fixed(std::int64_t units) { return static_cast<double>(units) / fixed_units_per_one; }

/// Square metres to the nearest square centimetre.
[[nodiscard]] constexpr FixedArea to_fixed_area(double square_metres) { return nearest_whole(square_metres * 1e4); }
/// In square metres.
[[nodiscard]] constexpr double from_fixed_area(FixedArea area) { return static_cast<double>(area) / 1e4; }

}  // namespace rillclock
