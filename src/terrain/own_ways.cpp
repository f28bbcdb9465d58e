#include "rillclock/terrain/own_ways.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <tuple>
#include <unordered_map>
#include <utility>

namespace rillclock {
namespace {

/// A stretch of a line between places where lines begin, meet and end.
struct Reach {
    Cell start = no_cell;
    Cell end = no_cell;
};

/// All reaches by increasing start.
std::vector<Reach> reaches_of(const FlowLines& lines) {
    const std::vector<Cell> cells = lines.cells();
    std::unordered_map<Cell, int> leading_in;
    for (const Cell cell : cells) ++leading_in[lines.next(cell)];
    std::vector<Reach> reaches;
    for (const Cell start : cells) {
        if (lines.next(start) == no_cell || leading_in[start] == 1) continue;
        Cell end = lines.next(start);
        while (lines.contains(end) && lines.next(end) != no_cell && leading_in[end] == 1) end = lines.next(end);
        reaches.push_back({start, end});
    }
    return reaches;
}

/// The way down from a cell to its root, both included.
std::vector<Cell> way_down(const Raster<FlowCode>& codes, Cell cell) {
    std::vector<Cell> way{cell};
    while (is_direction(codes[cell])) {
        cell = neighbour(cell, static_cast<Direction>(codes[cell]), codes.columns());
        way.push_back(cell);
    }
    return way;
}

/// Cuts both ways at the first cell of `own` that lies on `led` at `end` or beyond it. Returns whether there is one.
bool cut_where_back(std::vector<Cell>& own, std::vector<Cell>& led, Cell end) {
    const auto end_of_reach = std::find(led.begin(), led.end(), end);
    std::unordered_map<Cell, std::size_t> place_beyond;
    for (auto at = end_of_reach; at != led.end(); ++at) place_beyond.emplace(*at, static_cast<std::size_t>(at - led.begin()));
    const auto back = std::find_if(own.begin(), own.end(), [&](Cell cell) { return place_beyond.contains(cell); });
    if (back == own.end()) return false;
    led.resize(place_beyond.at(*back) + 1);
    own.erase(back + 1, own.end());
    return true;
}

/// The cell of one way that is farthest from another.
class Farthest {
public:
    Farthest(const std::vector<Cell>& way, const std::vector<Cell>& other, const BothFlows& flows)
        : way_(way), other_(other), flows_(flows), run_(way.size()) {
        for (std::size_t i = 1; i < way.size(); ++i) run_[i] = run_[i - 1] + distance(way[i - 1], way[i]);
    }

    /// Looks into stretches of the way: no cell of one is farther off than its middle by more than the way to it.
    std::pair<double, Cell> find() {
        std::vector<std::pair<std::size_t, std::size_t>> stretches{{0, way_.size()}};
        while (!stretches.empty()) {
            const auto [begin, end] = stretches.back();
            stretches.pop_back();
            if (begin == end) continue;
            const std::size_t middle = begin + (end - begin) / 2;
            const double off = distance_from_other(way_[middle]);
            if (off > greatest_ || (off >= greatest_ && way_[middle] < cell_)) std::tie(greatest_, cell_) = std::pair(off, way_[middle]);
            const double slack = std::max(run_[middle] - run_[begin], run_[end - 1] - run_[middle]);
            // A little more, since lengths of neighbouring rows differ on a geographic grid.
            if (off + 1.01 * slack < greatest_) continue;
            stretches.emplace_back(begin, middle);
            stretches.emplace_back(middle + 1, end);
        }
        return {greatest_, cell_};
    }

private:
    [[nodiscard]] double distance(Cell a, Cell b) const {
        const std::int64_t columns = flows_.led.columns();
        const auto rows_apart = static_cast<double>(a / columns - b / columns);
        const auto columns_apart = static_cast<double>(a % columns - b % columns);
        const std::int64_t row = a / columns;
        const double across = from_fixed(flows_.ground.length(row, Direction::east));
        const double down = from_fixed(flows_.ground.length(row, Direction::south));
        return std::hypot(rows_apart * down, columns_apart * across);
    }
    [[nodiscard]] double distance_from_other(Cell cell) const {
        double least = std::numeric_limits<double>::infinity();
        for (const Cell beside : other_) least = std::min(least, distance(cell, beside));
        return least;
    }

    const std::vector<Cell>& way_;
    const std::vector<Cell>& other_;
    const BothFlows& flows_;
    std::vector<double> run_;   ///< metres from the beginning of the way
    double greatest_ = -1.0;
    Cell cell_ = no_cell;
};

}  // namespace

std::vector<OwnWay> own_ways(const FlowLines& lines, const BothFlows& flows, Length than) {
    std::vector<OwnWay> ways;
    for (const Reach& reach : reaches_of(lines)) {
        std::vector<Cell> led = way_down(flows.led, reach.start);
        OwnWay way{.start = reach.start, .cells = way_down(flows.own, reach.start), .departure = metres(0)};
        way.comes_back = cut_where_back(way.cells, led, reach.end);
        const auto [off, cell] = Farthest(way.cells, led, flows).find();
        way.departure = metres(off);
        way.farthest = cell;
        if (way.departure > than) ways.push_back(std::move(way));
    }
    std::sort(ways.begin(), ways.end(), [](const OwnWay& a, const OwnWay& b) {
        return std::tuple(in_metres(b.departure), a.start) < std::tuple(in_metres(a.departure), b.start);
    });
    return ways;
}

}  // namespace rillclock
