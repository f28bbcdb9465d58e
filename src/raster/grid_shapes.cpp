#include "rillclock/raster/grid_shapes.hpp"

#include <algorithm>
#include <array>
#include <cstdlib>
#include <unordered_map>

namespace rillclock {
namespace {

/// A place in cells from the grid's north-western corner.
struct GridPlace {
    double column;
    double row;
};

GridPlace in_cells(const Place& place, const Grid& grid) {
    return {(place.x - grid.left) / grid.cell_width, (grid.top - place.y) / grid.cell_height};
}

GridPlace between(const GridPlace& a, const GridPlace& b, double share) {
    return {a.column + share * (b.column - a.column), a.row + share * (b.row - a.row)};
}

/// The part of a segment within one cell around the grid; none where it is empty. (Liang & Barsky 1984.)
class Clipping {
public:
    [[nodiscard]] bool keeps(double start, double change, double least, double greatest) {
        if (!(std::abs(change) > 0)) return start >= least && start <= greatest;
        const double at_least = (least - start) / change;
        const double at_greatest = (greatest - start) / change;
        from_ = std::max(from_, std::min(at_least, at_greatest));
        to_ = std::min(to_, std::max(at_least, at_greatest));
        return from_ <= to_;
    }
    [[nodiscard]] GridPlace first(const GridPlace& a, const GridPlace& b) const { return from_ > 0 ? between(a, b, from_) : a; }
    [[nodiscard]] GridPlace last(const GridPlace& a, const GridPlace& b) const { return to_ < 1 ? between(a, b, to_) : b; }

private:
    double from_ = 0.0;
    double to_ = 1.0;
};

/// A walk along one axis: how many steps are to be made, and at which share of the segment the next comes.
class AxisWalk {
public:
    AxisWalk(double from, double to) : at_(static_cast<std::int64_t>(std::floor(from))), from_(from), change_(to - from) {
        const auto last = static_cast<std::int64_t>(std::floor(to));
        step_ = last < at_ ? -1 : 1;
        left_ = std::abs(last - at_);
    }
    [[nodiscard]] std::int64_t at() const { return at_; }
    [[nodiscard]] bool is_done() const { return left_ == 0; }
    [[nodiscard]] double next_share() const {
        return (static_cast<double>(step_ > 0 ? at_ + 1 : at_) - from_) / change_;
    }
    void step() {
        at_ += step_;
        --left_;
    }

private:
    std::int64_t at_;
    std::int64_t step_ = 1;
    std::int64_t left_ = 0;
    double from_;
    double change_;
};

class Crossing {
public:
    explicit Crossing(const Grid& grid) : grid_(grid) {}

    std::vector<Way> ways_of(const Line& line) {
        if (line.size() == 1) pass(line.front(), line.front());
        for (std::size_t i = 1; i < line.size(); ++i) pass(line[i - 1], line[i]);
        leave();
        return std::move(ways_);
    }

private:
    void pass(const Place& from, const Place& to) {
        const GridPlace a = in_cells(from, grid_);
        const GridPlace b = in_cells(to, grid_);
        Clipping clipping;
        const bool near = clipping.keeps(a.column, b.column - a.column, -1, static_cast<double>(grid_.columns) + 1) &&
                          clipping.keeps(a.row, b.row - a.row, -1, static_cast<double>(grid_.rows) + 1);
        if (near) walk(clipping.first(a, b), clipping.last(a, b));
        else leave();
    }

    void walk(const GridPlace& from, const GridPlace& to) {
        AxisWalk column(from.column, to.column);
        AxisWalk row(from.row, to.row);
        touch({row.at(), column.at()});
        while (!row.is_done() || !column.is_done()) {
            const bool along = row.is_done() || (!column.is_done() && column.next_share() <= row.next_share());
            (along ? column : row).step();
            touch({row.at(), column.at()});
        }
    }

    void touch(RowColumn at) {
        if (!grid_.contains(at)) return leave();
        const Cell cell = grid_.cell(at);
        if (way_.empty() || way_.back() != cell) way_.push_back(cell);
    }

    void leave() {
        if (!way_.empty()) ways_.push_back(std::move(way_));
        way_.clear();
    }

    const Grid& grid_;
    Way way_;
    std::vector<Way> ways_;
};

bool are_neighbours(Cell a, Cell b, std::int64_t columns) {
    return std::abs(a / columns - b / columns) <= 1 && std::abs(a % columns - b % columns) <= 1;
}

Way without_loops(const Way& way) {
    Way kept;
    std::unordered_map<Cell, std::size_t> position;
    for (const Cell cell : way) {
        const auto before = position.find(cell);
        if (before == position.end()) {
            position.emplace(cell, kept.size());
            kept.push_back(cell);
            continue;
        }
        while (kept.back() != cell) {
            position.erase(kept.back());
            kept.pop_back();
        }
    }
    return kept;
}

/// Where the outline crosses the lines of cell centres, row by row.
class Scan {
public:
    Scan(const Polygon& polygon, const Grid& grid) : grid_(grid) {
        double least = static_cast<double>(grid.rows);
        double greatest = -1;
        for (const Line& ring : polygon.rings) {
            for (const Place& corner : ring) {
                least = std::min(least, in_cells(corner, grid).row);
                greatest = std::max(greatest, in_cells(corner, grid).row);
            }
        }
        first_ = bounded(std::floor(least), grid.rows);
        crossings_.resize(static_cast<std::size_t>(std::max<std::int64_t>(0, bounded(std::ceil(greatest) + 1, grid.rows) - first_)));
        for (const Line& ring : polygon.rings) add(ring);
    }

    void runs(const std::function<void(Cell, Cell)>& look) {
        for (std::size_t r = 0; r < crossings_.size(); ++r) {
            std::vector<double>& columns = crossings_[r];
            std::sort(columns.begin(), columns.end());
            for (std::size_t i = 1; i < columns.size(); i += 2) run(first_ + static_cast<std::int64_t>(r), columns[i - 1], columns[i], look);
        }
    }

private:
    static std::int64_t bounded(double value, std::int64_t count) {
        return static_cast<std::int64_t>(std::clamp(value, 0.0, static_cast<double>(count)));
    }
    /// The first index whose centre lies at or beyond a place.
    static double first_centre(double place) { return std::ceil(place - 0.5); }

    void add(const Line& ring) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const GridPlace a = in_cells(ring[i], grid_);
            const GridPlace b = in_cells(ring[(i + 1) % ring.size()], grid_);
            const std::int64_t end = bounded(first_centre(std::max(a.row, b.row)), grid_.rows);
            for (std::int64_t row = bounded(first_centre(std::min(a.row, b.row)), grid_.rows); row < end; ++row) {
                const double share = (static_cast<double>(row) + 0.5 - a.row) / (b.row - a.row);
                crossings_[static_cast<std::size_t>(row - first_)].push_back(between(a, b, share).column);
            }
        }
    }

    void run(std::int64_t row, double from, double to, const std::function<void(Cell, Cell)>& look) const {
        const std::int64_t first = bounded(first_centre(from), grid_.columns);
        const std::int64_t end = bounded(first_centre(to), grid_.columns);
        if (first < end) look(grid_.cell({row, first}), grid_.cell({row, end - 1}) + 1);
    }

    const Grid& grid_;
    std::int64_t first_ = 0;
    std::vector<std::vector<double>> crossings_;
};

}  // namespace

std::vector<Way> cells_crossed(const Line& line, const Grid& grid) { return Crossing(grid).ways_of(line); }

Way shortened(const Way& way, std::int64_t columns) {
    Way kept;
    for (const Cell cell : without_loops(way)) {
        if (kept.size() > 1 && are_neighbours(kept[kept.size() - 2], cell, columns)) kept.pop_back();
        kept.push_back(cell);
    }
    return kept;
}

void for_each_run_within(const Polygon& polygon, const Grid& grid, const std::function<void(Cell first, Cell end)>& look) {
    Scan(polygon, grid).runs(look);
}

std::vector<Cell> cells_within(const Polygon& polygon, const Grid& grid) {
    std::vector<Cell> cells;
    for_each_run_within(polygon, grid, [&](Cell first, Cell end) {
        for (Cell cell = first; cell < end; ++cell) cells.push_back(cell);
    });
    if (!cells.empty() || polygon.rings.empty() || polygon.rings.front().empty()) return cells;
    const auto corner = grid.at(polygon.rings.front().front());
    return corner ? std::vector<Cell>{grid.cell(*corner)} : cells;
}

}  // namespace rillclock
