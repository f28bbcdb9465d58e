#pragma once

#include <algorithm>
#include <string_view>
#include <vector>

#include "rillclock/core/progress.hpp"
#include "rillclock/raster/blocks.hpp"

namespace rillclock {

/// Reads a raster of classes strip by strip and calls `look(cell, code)` for every cell, in the order of cells.
template <class Look>
void for_each_class(BlockSource<std::int32_t>& source, const Progress& progress, std::string_view stage, Look look) {
    constexpr std::int64_t strip_rows = 512;
    const Grid& grid = source.grid();
    std::vector<std::int32_t> codes;
    for (std::int64_t row = 0; row < grid.rows; row += strip_rows) {
        progress.tell({.stage = stage, .done = row * grid.columns, .total = grid.size()});
        const Window window{.row = row, .rows = std::min(strip_rows, grid.rows - row), .columns = grid.columns};
        codes.resize(static_cast<std::size_t>(window.size()));
        source.read(window, codes);
        const auto first = static_cast<Cell>(row * grid.columns);
        for (std::size_t i = 0; i < codes.size(); ++i) look(first + static_cast<Cell>(i), codes[i]);
    }
    progress.tell({.stage = stage, .done = grid.size(), .total = grid.size(), .finished = true});
}

}  // namespace rillclock
