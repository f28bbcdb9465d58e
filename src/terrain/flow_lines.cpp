#include "rillclock/terrain/flow_lines.hpp"

#include <algorithm>

namespace rillclock {

bool FlowLines::leads_to(Cell from, Cell to) const {
    for (auto at = next_.find(from); at != next_.end() && from != to; at = next_.find(from)) from = at->second;
    return from == to;
}

bool FlowLines::link(Cell from, Cell to, bool to_stop) {
    const auto known = next_.find(from);
    if (known != next_.end() && known->second != no_cell) return false;
    if (leads_to(to, from)) return false;
    next_[from] = to;
    if (!to_stop) next_.try_emplace(to, no_cell);
    return true;
}

std::vector<Cell> FlowLines::cells() const {
    std::vector<Cell> cells;
    cells.reserve(next_.size());
    for (const auto& [cell, next] : next_) cells.push_back(cell);
    std::sort(cells.begin(), cells.end());
    return cells;
}

std::unordered_map<Cell, Cell> FlowLines::ends() const {
    std::unordered_map<Cell, Cell> ends;
    std::vector<Cell> passed;
    for (const auto& [start, next] : next_) {
        Cell at = start;
        for (; !ends.contains(at) && contains(at) && this->next(at) != no_cell; at = this->next(at)) passed.push_back(at);
        const auto known = ends.find(at);
        const Cell end = known != ends.end() ? known->second : at;
        if (contains(at)) ends.emplace(at, end);
        for (const Cell cell : passed) ends.emplace(cell, end);
        passed.clear();
    }
    return ends;
}

}  // namespace rillclock
