#include "palette.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdint>

namespace rillclock {
namespace {

using Rgb = std::array<int, 3>;

/// Ten stations of viridis, evenly spaced.
constexpr std::array<Rgb, 10> stations = {{{68, 1, 84}, {72, 40, 120}, {62, 73, 137}, {49, 104, 142}, {38, 130, 142},
                                           {31, 158, 137}, {53, 183, 121}, {109, 205, 89}, {180, 222, 44}, {253, 231, 37}}};

std::string hexadecimal(const Rgb& colour) {
    constexpr std::string_view digits = "0123456789abcdef";
    std::string text = "#";
    for (const int part : colour) {
        text += digits[static_cast<std::size_t>(part / 16)];
        text += digits[static_cast<std::size_t>(part % 16)];
    }
    return text;
}

}  // namespace

std::string viridis(double share) {
    const double at = std::clamp(share, 0.0, 1.0) * (stations.size() - 1);
    const auto lower = std::min(static_cast<std::size_t>(at), stations.size() - 2);
    Rgb colour{};
    for (std::size_t i = 0; i < 3; ++i) {
        const double from = stations[lower][i];
        colour[i] = static_cast<int>(std::lround(from + (at - static_cast<double>(lower)) * (stations[lower + 1][i] - from)));
    }
    return hexadecimal(colour);
}

std::string colour_of(Regime regime) {
    switch (regime) {
        case Regime::none: return "#999999";
        case Regime::sheet: return "#e69f00";
        case Regime::shallow: return "#d55e00";
        case Regime::channel: return "#0072b2";
        case Regime::water: return "#56b4e9";
    }
    return "#999999";
}

}  // namespace rillclock
