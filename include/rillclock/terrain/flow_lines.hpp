#pragma once

#include <span>
#include <unordered_map>
#include <vector>

#include "rillclock/raster/grid.hpp"

namespace rillclock {

/// The cells of mapped lines, each with the cell that its water is led to next: a forest of its own within the flow forest.
///
/// Lines are added in the order of their file, and one rule settles all that may happen between them: *a cell that has a next
/// one keeps it*. `A`, `B`: cells of two lines, A added first; arrows: what is next.
///
///     meeting           crossing at a cell        on one another         passing on
///     A→A→A→A           A→A→A→A                   A→A→A→A                A→A   B goes on from the last cell
///       ↑                   ↑↓                    (B adds nothing)         ↓   of A, so A's water does too
///       B               B→B→┘ B→B                                          B→B
///     B joins A         B joins A; what B has beyond begins anew beside A
///
/// - A link that would close a circle is not made: the line has an end there.
/// - Lines may cross on the diagonal between cells without meeting.
/// - Water that was led to a `stop` (kept water) stays there; a line that goes on beyond it begins anew.
class FlowLines {
public:
    /// Adds the way of a line downstream, each cell a neighbour of the one before. A way of one cell has no step and adds nothing.
    /// `is_stop(cell)`: whether water stays in the cell. Returns how many cells were given their next one by it: none where other lines
    /// and stops have them all. Cost: linear but for looking along a line at each place where another joins it.
    template <class IsStop>
    std::size_t add(std::span<const Cell> way, IsStop is_stop) {
        std::size_t led = 0;
        for (std::size_t i = 1; i < way.size(); ++i) {
            if (!is_stop(way[i - 1]) && link(way[i - 1], way[i], is_stop(way[i]))) ++led;
        }
        return led;
    }

    /// Whether a line passes the cell.
    [[nodiscard]] bool contains(Cell cell) const { return next_.contains(cell); }
    [[nodiscard]] std::size_t size() const { return next_.size(); }
    /// Where the water of a cell of a line is led; `no_cell` at its end.
    [[nodiscard]] Cell next(Cell cell) const { return next_.at(cell); }
    /// All cells of lines by increasing index.
    [[nodiscard]] std::vector<Cell> cells() const;
    /// For each cell of a line the last cell to which it leads, a stop where it leads to one.
    [[nodiscard]] std::unordered_map<Cell, Cell> ends() const;

private:
    bool link(Cell from, Cell to, bool to_stop);
    [[nodiscard]] bool leads_to(Cell from, Cell to) const;

    std::unordered_map<Cell, Cell> next_;
};

}  // namespace rillclock
