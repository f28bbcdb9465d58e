#pragma once

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// Standard acceleration of free fall, m/s² (CGPM, 1901).
inline constexpr double standard_gravity = 9.80665;

/// The speed √(g·D) at which a long wave crosses water of mean depth D: how fast a lake or a full depression hands on
/// what arrives. NaN for a negative depth.
/// Source: NEH Part 630, chapter 15, 2010, equation 15-11 (value from memory).
[[nodiscard]] Speed wave_celerity(Length mean_depth);

}  // namespace rillclock
