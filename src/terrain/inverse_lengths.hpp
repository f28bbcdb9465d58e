#pragma once

#include <array>
#include <cstddef>
#include <cstdint>

#include "rillclock/raster/ground.hpp"

namespace rillclock {

/// One over the length of the step each way, by the number of the Direction, in 1/m. Falls are multiplied by it wherever they are compared,
/// so that the plain and the tiled directions judge by the same bits.
using InverseLengths = std::array<double, 8>;

[[nodiscard]] inline InverseLengths inverse_lengths(const Ground& ground, std::int64_t row) {
    InverseLengths inverse{};
    for (const Direction d : all_directions) {
        inverse[static_cast<std::size_t>(d)] = 1.0 / from_fixed(ground.length(row, d));
    }
    return inverse;
}

}  // namespace rillclock
