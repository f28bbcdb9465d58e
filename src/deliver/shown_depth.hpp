#pragma once

#include <cmath>

namespace rillclock {

/// A depth as it is shown, in any unit of length: to the thousandth. It is the difference of two elevations, and those in single precision are
/// hundredths of a millimetre off: 0.25999 m is 0.26 m. What is shallower than a thousandth stays as it is, so that none is 0.
[[nodiscard]] inline double shown_depth(double depth) { return depth >= 1e-3 ? std::round(depth * 1e3) / 1e3 : depth; }

}  // namespace rillclock
