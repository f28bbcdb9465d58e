#pragma once

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// A flow forest: each cell of a grid names the one neighbour it drains to, or is a root, or void. Every cell reaches a root.
///
/// Promise: there is no cycle and no way into a void or off the grid; the constructor checks it, in time linear in the cells.
class FlowForest {
public:
    /// Takes one code a cell. Throws a bug error where a cell drains off the grid, into a void, or into a cycle.
    explicit FlowForest(Raster<FlowCode> codes);

    [[nodiscard]] std::int64_t rows() const { return codes_.rows(); }
    [[nodiscard]] std::int64_t columns() const { return codes_.columns(); }
    [[nodiscard]] const Raster<FlowCode>& codes() const { return codes_; }

    [[nodiscard]] bool is_void(Cell cell) const { return codes_[cell] == flow_void; }
    [[nodiscard]] bool is_root(Cell cell) const { return codes_[cell] == flow_root; }
    /// The way out of a cell that is neither void nor a root.
    [[nodiscard]] Direction direction(Cell cell) const { return static_cast<Direction>(codes_[cell]); }
    /// The cell that `cell` drains to; `no_cell` at roots and voids.
    [[nodiscard]] Cell downstream(Cell cell) const {
        return is_direction(codes_[cell]) ? step(cell, direction(cell)) : no_cell;
    }
    [[nodiscard]] std::int64_t row(Cell cell) const { return cell / codes_.columns(); }

    /// All cells but voids, each before the cell it drains to. The order depends on the codes alone.
    [[nodiscard]] std::span<const Cell> order() const { return order_; }

    /// Calls `visit(upstream_cell)` for every cell that drains into `cell`, by increasing index.
    template <class Visit>
    void for_each_upstream(Cell cell, Visit visit) const {
        constexpr Direction by_index[] = {Direction::north_west, Direction::north,      Direction::north_east,
                                          Direction::west,       Direction::east,       Direction::south_west,
                                          Direction::south,      Direction::south_east};
        const RowColumn at{row(cell), cell % columns()};
        for (const Direction d : by_index) {
            const RowColumn beside = neighbour(at, d);
            if (beside.row < 0 || beside.row >= rows() || beside.column < 0 || beside.column >= columns()) continue;
            const Cell up = step(cell, d);
            if (codes_[up] == flow_code(opposite(d))) visit(up);
        }
    }

private:
    [[nodiscard]] Cell step(Cell cell, Direction d) const {
        return neighbour(cell, d, columns());
    }
    [[nodiscard]] Raster<std::uint8_t> count_upstream() const;

    Raster<FlowCode> codes_;
    std::vector<Cell> order_;
};

}  // namespace rillclock
