#pragma once

#include <algorithm>
#include <array>
#include <future>
#include <span>
#include <vector>

#include "rillclock/raster/blocks.hpp"
#include "rillclock/raster/large_memory.hpp"

namespace rillclock {

/// Reads a raster in strips of whole rows, from the top down, and calls `use(window, values)` with each on the calling thread while
/// the next one is being read on another. What either throws is thrown on, once nothing is being read any more.
template <class T, class Use>
void read_ahead(BlockSource<T>& source, std::int64_t strip_rows, Use use) {
    const Grid& grid = source.grid();
    std::array<std::vector<T, LargeMemory<T>>, 2> strips;
    const auto window_at = [&](std::int64_t row) {
        return Window{.row = row, .rows = std::min(strip_rows, grid.rows - row), .columns = grid.columns};
    };
    const auto read = [&](std::int64_t row) {
        auto& strip = strips[static_cast<std::size_t>(row / strip_rows % 2)];
        strip.resize(static_cast<std::size_t>(window_at(row).size()));
        source.read(window_at(row), strip);
    };
    std::future<void> coming = std::async(std::launch::async, read, 0);
    for (std::int64_t row = 0; row < grid.rows; row += strip_rows) {
        coming.get();
        if (row + strip_rows < grid.rows) coming = std::async(std::launch::async, read, row + strip_rows);
        use(window_at(row), std::span<T>(strips[static_cast<std::size_t>(row / strip_rows % 2)]));
    }
}

}  // namespace rillclock
