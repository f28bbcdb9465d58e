#pragma once

#include <cstdint>
#include <string_view>

namespace rillclock {

/// How water moves through a cell. The numbers are those of `regime.tif`.
enum class Regime : std::uint8_t { none = 0, sheet = 1, shallow = 2, channel = 3, water = 4 };

/// Its name in one word, as tables and rasters have it.
[[nodiscard]] constexpr std::string_view name_of(Regime regime) {
    switch (regime) {
        case Regime::none: return "none";
        case Regime::sheet: return "sheet";
        case Regime::shallow: return "shallow";
        case Regime::channel: return "channel";
        case Regime::water: return "water";
    }
    return "none";
}

}  // namespace rillclock
