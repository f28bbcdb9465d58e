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
    waiting_.assign(size + 1, 0);
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
    // A list that is read while it grows. No step of it hangs on a guess of the processor: a cell is always written behind the end, and
    // the end moves on if the cell belongs there. Hence one place more than there are cells, and a last one for what leaves or ends.
    const Local count = size();
    order_.resize(count + std::size_t{1});
    Local* const first = order_.data();
    Local* end = first;
    for (Local cell = 0; cell < count; ++cell) {
        *end = cell;
        end += waiting_[cell] == 0 ? 1 : 0;
    }
    for (const Local* at = first; at != end; ++at) {
        const Local next = down_[*at];
        const bool stays = next < ends_here;
        std::uint8_t& waiting = waiting_[stays ? next : count];
        *end = next;
        end += stays & (--waiting == 0) ? 1 : 0;
    }
    order_.resize(static_cast<std::size_t>(end - first));
}

}  // namespace rillclock
