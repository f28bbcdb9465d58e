#pragma once

#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/travel/travel_rules.hpp"

namespace rillclock {

/// How many times longer a channel step takes under these rules than under the base's: all that may differ is n and a factor on the radius.
inline double channel_factor(const ChannelRules& rules, const ChannelRules& base) {
    const auto speed = [](const ChannelRules& channel) {
        return manning_velocity({.n = channel.n, .hydraulic_radius = channel.radius_at(square_kilometres(1)), .slope = 1.0});
    };
    return speed(base) / speed(rules);
}

}  // namespace rillclock
