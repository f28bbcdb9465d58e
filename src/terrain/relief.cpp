#include "rillclock/terrain/relief.hpp"

namespace rillclock {

SteepestPair steepest_pair(const Elevations& z, const Ground& ground, double metres_per_unit) {
    SteepestPair steepest;
    for (Cell cell = 0; cell < static_cast<Cell>(z.size()); ++cell) {
        const std::int64_t row = cell / z.columns();
        for_each_neighbour(z, cell, [&](Cell beside, Direction d) {
            const double slope = (z[cell] - z[beside]) * metres_per_unit / from_fixed(ground.length(row, d));
            if (slope > steepest.slope) steepest = {slope, cell};
        });
    }
    return steepest;
}

}  // namespace rillclock
