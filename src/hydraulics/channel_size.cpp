#include "rillclock/hydraulics/channel_size.hpp"

#include <algorithm>
#include <array>

namespace rillclock {
namespace {

constexpr PowerLaw law(double metres_at_one_square_kilometre, double exponent) {
    return {.coefficient = metres(metres_at_one_square_kilometre), .unit = square_kilometres(1), .exponent = exponent};
}

/// A law in feet by square miles.
constexpr PowerLaw us_law(double feet_at_one_square_mile, double exponent) {
    return {.coefficient = feet(feet_at_one_square_mile), .unit = square_miles(1), .exponent = exponent};
}

constexpr Area like_sites = square_kilometres(0.5);

constexpr std::array sizes{
    ChannelSize{"United States", law(2.70, 0.352), law(0.30, 0.213), like_sites},
    ChannelSize{"Laurentian Upland", law(4.15, 0.308), law(0.31, 0.202), like_sites},
    ChannelSize{"Atlantic Plain", law(2.22, 0.363), law(0.24, 0.323), like_sites},
    ChannelSize{"Appalachian Highlands", law(3.12, 0.415), law(0.26, 0.287), like_sites},
    ChannelSize{"Interior Plains", law(2.56, 0.351), law(0.38, 0.191), like_sites},
    ChannelSize{"Interior Highlands", law(23.23, 0.121), law(0.27, 0.267), like_sites},
    ChannelSize{"Rocky Mountain System", law(1.24, 0.435), law(0.23, 0.225), like_sites},
    ChannelSize{"Intermontane Plateaus", law(1.11, 0.415), law(0.07, 0.329), like_sites},
    ChannelSize{"Pacific Mountain System", law(2.76, 0.399), law(0.23, 0.294), like_sites},
    ChannelSize{"North Carolina Piedmont", us_law(11.89, 0.43), us_law(1.50, 0.32), square_miles(0.2)},
};

}  // namespace

std::span<const ChannelSize> channel_sizes() {
    return sizes;
}

const ChannelSize* find_channel_size(std::string_view region) {
    const auto found = std::find_if(sizes.begin(), sizes.end(), [&](const ChannelSize& size) { return size.region == region; });
    return found == sizes.end() ? nullptr : &*found;
}

}  // namespace rillclock
