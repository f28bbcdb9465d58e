#pragma once

#include <cstddef>
#include <optional>
#include <span>

#include "rillclock/core/fixed_point.hpp"

namespace rillclock {

/// The zone whose rain a point has.
struct RainZone {
    std::size_t number = 0;  ///< from 1; 0 is the rain outside of all zones, or the one rain where there are none
    double share = 1.0;      ///< of the catchment's area that lies in it
};

/// The zone with the greatest share of a catchment; of equal ones the smaller number, and what lies outside of all
/// zones last. `area_by_zone[0]` lies outside and counts only where there is rain for it (`is_everywhere`). None where
/// nothing that counts has any area.
[[nodiscard]] std::optional<RainZone> prevailing_zone(std::span<const FixedArea> area_by_zone, bool is_everywhere);

}  // namespace rillclock
