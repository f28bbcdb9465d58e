#include "rillclock/catchment/drawn_catchments.hpp"

#include <algorithm>
#include <limits>
#include <map>

#include "rillclock/raster/direction.hpp"

namespace rillclock {
namespace {

/// The rows and columns that sets of cells reach.
struct Reach {
    std::int64_t first_row = std::numeric_limits<std::int64_t>::max();
    std::int64_t end_row = 0;
    std::int64_t first_column = std::numeric_limits<std::int64_t>::max();
    std::int64_t end_column = 0;

    void take(const CellRuns& cells, const Grid& grid) {
        for (const CellRun& run : cells.runs()) {
            const RowColumn at = grid.row_column(run.first);
            first_row = std::min(first_row, at.row);
            end_row = std::max(end_row, at.row + 1);
            first_column = std::min(first_column, at.column);
            end_column = std::max(end_column, at.column + (run.end - run.first));
        }
    }
    [[nodiscard]] std::int64_t columns() const { return end_column - first_column; }
};

constexpr RegionLabel of_drawn = 1;
constexpr RegionLabel of_found = 2;
constexpr RegionLabel of_both = of_drawn + of_found;

/// Hands out the runs of a set row by row, from the top down.
class RowReader {
public:
    RowReader(const CellRuns& cells, const Grid& grid, const Reach& reach) : runs_(cells.runs()), grid_(grid), reach_(reach) {}

    /// Adds `label` to the cells of the set in that row; rows are asked in their order.
    void add(std::int64_t row, RegionLabel label, std::vector<RegionLabel>& labels) {
        const auto left = static_cast<std::int64_t>(grid_.cell({row, 0})) + reach_.first_column;
        for (; next_ < runs_.size() && grid_.row_column(runs_[next_].first).row == row; ++next_) {
            const auto begin = labels.begin() + (static_cast<std::int64_t>(runs_[next_].first) - left);
            std::for_each(begin, begin + (runs_[next_].end - runs_[next_].first), [label](RegionLabel& cell) { cell += label; });
        }
    }

private:
    std::span<const CellRun> runs_;
    const Grid& grid_;
    const Reach& reach_;
    std::size_t next_ = 0;
};

/// Outlines in the corners of the whole grid.
std::vector<CornerPolygon> moved(std::vector<CornerPolygon> outlines, const Reach& reach) {
    for (CornerPolygon& polygon : outlines) {
        for (CornerRing& ring : polygon.rings) {
            for (Corner& corner : ring) {
                corner.column += static_cast<std::uint32_t>(reach.first_column);
                corner.row += static_cast<std::uint32_t>(reach.first_row);
            }
        }
    }
    return outlines;
}

/// Splits a run where cells are void.
void add_drained(CellRun run, const Raster<FlowCode>& codes, std::vector<CellRun>& runs) {
    for (Cell cell = run.first; cell < run.end;) {
        while (cell < run.end && codes[cell] == flow_void) ++cell;
        const Cell first = cell;
        while (cell < run.end && codes[cell] != flow_void) ++cell;
        if (first < cell) runs.push_back({first, cell});
    }
}

}  // namespace

CellRuns::CellRuns(std::vector<CellRun> runs, std::int64_t columns) {
    std::sort(runs.begin(), runs.end(), [](const CellRun& a, const CellRun& b) { return a.first < b.first; });
    for (const CellRun& run : runs) {
        const bool begins_row = run.first % columns == 0;
        const bool joins = !runs_.empty() && run.first <= runs_.back().end && !(begins_row && run.first == runs_.back().end);
        if (joins) runs_.back().end = std::max(runs_.back().end, run.end);
        else runs_.push_back(run);
    }
}

bool CellRuns::holds(Cell cell) const {
    const auto after = std::upper_bound(runs_.begin(), runs_.end(), cell, [](Cell c, const CellRun& run) { return c < run.first; });
    return after != runs_.begin() && cell < std::prev(after)->end;
}

CellRuns cells_of(std::span<const Polygon> polygons, const Grid& grid, const Raster<FlowCode>& codes) {
    std::vector<CellRun> runs;
    for (const Polygon& polygon : polygons) {
        for_each_run_within(polygon, grid, [&](Cell first, Cell end) { add_drained({first, end}, codes, runs); });
    }
    return CellRuns(std::move(runs), grid.columns);
}

CellRuns cells_of(std::span<const CornerPolygon> outlines, const Grid& grid) {
    std::map<std::uint32_t, std::vector<std::uint32_t>> sides;   // by row: columns where its cells begin or end
    for (const CornerPolygon& polygon : outlines) {
        for (const CornerRing& ring : polygon.rings) {
            for (std::size_t i = 0; i < ring.size(); ++i) {
                const Corner& a = ring[i];
                const Corner& b = ring[(i + 1) % ring.size()];
                for (std::uint32_t row = std::min(a.row, b.row); row < std::max(a.row, b.row); ++row) sides[row].push_back(a.column);
            }
        }
    }
    std::vector<CellRun> runs;
    for (auto& [row, columns] : sides) {
        std::sort(columns.begin(), columns.end());
        const auto left = static_cast<Cell>(static_cast<std::int64_t>(row) * grid.columns);
        for (std::size_t i = 0; i + 1 < columns.size(); i += 2) {
            if (columns[i] < columns[i + 1]) runs.push_back({left + columns[i], left + columns[i + 1]});
        }
    }
    return CellRuns(std::move(runs), grid.columns);
}

FixedArea area_of(const CellRuns& cells, const Grid& grid, const Ground& ground) {
    FixedArea area = 0;
    for (const CellRun& run : cells.runs()) area += ground.cell_area(grid.row_column(run.first).row) * static_cast<FixedArea>(run.end - run.first);
    return area;
}

std::vector<Cell> lowest_crossings(const CellRuns& cells, const Raster<FlowCode>& codes, const std::function<double(Cell)>& elevation,
                                   double vertical_step) {
    std::vector<Cell> crossings;
    double lowest = std::numeric_limits<double>::infinity();
    for (const CellRun& run : cells.runs()) {
        for (Cell cell = run.first; cell < run.end; ++cell) {
            const FlowCode code = codes[cell];
            if (code < flow_root && cells.holds(neighbour(cell, static_cast<Direction>(code), codes.columns()))) continue;
            crossings.push_back(cell);
            lowest = std::min(lowest, elevation(cell));
        }
    }
    std::erase_if(crossings, [&](Cell cell) { return elevation(cell) > lowest + vertical_step; });
    return crossings;
}

double DrawnDifference::overlap() const {
    const FixedArea either = drawn + found - both;
    return either > 0 ? static_cast<double>(both) / static_cast<double>(either) : 0.0;
}

DrawnDifference difference_of(PointNumber point, const CellRuns& drawn, const CellRuns& found, const Grid& grid, const Ground& ground) {
    Reach reach;
    reach.take(drawn, grid);
    reach.take(found, grid);
    DrawnDifference made{.point = point, .drawn = area_of(drawn, grid, ground), .found = area_of(found, grid, ground), .drawn_only = {}, .found_only = {}};
    if (reach.end_row == 0) return made;
    RowReader drawn_rows(drawn, grid, reach);
    RowReader found_rows(found, grid, reach);
    RegionBorders borders(reach.columns());
    std::vector<RegionLabel> labels;
    for (std::int64_t row = reach.first_row; row < reach.end_row; ++row) {
        labels.assign(static_cast<std::size_t>(reach.columns()), no_region);
        drawn_rows.add(row, of_drawn, labels);
        found_rows.add(row, of_found, labels);
        made.both += ground.cell_area(row) * std::count(labels.begin(), labels.end(), of_both);
        std::replace(labels.begin(), labels.end(), of_both, no_region);
        borders.add_row(labels);
    }
    borders.finish();
    made.drawn_only = moved(borders.outline(of_drawn), reach);
    made.found_only = moved(borders.outline(of_found), reach);
    return made;
}

}  // namespace rillclock
