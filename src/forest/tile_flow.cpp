#include "rillclock/forest/tile_flow.hpp"

#include <algorithm>
#include <array>

namespace rillclock {
namespace {

constexpr std::uint8_t never = UINT8_MAX;   ///< of `waiting_`: a void, or a cell that is in the order

}  // namespace

void TilePassage::read(const Raster<FlowCode>& codes, const Window& window) {
    frame_ = TileFrame(window, codes.columns());
    exits_.clear();
    entries_.clear();
    cells_.clear();
    read_exits(codes);
    read_entries(codes);
    is_passed_.assign(frame_.size(), 0);
    for (const TileEntry& entry : entries_) follow(codes, entry);
}

/// Looks at the cells at the tile's rim for those that drain out of it.
void TilePassage::read_exits(const Raster<FlowCode>& codes) {
    const Window& window = frame_.window();
    const auto look = [&](RowColumn at) {
        RowColumn to = at;
        if (step_down(codes, to) == leaves_tile) exits_.push_back(frame_.local(at));
    };
    const std::int64_t right = window.column + window.columns - 1;
    for (std::int64_t row = window.row; row < window.row + window.rows; ++row) {
        const bool is_whole = row == window.row || row + 1 == window.row + window.rows || window.columns == 1;
        for (std::int64_t column = window.column; column <= right; column += is_whole ? 1 : right - window.column) look({row, column});
    }
}

/// Looks at the ring of cells around the tile for those that drain into it.
void TilePassage::read_entries(const Raster<FlowCode>& codes) {
    const auto look = [&](RowColumn at) {
        if (at.row < 0 || at.row >= codes.rows() || at.column < 0 || at.column >= codes.columns()) return;
        const FlowCode code = codes(at.row, at.column);
        if (!is_direction(code)) return;
        const RowColumn to = neighbour(at, static_cast<Direction>(code));
        if (!frame_.holds(to)) return;
        entries_.push_back({static_cast<Cell>(at.row * codes.columns() + at.column), frame_.local(to)});
    };
    const Window& window = frame_.window();
    const std::int64_t bottom = window.row + window.rows;
    const std::int64_t right = window.column + window.columns;
    for (std::int64_t column = window.column - 1; column <= right; ++column) {
        look({window.row - 1, column});
        look({bottom, column});
    }
    for (std::int64_t row = window.row; row < bottom; ++row) {
        look({row, window.column - 1});
        look({row, right});
    }
}

/// Moves `at` to where a cell of the tile drains to; says which of its cells that is, as TileFlow::down.
Local TilePassage::step_down(const Raster<FlowCode>& codes, RowColumn& at) const {
    const FlowCode code = codes(at.row, at.column);
    if (!is_direction(code)) return ends_here;
    at = neighbour(at, static_cast<Direction>(code));
    return frame_.holds(at) ? frame_.local(at) : leaves_tile;
}

/// Follows the way of an entry down to where an earlier one passed.
void TilePassage::follow(const Raster<FlowCode>& codes, const TileEntry& entry) {
    const auto first = static_cast<std::ptrdiff_t>(cells_.size());
    RowColumn at = frame_.row_column(frame_.cell(entry.to));
    for (Local local = entry.to; local < ends_here && is_passed_[local] == 0;) {
        is_passed_[local] = 1;
        const Local below = step_down(codes, at);
        cells_.push_back({local, below});
        local = below;
    }
    std::reverse(cells_.begin() + first, cells_.end());
}

void TileFlow::read(const Raster<FlowCode>& codes, const Window& window) {
    passage_.read(codes, window);
    read_codes(codes);
    read_steps();
    count_tributaries();
    find_order();
}

void TileFlow::read_codes(const Raster<FlowCode>& codes) {
    code_.resize(frame().size());
    const Window& window = frame().window();
    for (std::int64_t r = 0; r < window.rows; ++r) {
        std::copy_n(codes.row(window.row + r).data() + window.column, window.columns, code_.begin() + r * window.columns);
    }
}

void TileFlow::read_steps() {
    const Window& window = frame().window();
    std::array<Local, 256> offset{};   // modulo 2³²
    std::array<Local, 256> keep{};     // all bits for directions
    offset.fill(ends_here);
    for (const Direction d : all_directions) {
        offset[flow_code(d)] = static_cast<Local>(row_step(d) * window.columns + column_step(d));
        keep[flow_code(d)] = ~Local{0};
    }
    const Local count = frame().size();
    down_.resize(count);
    for (Local local = 0; local < count; ++local) down_[local] = (local & keep[code_[local]]) + offset[code_[local]];

    for (const Local exit : exits()) down_[exit] = leaves_tile;
}

/// Counts for each cell the neighbours that drain to it: row by row and direction by direction, where counting by steps would wait for each.
void TileFlow::count_tributaries() {
    const Window& window = frame().window();
    waiting_.assign(std::size_t{size()} + 1, 0);
    for (std::int64_t r = 0; r < window.rows; ++r) {
        std::uint8_t* const waiting = waiting_.data() + r * window.columns;
        for (const Direction d : all_directions) {
            if (const std::int64_t from = r - row_step(d); from < 0 || from >= window.rows) continue;
            const FlowCode* const tributary = code_.data() + (r - row_step(d)) * window.columns - column_step(d);
            const std::int64_t first = std::max(column_step(d), 0);
            const std::int64_t end = window.columns + std::min(column_step(d), 0);
            const FlowCode code = flow_code(d);
            for (std::int64_t c = first; c < end; ++c) waiting[c] = static_cast<std::uint8_t>(waiting[c] + (tributary[c] == code ? 1 : 0));
        }
        const FlowCode* const own = code_.data() + r * window.columns;
        for (std::int64_t c = 0; c < window.columns; ++c) waiting[c] = own[c] == flow_void ? never : waiting[c];
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
