#include "rillclock/terrain/terrain_edits.hpp"

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <iterator>
#include <unordered_map>
#include <utility>

#include "lead_on.hpp"
#include "rillclock/terrain/descent.hpp"

namespace rillclock {
namespace {

bool holds(const std::vector<Cell>& cells, Cell cell) { return std::binary_search(cells.begin(), cells.end(), cell); }

/// The cells that shapes of one kind claim: of several shapes the first has a cell.
class Claims {
public:
    /// The next shape's cells, as far as no shape of another kind has them.
    void add(const std::vector<Cell>& cells) {
        for (const Cell cell : cells) claims_.emplace_back(cell, shapes_);
        ++shapes_;
    }

    /// All cells, increasing. Counts shapes that have at least one as used, the others as covered.
    [[nodiscard]] std::vector<Cell> settle(EditCount& count) {
        std::sort(claims_.begin(), claims_.end());
        const auto same_cell = [](const auto& a, const auto& b) { return a.first == b.first; };
        claims_.erase(std::unique(claims_.begin(), claims_.end(), same_cell), claims_.end());
        std::vector<bool> has_one(shapes_, false);
        std::vector<Cell> cells;
        cells.reserve(claims_.size());
        for (const auto& [cell, shape] : claims_) {
            has_one[shape] = true;
            cells.push_back(cell);
        }
        const auto used = static_cast<std::size_t>(std::count(has_one.begin(), has_one.end(), true));
        count.used += used;
        count.covered += shapes_ - used;
        count.cells = cells.size();
        claims_ = {};
        return cells;
    }

private:
    std::vector<std::pair<Cell, std::uint32_t>> claims_;   ///< cell and shape
    std::uint32_t shapes_ = 0;
};

class Placing {
public:
    Placing(const Grid& grid, const ElevationStore& elevations, double turn_from)
        : grid_(grid), z_(elevations), turn_from_(turn_from) {}

    TerrainEdits place(const EditShapes& shapes) {
        for (const Place& place : shapes.kept_places) keep(cells_at(place));
        for (const Polygon& area : shapes.kept_areas) keep(cells_within(area, grid_));
        edits_.kept = kept_.settle(edits_.kept_waters);
        for (const Line& line : shapes.channels) lead(line, turn_from_, edits_.channels);
        for (const Line& line : shapes.crossings) lead(line, 0.0, edits_.crossings);
        for (const Line& line : shapes.barriers) wall(line);
        edits_.barrier = walls_.settle(edits_.barriers);
        return std::move(edits_);
    }

private:
    [[nodiscard]] std::vector<Cell> cells_at(const Place& place) const {
        const auto at = grid_.at(place);
        return at ? std::vector<Cell>{grid_.cell(*at)} : std::vector<Cell>();
    }

    void keep(std::vector<Cell> cells) {
        std::erase_if(cells, [&](Cell cell) { return std::isnan(z_[cell]); });
        if (cells.empty()) ++edits_.kept_waters.unused;
        else kept_.add(cells);
    }

    /// The ways of a line between the voids that it crosses.
    [[nodiscard]] std::vector<Way> ways_on_data(const Line& line) const {
        std::vector<Way> ways(1);
        for (const Way& whole : cells_crossed(line, grid_)) {
            for (const Cell cell : whole) {
                if (!std::isnan(z_[cell])) ways.back().push_back(cell);
                else ways.emplace_back();
            }
            ways.emplace_back();
        }
        std::erase_if(ways, [](const Way& way) { return way.empty(); });
        return ways;
    }

    void lead(const Line& line, double turn_from, EditCount& total) {
        std::vector<Way> ways = ways_on_data(line);
        const bool turn = !ways.empty() && z_[ways.back().back()] - z_[ways.front().front()] > turn_from;
        if (turn) std::reverse(ways.begin(), ways.end());
        const std::size_t before = edits_.lines.size();
        bool has_steps = false;
        std::size_t led = 0;
        for (Way& way : ways) {
            if (turn) std::reverse(way.begin(), way.end());
            const Way followed = shortened(way, grid_.columns);
            has_steps = has_steps || followed.size() > 1;
            led += edits_.lines.add(followed, [&](Cell cell) { return holds(edits_.kept, cell); });
        }
        ++(!has_steps ? total.unused : led == 0 ? total.covered : total.used);
        if (led > 0 && turn) ++total.turned;
        total.cells += edits_.lines.size() - before;
    }

    void wall(const Line& line) {
        std::vector<Cell> cells;
        const std::vector<Way> ways = ways_on_data(line);
        for (const Way& way : ways) {
            std::copy_if(way.begin(), way.end(), std::back_inserter(cells),
                         [&](Cell cell) { return !holds(edits_.kept, cell) && !edits_.lines.contains(cell); });
        }
        if (ways.empty()) ++edits_.barriers.unused;
        else walls_.add(cells);
    }

    const Grid& grid_;
    const ElevationStore& z_;
    double turn_from_;
    Claims kept_;
    Claims walls_;
    TerrainEdits edits_;
};

/// Elevations as the builder of flow codes is to see them, for as long as this lives.
class RoutingLevels {
public:
    RoutingLevels(ElevationStore& elevations, const TerrainEdits& edits) : z_(elevations) {
        for (const Cell cell : edits.lines.cells()) set(cell, swallowing_level);
        for (const Cell cell : edits.kept) set(cell, swallowing_level);
        for (const Cell cell : edits.barrier) set(cell, wall_level);
    }
    RoutingLevels(const RoutingLevels&) = delete;
    RoutingLevels& operator=(const RoutingLevels&) = delete;
    ~RoutingLevels() {
        for (const auto& [cell, ground] : ground_) z_.put(cell, ground);
    }

private:
    void set(Cell cell, double level) {
        ground_.emplace_back(cell, z_[cell]);
        z_.put(cell, level);
    }

    ElevationStore& z_;
    std::vector<std::pair<Cell, double>> ground_;
};

Direction direction_between(Cell from, Cell to, std::int64_t columns) {
    const RowColumn target{to / columns, to % columns};
    const auto is_it = [&](Direction d) { return neighbour({from / columns, from % columns}, d) == target; };
    return *std::find_if(all_directions.begin(), all_directions.end(), is_it);
}

void follow_lines(const FlowLines& lines, Raster<FlowCode>& codes) {
    for (const Cell cell : lines.cells()) {
        const Cell next = lines.next(cell);
        codes[cell] = next == no_cell ? flow_root : flow_code(direction_between(cell, next, codes.columns()));
    }
}

/// What was opened over a barrier, since there was no other way, is shut again.
std::vector<Cell> shut_in(const std::vector<Cell>& barrier, Raster<FlowCode>& codes) {
    std::vector<Cell> roots;
    for (const Cell wall : barrier) {
        for (const Direction d : all_directions) {
            const RowColumn beside = neighbour({wall / codes.columns(), wall % codes.columns()}, d);
            if (beside.row < 0 || beside.row >= codes.rows() || beside.column < 0 || beside.column >= codes.columns()) continue;
            const auto cell = static_cast<Cell>(beside.row * codes.columns() + beside.column);
            if (codes[cell] != flow_code(opposite(d)) || holds(barrier, cell)) continue;
            codes[cell] = flow_root;
            roots.push_back(cell);
        }
    }
    return roots;
}

}  // namespace

TerrainEdits place_edits(const EditShapes& shapes, const Grid& grid, const ElevationStore& elevations, double turn_from) {
    return Placing(grid, elevations, turn_from).place(shapes);
}

EditedFlow edited_flow(ElevationStore& elevations, const TerrainEdits& edits, const FindCodes& find_codes) {
    if (edits.empty()) return {.codes = find_codes(elevations), .ends_without_way = {}, .enclosed = {}};
    const RoutingLevels levels(elevations, edits);
    EditedFlow flow{.codes = find_codes(elevations), .ends_without_way = {}, .enclosed = {}};
    follow_lines(edits.lines, flow.codes);
    flow.enclosed = shut_in(edits.barrier, flow.codes);
    flow.ends_without_way = lead_on(elevations, edits.lines, flow.codes);
    return flow;
}

double lower_to_beds(ElevationStore& elevations, const FlowLines& lines) {
    const std::vector<Cell> cells = lines.cells();
    std::unordered_map<Cell, double> bed;
    std::unordered_map<Cell, int> awaited;
    for (const Cell cell : cells) {
        bed.emplace(cell, elevations[cell]);
        ++awaited[lines.next(cell)];
    }
    std::vector<Cell> ready;
    std::copy_if(cells.begin(), cells.end(), std::back_inserter(ready), [&](Cell cell) { return !awaited.contains(cell); });
    while (!ready.empty()) {
        const Cell cell = ready.back();
        ready.pop_back();
        const Cell next = lines.next(cell);
        if (!lines.contains(next)) continue;
        bed[next] = std::min(bed[next], bed[cell]);
        if (--awaited[next] == 0) ready.push_back(next);
    }
    double greatest = 0.0;
    for (const Cell cell : cells) {
        greatest = std::max(greatest, elevations[cell] - bed[cell]);
        elevations.put(cell, bed[cell]);
    }
    return greatest;
}

}  // namespace rillclock
