#pragma once

#include <algorithm>
#include <cmath>
#include <functional>
#include <queue>
#include <utility>
#include <vector>

#include "reference/plain/steepest_descent.hpp"

namespace rillclock::reference {

/// Spill elevations by the textbook flood from the border with a heap: slow, clear, and nothing of the library's method in it.
/// Source: Barnes, Lehman & Mulla 2014, algorithm 1.
inline Elevations heap_flood(const Elevations& z) {
    using Entry = std::pair<double, Cell>;
    std::priority_queue<Entry, std::vector<Entry>, std::greater<>> heap;
    Elevations spill = z;
    std::vector<bool> seen(static_cast<std::size_t>(z.size()));
    for (Cell cell = 0; cell < static_cast<Cell>(z.size()); ++cell) {
        if (std::isnan(z[cell]) || !is_border(z, {cell / z.columns(), cell % z.columns()})) continue;
        heap.emplace(z[cell], cell);
        seen[cell] = true;
    }
    while (!heap.empty()) {
        const Cell cell = heap.top().second;
        heap.pop();
        for_each_neighbour(z, cell, [&](Cell beside, Direction) {
            if (seen[beside] || std::isnan(z[beside])) return;
            seen[beside] = true;
            spill[beside] = std::max(z[beside], spill[cell]);
            heap.emplace(spill[beside], beside);
        });
    }
    return spill;
}

}  // namespace rillclock::reference
