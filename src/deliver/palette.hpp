#pragma once

#include <string>

#include "rillclock/travel/regime.hpp"

namespace rillclock {

/// Viridis at a share from 0 (dark) to 1 (light), "#rrggbb". Sequence by Smith and van der Walt, 2015: even in lightness, and told apart by the
/// colour-blind.
[[nodiscard]] std::string viridis(double share);

/// Colours of the regimes, from the set that Okabe and Ito made for the colour-blind (2008).
[[nodiscard]] std::string colour_of(Regime regime);

/// Of water arriving after so many minutes, where the last arrives after `greatest`: early light, late dark.
[[nodiscard]] inline std::string colour_of_time(double minutes, double greatest) {
    return viridis(greatest > 0 ? 1.0 - minutes / greatest : 1.0);
}

}  // namespace rillclock
