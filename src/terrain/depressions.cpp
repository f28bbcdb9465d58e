#include "rillclock/terrain/depressions.hpp"

#include <algorithm>
#include <tuple>

namespace rillclock {
namespace {

bool lies_deeper(const Depression& a, const Depression& b) {
    return std::tie(b.depth, a.deepest) < std::tie(a.depth, b.deepest);
}

RowColumn place_of(const DepressionGround& in, Cell cell) { return {cell / in.codes.columns(), cell % in.codes.columns()}; }

/// Puts the cells beside one that belong to a depression that spills at `level`, and were not seen, behind the others.
void push_beside(const DepressionGround& in, Cell cell, double level, std::vector<bool>& seen, std::vector<Cell>& queue) {
    const Raster<FlowCode>& codes = in.codes;
    const RowColumn from = place_of(in, cell);
    for (const Direction d : all_directions) {
        const RowColumn at = neighbour(from, d);
        if (at.row < 0 || at.row >= codes.rows() || at.column < 0 || at.column >= codes.columns()) continue;
        const auto beside = static_cast<Cell>(at.row * codes.columns() + at.column);
        if (seen[beside] || !in.spill.is_below(at)) continue;
        const double its = in.spill.at(at);
        if (its < level || its > level) continue;
        seen[beside] = true;
        queue.push_back(beside);
    }
}

class Search {
public:
    Search(const DepressionGround& in, const std::vector<Cell>& paths, std::size_t most)
        : in_(in), most_(most), seen_(static_cast<std::size_t>(in.codes.size())), on_path_(seen_.size()) {
        for (const Cell cell : paths) on_path_[cell] = true;
    }

    Depressions find() {
        for (std::int64_t row = 0; row < in_.codes.rows(); ++row) {
            in_.spill.for_each_below(row, [this](Cell cell) {
                if (seen_[cell]) return;
                found_.push_back(depression_around(cell));
                ++count_;
                if (found_.size() >= 2 * most_ + 1000) keep_deepest();
            });
        }
        keep_deepest();
        std::sort(found_.begin(), found_.end(), lies_deeper);
        const std::size_t left_out = count_ - found_.size();
        return {.deepest_first = std::move(found_), .left_out = left_out};
    }

private:
    Depression depression_around(Cell first) {
        const double level = in_.spill[first];
        Depression depression;
        queue_.assign(1, first);
        seen_[first] = true;
        for (std::size_t next = 0; next < queue_.size(); ++next) {
            add(queue_[next], level, depression);
            push_beside(in_, queue_[next], level, seen_, queue_);
        }
        depression.pass = pass_of(depression.deepest, level);
        return depression;
    }

    void add(Cell cell, double level, Depression& depression) const {
        const double depth = level - in_.elevations[cell];
        const FixedArea area = in_.ground.cell_area(cell / in_.codes.columns());
        const bool deeper = depth > depression.depth || (depth >= depression.depth && cell < depression.deepest);
        if (deeper) depression.deepest = cell;
        depression.depth = std::max(depression.depth, depth);
        depression.volume += depth * from_fixed_area(area);
        depression.area += area;
        ++depression.cells;
        depression.on_path = depression.on_path || on_path_[cell];
    }

    [[nodiscard]] Cell pass_of(Cell cell, double level) const {
        while (in_.spill.is_below(place_of(in_, cell)) && !(in_.spill[cell] < level)) {
            const auto d = static_cast<Direction>(in_.codes[cell]);
            cell = neighbour(cell, d, in_.codes.columns());
        }
        return cell;
    }

    void keep_deepest() {
        if (found_.size() <= most_) return;
        std::nth_element(found_.begin(), found_.begin() + static_cast<std::ptrdiff_t>(most_), found_.end(), lies_deeper);
        found_.resize(most_);
    }

    const DepressionGround& in_;
    std::size_t most_;
    std::vector<bool> seen_;
    std::vector<bool> on_path_;
    std::vector<Cell> queue_;
    std::vector<Depression> found_;
    std::size_t count_ = 0;
};

}  // namespace

DepressionCells::DepressionCells(const DepressionGround& ground)
    : ground_(ground), seen_(static_cast<std::size_t>(ground.codes.size())) {}

std::vector<Cell> DepressionCells::of(const Depression& depression) {
    std::vector<Cell> cells{depression.deepest};
    seen_[depression.deepest] = true;
    const double level = ground_.spill[depression.deepest];
    for (std::size_t next = 0; next < cells.size(); ++next) push_beside(ground_, cells[next], level, seen_, cells);
    for (const Cell cell : cells) seen_[cell] = false;
    return cells;
}

Depressions find_depressions(const DepressionGround& ground, const std::vector<Cell>& paths, std::size_t most) {
    return Search(ground, paths, most).find();
}

}  // namespace rillclock
