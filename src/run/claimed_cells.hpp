#pragma once

#include <cstdint>

#include "rillclock/raster/grid_shapes.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// How many cells polygons claimed.
struct ClaimedCells {
    std::int64_t all = 0;     ///< each as often as it was claimed
    std::int64_t twice = 0;   ///< claimed again, for another value
};

/// Writes `value_of(part)`, which is not 0, into every cell that is 0 and whose centre lies within the part's polygon: of two parts the first counts.
template <class Parts, class ValueOf>
ClaimedCells claim_cells(const Parts& parts, const Grid& grid, Raster<std::uint8_t>& cells, ValueOf value_of) {
    ClaimedCells claimed;
    for (const auto& part : parts) {
        const std::uint8_t value = value_of(part);
        for_each_run_within(part.polygon, grid, [&](Cell first, Cell end) {
            claimed.all += end - first;
            for (Cell cell = first; cell < end; ++cell) {
                if (cells[cell] == 0) cells[cell] = value;
                claimed.twice += cells[cell] == value ? 0 : 1;
            }
        });
    }
    return claimed;
}

}  // namespace rillclock
