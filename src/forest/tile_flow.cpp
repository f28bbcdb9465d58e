#include "rillclock/forest/tile_flow.hpp"

#include <array>

namespace rillclock {
namespace {

constexpr std::uint8_t never = UINT8_MAX;   ///< of `waiting_`: a void, or a cell that is in the order

bool is_inside(const Window& window, RowColumn at) {
    return at.row >= window.row && at.row < window.row + window.rows && at.column >= window.column &&
           at.column < window.column + window.columns;
}

}  // namespace

void TileFlow::read(const Raster<FlowCode>& codes, const Window& window) {
    window_ = window;
    raster_columns_ = codes.columns();
    const auto size = static_cast<std::size_t>(window.size());
    down_.resize(size);
    code_.resize(size);
    waiting_.assign(size, 0);
    exits_.clear();
    entries_.clear();
    read_steps(codes);
    read_entries(codes);
    find_order();
}

bool TileFlow::holds(Cell cell) const { return is_inside(window_, {cell / raster_columns_, cell % raster_columns_}); }

void TileFlow::read_steps(const Raster<FlowCode>& codes) {
    std::array<std::int64_t, 8> offset{};
    for (const Direction d : all_directions) offset[static_cast<std::size_t>(d)] = row_step(d) * window_.columns + column_step(d);
    Local local = 0;
    for (std::int64_t r = 0; r < window_.rows; ++r) {
        const FlowCode* row = codes.row(window_.row + r).data() + window_.column;
        for (std::int64_t c = 0; c < window_.columns; ++c, ++local) {
            const FlowCode code = row[c];
            code_[local] = code;
            if (!is_direction(code)) {
                down_[local] = ends_here;
                if (code == flow_void) waiting_[local] = never;
                continue;
            }
            const bool inner = r > 0 && c > 0 && r + 1 < window_.rows && c + 1 < window_.columns;
            const RowColumn at{window_.row + r, window_.column + c};
            if (inner || is_inside(window_, neighbour(at, static_cast<Direction>(code)))) {
                down_[local] = static_cast<Local>(local + offset[code]);
                ++waiting_[down_[local]];
            } else {
                down_[local] = leaves_tile;
                exits_.push_back(local);
            }
        }
    }
}

/// Looks at the ring of cells around the tile for those that drain into it.
void TileFlow::read_entries(const Raster<FlowCode>& codes) {
    const auto look = [&](RowColumn at) {
        if (at.row < 0 || at.row >= codes.rows() || at.column < 0 || at.column >= codes.columns()) return;
        const FlowCode code = codes(at.row, at.column);
        if (!is_direction(code)) return;
        const RowColumn to = neighbour(at, static_cast<Direction>(code));
        if (!is_inside(window_, to)) return;
        entries_.push_back({static_cast<Cell>(at.row * raster_columns_ + at.column),
                            static_cast<Local>((to.row - window_.row) * window_.columns + to.column - window_.column)});
    };
    const std::int64_t bottom = window_.row + window_.rows;
    const std::int64_t right = window_.column + window_.columns;
    for (std::int64_t column = window_.column - 1; column <= right; ++column) {
        look({window_.row - 1, column});
        look({bottom, column});
    }
    for (std::int64_t row = window_.row; row < bottom; ++row) {
        look({row, window_.column - 1});
        look({row, right});
    }
}

void TileFlow::find_order() {
    order_.resize(down_.size());
    Local* end = order_.data();
    for (Local start = 0; start < size(); ++start) {
        if (waiting_[start] != 0) continue;
        // Follow the water as long as it waits for no other tributary. Marking a cell keeps the outer loop from taking it again.
        Local at = start;
        for (;;) {
            *end++ = at;
            const Local next = down_[at];
            waiting_[at] = never;
            if (next >= ends_here || --waiting_[next] != 0) break;
            at = next;
        }
    }
    order_.resize(static_cast<std::size_t>(end - order_.data()));
}

}  // namespace rillclock
