#include "rillclock/catchment/rain_zone.hpp"

#include <numeric>

namespace rillclock {

std::optional<RainZone> prevailing_zone(std::span<const FixedArea> area_by_zone, bool is_everywhere) {
    std::size_t most = 0;
    FixedArea greatest = 0;
    for (std::size_t zone = 1; zone < area_by_zone.size(); ++zone) {
        if (area_by_zone[zone] <= greatest) continue;
        most = zone;
        greatest = area_by_zone[zone];
    }
    if (is_everywhere && !area_by_zone.empty() && area_by_zone[0] > greatest) {
        most = 0;
        greatest = area_by_zone[0];
    }
    if (greatest == 0) return std::nullopt;
    const FixedArea whole = std::accumulate(area_by_zone.begin(), area_by_zone.end(), FixedArea{0});
    return RainZone{.number = most, .share = from_fixed_area(greatest) / from_fixed_area(whole)};
}

}  // namespace rillclock
