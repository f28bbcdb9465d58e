#include "lead_on.hpp"

#include <algorithm>
#include <limits>
#include <queue>
#include <tuple>
#include <unordered_map>
#include <unordered_set>

#include "rillclock/raster/direction.hpp"

namespace rillclock {
namespace {

/// Where water is and where it goes, as one flood sees it.
class Surroundings {
public:
    Surroundings(const ElevationStore& levels, const FlowLines& mapped, Raster<FlowCode>& flow)
        : z(levels), lines(mapped), codes(flow), ends_(mapped.ends()) {}

    template <class Visit>
    void for_each_beside(Cell cell, Visit visit) const {
        for (const Direction d : all_directions) {
            const RowColumn beside = neighbour({cell / codes.columns(), cell % codes.columns()}, d);
            if (is_ground(beside)) visit(static_cast<Cell>(beside.row * codes.columns() + beside.column), d);
        }
    }

    [[nodiscard]] bool is_border(Cell cell) const {
        bool inside = true;
        for (const Direction d : all_directions) {
            const RowColumn beside = neighbour({cell / codes.columns(), cell % codes.columns()}, d);
            inside = inside && is_on_grid(beside) && codes(beside.row, beside.column) != flow_void;
        }
        return !inside;
    }

    [[nodiscard]] Cell end_of_line(Cell cell) const { return ends_.at(cell); }
    [[nodiscard]] Cell downstream(Cell cell) const {
        const auto d = static_cast<Direction>(codes[cell]);
        return neighbour(cell, d, codes.columns());
    }

    const ElevationStore& z;
    const FlowLines& lines;
    Raster<FlowCode>& codes;

private:
    [[nodiscard]] bool is_on_grid(RowColumn at) const {
        return at.row >= 0 && at.row < codes.rows() && at.column >= 0 && at.column < codes.columns();
    }
    [[nodiscard]] bool is_ground(RowColumn at) const {
        if (!is_on_grid(at)) return false;
        const double level = z[static_cast<Cell>(at.row * codes.columns() + at.column)];
        return level < wall_level;  // a void is NaN, and no comparison with it holds
    }

    std::unordered_map<Cell, Cell> ends_;
};

/// The flood from the end of one line.
class Flood {
public:
    Flood(const Surroundings& around, std::unordered_set<Cell>& settled) : around_(around), settled_(settled) {}

    /// Whether a way on was found; it is then in the codes, and every end on it is settled.
    bool lead_on_from(Cell end) {
        join(end, swallowed);
        while (!queue_.empty()) {
            const Reached at = queue_.top();
            queue_.pop();
            const Cell ends_at = end_of_way(at.cell);
            if (ends_at == no_cell || settled_.contains(ends_at)) return take_way(end, at.cell), true;
            go_on(at, ends_at);
        }
        return false;
    }

private:
    static constexpr double swallowed = -std::numeric_limits<double>::infinity();

    struct Reached {
        double level;
        double ground;
        Cell cell;
        bool operator<(const Reached& other) const {
            return std::tie(other.level, other.ground, other.cell) < std::tie(level, ground, cell);
        }
    };
    struct Before {
        Cell cell;
        bool by_line;   ///< not by a step, but down the way of a line to its end
    };

    /// A line's water comes out at its end.
    void join(Cell end, double level) {
        joined_.insert(end);
        spread(end, level);
    }

    void spread(Cell from, double level) {
        around_.for_each_beside(from, [&](Cell beside, Direction) {
            if (around_.lines.contains(beside) && joined_.contains(around_.end_of_line(beside))) return;
            if (!before_.try_emplace(beside, Before{from, false}).second) return;
            const double ground = around_.z[beside];
            queue_.push({std::max(level, ground), ground, beside});
        });
    }

    void go_on(const Reached& at, Cell ends_at) {
        const bool on_line = around_.lines.contains(at.cell);
        if (!joined_.contains(ends_at)) {
            if (ends_at != at.cell) before_.insert_or_assign(ends_at, Before{at.cell, true});
            join(ends_at, at.level);
        }
        if (!on_line) spread(at.cell, at.level);
    }

    /// The end of the line that a cell's water comes to; `no_cell` where it comes to a root that is none.
    Cell end_of_way(Cell cell) {
        std::vector<Cell> passed;
        Cell end = no_cell;
        for (;; cell = around_.downstream(cell)) {
            const auto known = end_of_way_.find(cell);
            if (known != end_of_way_.end()) {
                end = known->second;
                break;
            }
            passed.push_back(cell);
            if (around_.lines.contains(cell)) {
                end = around_.end_of_line(cell);
                break;
            }
            if (!is_direction(around_.codes[cell])) break;
        }
        for (const Cell at : passed) end_of_way_.emplace(at, end);
        return end;
    }

    void take_way(Cell first, Cell cell) {
        while (cell != first) {
            const Before before = before_.at(cell);
            if (!before.by_line) {
                step(before.cell, cell);
                if (around_.lines.contains(before.cell)) settled_.insert(before.cell);
            }
            cell = before.cell;
        }
    }

    void step(Cell from, Cell to) {
        around_.for_each_beside(from, [&](Cell beside, Direction d) {
            if (beside == to) around_.codes[from] = flow_code(d);
        });
    }

    const Surroundings& around_;
    std::unordered_set<Cell>& settled_;
    std::priority_queue<Reached> queue_;
    std::unordered_map<Cell, Before> before_;
    std::unordered_set<Cell> joined_;            ///< ends whose lines the flood has met
    std::unordered_map<Cell, Cell> end_of_way_;
};

}  // namespace

std::vector<Cell> lead_on(const ElevationStore& elevations, const FlowLines& lines, Raster<FlowCode>& codes) {
    const Surroundings around(elevations, lines, codes);
    std::vector<Cell> open;
    std::unordered_set<Cell> settled;
    for (const auto& [cell, end] : lines.ends()) {
        if (!lines.contains(end) || around.is_border(end)) settled.insert(end);
        else if (cell == end) open.push_back(end);
    }
    std::sort(open.begin(), open.end());
    std::vector<Cell> stays;
    for (const Cell end : open) {
        if (settled.contains(end) || Flood(around, settled).lead_on_from(end)) continue;
        settled.insert(end);
        stays.push_back(end);
    }
    return stays;
}

}  // namespace rillclock
