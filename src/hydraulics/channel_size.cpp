#include "rillclock/hydraulics/channel_size.hpp"

#include <array>

namespace rillclock {
namespace {

constexpr PowerLaw law(double metres_at_one_square_kilometre, double exponent) {
    return {.coefficient = metres(metres_at_one_square_kilometre), .unit = square_kilometres(1), .exponent = exponent};
}

constexpr std::array sizes{
    ChannelSize{"United States", law(2.70, 0.352), law(0.30, 0.213)},
    ChannelSize{"Laurentian Upland", law(4.15, 0.308), law(0.31, 0.202)},
    ChannelSize{"Atlantic Plain", law(2.22, 0.363), law(0.24, 0.323)},
    ChannelSize{"Appalachian Highlands", law(3.12, 0.415), law(0.26, 0.287)},
    ChannelSize{"Interior Plains", law(2.56, 0.351), law(0.38, 0.191)},
    ChannelSize{"Interior Highlands", law(23.23, 0.121), law(0.27, 0.267)},
    ChannelSize{"Rocky Mountain System", law(1.24, 0.435), law(0.23, 0.225)},
    ChannelSize{"Intermontane Plateaus", law(1.11, 0.415), law(0.07, 0.329)},
    ChannelSize{"Pacific Mountain System", law(2.76, 0.399), law(0.23, 0.294)},
};

}  // namespace

std::span<const ChannelSize> channel_sizes() {
    return sizes;
}

}  // namespace rillclock
