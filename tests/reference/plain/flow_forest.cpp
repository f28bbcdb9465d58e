#include "reference/plain/flow_forest.hpp"

#include <string>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

std::string place_of(Cell cell, std::int64_t columns) {
    return "row " + std::to_string(cell / columns) + ", column " + std::to_string(cell % columns);
}

}  // namespace

FlowForest::FlowForest(Raster<FlowCode> codes) : codes_(std::move(codes)) {
    Raster<std::uint8_t> waiting = count_upstream();
    const auto size = static_cast<Cell>(codes_.size());
    std::size_t cells = 0;
    for (Cell cell = 0; cell < size; ++cell) {
        if (is_void(cell)) continue;
        ++cells;
        if (waiting[cell] == 0) order_.push_back(cell);
    }
    order_.reserve(cells);
    // The list grows while it is read: a cell is ready when the last of its tributaries has been read.
    for (std::size_t next = 0; next < order_.size(); ++next) {
        const Cell down = downstream(order_[next]);
        if (down != no_cell && --waiting[down] == 0) order_.push_back(down);
    }
    if (order_.size() != cells) throw bug("the flow directions hold a cycle");
}

Raster<std::uint8_t> FlowForest::count_upstream() const {
    Raster<std::uint8_t> count(rows(), columns());
    const auto size = static_cast<Cell>(codes_.size());
    for (Cell cell = 0; cell < size; ++cell) {
        if (!is_direction(codes_[cell])) continue;
        const RowColumn to = neighbour({row(cell), cell % columns()}, direction(cell));
        const bool inside = to.row >= 0 && to.row < rows() && to.column >= 0 && to.column < columns();
        if (!inside || is_void(downstream(cell))) {
            throw bug("the cell at " + place_of(cell, columns()) + " drains out of the data");
        }
        ++count[downstream(cell)];
    }
    return count;
}

}  // namespace rillclock
