#include "rillclock/forest/tile_flow.hpp"

#include <algorithm>
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
    find_passed();
}

bool TileFlow::holds(Cell cell) const { return is_inside(window_, {cell / raster_columns_, cell % raster_columns_}); }

void TileFlow::read_steps(const Raster<FlowCode>& codes) {
    std::array<Local, 8> offset{};   // modulo 2³²
    for (const Direction d : all_directions) {
        offset[static_cast<std::size_t>(d)] = static_cast<Local>(row_step(d) * window_.columns + column_step(d));
    }
    const auto columns = static_cast<Local>(window_.columns);
    const Local count = size();
    for (std::int64_t r = 0; r < window_.rows; ++r) {
        const FlowCode* row = codes.row(window_.row + r).data() + window_.column;
        const Local first = static_cast<Local>(r) * columns;
        std::copy_n(row, columns, code_.begin() + first);
        if (r == 0 || r + 1 == window_.rows || columns < 3) {
            for (Local local = first; local < first + columns; ++local) read_rim_step(local);
            continue;
        }
        read_rim_step(first);
        for (Local local = first + 1; local + 1 < first + columns; ++local) {   // without a step that the processor must guess, as in find_order
            const FlowCode code = code_[local];
            const bool flows = is_direction(code);
            const Local to = local + offset[code % offset.size()];
            down_[local] = flows ? to : ends_here;
            ++waiting_[flows ? to : count];
            if (code == flow_void) waiting_[local] = never;
        }
        read_rim_step(first + columns - 1);
    }
}

/// The step of a cell at the rim of the tile, whose water may leave it.
void TileFlow::read_rim_step(Local local) {
    const FlowCode code = code_[local];
    if (!is_direction(code)) {
        down_[local] = ends_here;
        if (code == flow_void) waiting_[local] = never;
        return;
    }
    const RowColumn to = neighbour({row(local), window_.column + local % window_.columns}, static_cast<Direction>(code));
    if (is_inside(window_, to)) {
        down_[local] = static_cast<Local>((to.row - window_.row) * window_.columns + to.column - window_.column);
        ++waiting_[down_[local]];
    } else {
        down_[local] = leaves_tile;
        exits_.push_back(local);
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

/// Follows the way of each entry down to where an earlier one passed.
void TileFlow::find_passed() {
    is_passed_.assign(size(), 0);
    passed_.clear();
    for (const TileEntry& entry : entries_) {
        const auto first = static_cast<std::ptrdiff_t>(passed_.size());
        for (Local at = entry.to; at < ends_here && is_passed_[at] == 0; at = down_[at]) {
            is_passed_[at] = 1;
            passed_.push_back(at);
        }
        std::reverse(passed_.begin() + first, passed_.end());
    }
}

}  // namespace rillclock
