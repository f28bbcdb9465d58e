#pragma once

#include <catch2/catch.hpp>

namespace rillclock {

/// The value but for what rounding may change in a handful of operations.
inline Approx rounding(double value) { return Approx(value).epsilon(1e-12); }

}  // namespace rillclock
