#pragma once

#include <span>
#include <string_view>

#include "rillclock/core/progress.hpp"
#include "rillclock/raster/blocks.hpp"
#include "rillclock/tiles/read_ahead.hpp"

namespace rillclock {

/// Reads a raster of classes strip by strip and calls `look(cell, code)` for every cell, in the order of cells.
template <class Look>
void for_each_class(BlockSource<std::int32_t>& source, const Progress& progress, std::string_view stage, Look look) {
    constexpr std::int64_t strip_rows = 512;
    const Grid& grid = source.grid();
    read_ahead(source, strip_rows, [&](const Window& window, std::span<const std::int32_t> codes) {
        progress.tell({.stage = stage, .done = window.row * grid.columns, .total = grid.size()});
        const auto first = static_cast<Cell>(window.row * grid.columns);
        for (std::size_t i = 0; i < codes.size(); ++i) look(first + static_cast<Cell>(i), codes[i]);
    });
    progress.tell({.stage = stage, .done = grid.size(), .total = grid.size(), .finished = true});
}

}  // namespace rillclock
