#include "rillclock/travel/channel_reach.hpp"

#include <cmath>

#include "rillclock/hydraulics/gutter.hpp"

namespace rillclock {
namespace {

ChannelReach trapezoid_reach(const MappedSection& section) {
    const WettedSection flow = wetted(section.trapezoid, section.depth);
    return {.n = section.n,
            .radius_m = in_metres(flow.hydraulic_radius()),
            .mean_depth_m = in_square_metres(flow.flow_area) / in_metres(flow.top_width)};
}

ChannelReach gutter_reach(const MappedSection& section) {
    const double depth_m = section.cross_fall * in_metres(section.spread);
    return {.n = section.n, .radius_m = std::pow(gutter_velocity_constant, 1.5) * depth_m, .mean_depth_m = depth_m / 2};
}

ChannelReach shaped_reach(const MappedSection& section) {
    switch (section.shape) {
        case SectionShape::by_area: return {.n = section.n};
        case SectionShape::trapezoid: return trapezoid_reach(section);
        case SectionShape::gutter: return gutter_reach(section);
    }
    return {};
}

}  // namespace

ChannelReach reach_of(const MappedSection& section, std::uint32_t position) {
    ChannelReach reach = shaped_reach(section);
    reach.section = position;
    return reach;
}

}  // namespace rillclock
