#pragma once

#include <functional>
#include <span>
#include <vector>

#include "rillclock/catchment/arrivals.hpp"
#include "rillclock/core/fixed_point.hpp"
#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/grid_shapes.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/raster/raster.hpp"
#include "rillclock/raster/region_outlines.hpp"

namespace rillclock {

/// Cells of one row: from `first` to before `end`.
struct CellRun {
    Cell first = 0;
    Cell end = 0;
    bool operator==(const CellRun&) const = default;
};

/// A set of cells as runs by increasing index, none of which touch in a row.
class CellRuns {
public:
    CellRuns() = default;
    /// Runs in any order, which may overlap, each within one row of a grid of so many columns.
    CellRuns(std::vector<CellRun> runs, std::int64_t columns);

    /// Seen as long as the set is there, so not of a temporary one.
    [[nodiscard]] std::span<const CellRun> runs() const& { return runs_; }
    void runs() const&& = delete;
    [[nodiscard]] bool is_empty() const { return runs_.empty(); }
    /// Cost: logarithmic in the runs.
    [[nodiscard]] bool holds(Cell cell) const;

private:
    std::vector<CellRun> runs_;
};

/// The cells whose centres lie within any of the polygons, and that drain: voids are none.
[[nodiscard]] CellRuns cells_of(std::span<const Polygon> polygons, const Grid& grid, const Raster<FlowCode>& codes);
/// The cells that outlines enclose, holes left out.
[[nodiscard]] CellRuns cells_of(std::span<const CornerPolygon> outlines, const Grid& grid);
/// Ground area of the cells.
[[nodiscard]] FixedArea area_of(const CellRuns& cells, const Grid& grid, const Ground& ground);

/// Where water leaves a drawn catchment: those cells of it whose water goes on outside of it, or off the data, and that are lowest, or
/// higher than that by no more than `vertical_step`, the least fall the elevations can be trusted with; by increasing index.
/// `elevation` of a cell in the unit of `vertical_step`. None where there are no cells. Cost: linear in the cells, times the logarithm of the runs.
[[nodiscard]] std::vector<Cell> lowest_crossings(const CellRuns& cells, const Raster<FlowCode>& codes,
                                                 const std::function<double(Cell)>& elevation, double vertical_step);

/// A hand-drawn catchment laid on that of the elevations.
struct DrawnDifference {
    PointNumber point = 0;
    FixedArea drawn = 0;
    FixedArea found = 0;        ///< of the elevations
    FixedArea both = 0;
    std::vector<CornerPolygon> drawn_only;
    std::vector<CornerPolygon> found_only;

    [[nodiscard]] FixedArea drawn_only_area() const { return drawn - both; }
    [[nodiscard]] FixedArea found_only_area() const { return found - both; }
    /// What they have in common, as a share of what either has: 1 where they are the same, 0 where they lie apart.
    [[nodiscard]] double overlap() const;
};

/// Cost: linear in the cells of the rows and columns that either reaches.
[[nodiscard]] DrawnDifference difference_of(PointNumber point, const CellRuns& drawn, const CellRuns& found, const Grid& grid, const Ground& ground);

}  // namespace rillclock
