#pragma once

#include <algorithm>

#include "flow_profile.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/travel/slope_ahead.hpp"

namespace rillclock {

/// The slope rules in the elevations' own unit, applied to the top of a profile.
class SlopeAtTop {
public:
    SlopeAtTop(const SlopeRules& rules, double metres_per_elevation_unit)
        : rules_(rules), metres_per_unit_(metres_per_elevation_unit),
          step_(in_metres(rules.vertical_step) / metres_per_elevation_unit) {}

    [[nodiscard]] double floor(GroundKind kind) const {
        return std::max(kind == GroundKind::overland ? rules_.overland_floor : rules_.channel_floor, least_slope);
    }

    /// Rise over run, at least the floor of the kind. The path is longer than nothing.
    template <class Fetch>
    [[nodiscard]] float slope(FlowProfile<Fetch>& path, GroundKind kind) const {
        return static_cast<float>(std::max(free_slope(path, kind) * metres_per_unit_, floor(kind)));
    }

    /// Whether the path falls more than the vertical step within the window.
    template <class Fetch>
    [[nodiscard]] bool falls_within(FlowProfile<Fetch>& path) const {
        return path.fall_within(in_metres(rules_.window)) > step_;
    }

private:
    /// In elevation units a metre, before the floor; 0 where the search would end under it.
    template <class Fetch>
    [[nodiscard]] double free_slope(FlowProfile<Fetch>& path, GroundKind kind) const {
        double reach = std::min(in_metres(rules_.window), path.length());
        if (kind == GroundKind::overland) reach = std::min(reach, path.distance_to_concentrated(reach));
        const double fall = path.fall_within(reach);
        if (fall >= step_) return fall / reach;
        // Beyond this the answer would lie under the floor; a little more, so that rounding decides nothing.
        const double limit = 1.000001 * step_ * metres_per_unit_ / floor(kind);
        const auto distance = path.distance_to_fall(step_, limit);
        if (distance) return step_ / *distance;
        const auto to_root = path.fall_to_root();
        return to_root ? *to_root / path.length() : 0.0;
    }

    const SlopeRules& rules_;
    double metres_per_unit_;
    double step_;   ///< the vertical step in elevation units
};

}  // namespace rillclock
