#pragma once

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// The shortest round step that cuts times from 0 up to `greatest` into at most so many bands (at least 1): 1, 2, 5, 10, 15, 20 or 30
/// seconds or minutes, 1, 2, 3, 4, 6, 8 or 12 hours, or 1, 2, 5 times a power of ten in days. A band holds its lower end and not its upper
/// one, so that a greatest time of exactly so many steps asks for a longer one. 1 second where `greatest` is not above that.
[[nodiscard]] Duration isochrone_step(Duration greatest, int bands);

}  // namespace rillclock
