#pragma once

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <span>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// The rows that a row's slopes are made from: its own and those beside it, or itself where there is none.
template <class Z>
struct RowsAround {
    const Z* at = nullptr;
    const Z* above = nullptr;
    const Z* below = nullptr;
    double beside_m = 0.0;   ///< to the neighbours in the row
    double above_m = 0.0;    ///< to the row above; 0 where there is none
    double below_m = 0.0;
    double scale = 1.0;      ///< metres in an elevation unit, times what lengths are weighted by

    /// What a slope is made of: the ground towards one side of a cell. Where there is none, the rise to the cell itself over no length.
    struct Side {
        double rise = 0.0;   ///< elevation units
        double run_m = 0.0;
    };
    /// A void has no rise. Selected, not branched to: most of the work of a row is then done for several cells at once.
    [[gnu::always_inline]] static Side side(double rise, double run_m) {
        return {rise == rise ? rise : 0.0, rise == rise ? run_m : 0.0};
    }
    static constexpr double shortest_run_m = 1e-9;   ///< shorter than any that there is
    [[gnu::always_inline]] static double across(const Side& a, const Side& b) {
        const double run = a.run_m + b.run_m;
        return (a.rise - b.rise) / std::max(run, shortest_run_m);   // without ground on either side both rises are 0
    }
    [[gnu::always_inline]] double slope_between(const Side& east, const Side& west, const Side& south, const Side& north) const {
        const double to_east = across(east, west);
        const double to_south = across(south, north);
        return scale * std::sqrt(to_east * to_east + to_south * to_south);   // far from where a square overflows
    }
};

/// The slopes of so many cells of a row from a column on, all of which have neighbours in the row on both sides.
void slopes_inside(const RowsAround<float>& rows, std::int64_t column, std::span<double> found);
void slopes_inside(const RowsAround<double>& rows, std::int64_t column, std::span<double> found);

/// Slopes of the ground at the cells of one row, as of `land_slope`: what the row has in common is looked up once.
template <class Z>
class LandRow {
public:
    /// The raster must outlive this.
    LandRow(const Raster<Z>& elevations, double metres_per_unit, const Ground& ground, std::int64_t row)
        : columns_(elevations.columns()) {
        around_.at = around_.above = around_.below = elevations.row(row).data();
        around_.beside_m = from_fixed(ground.length(row, Direction::east));
        around_.scale = metres_per_unit * ground.step_weight();
        if (row > 0) {
            around_.above = elevations.row(row - 1).data();
            around_.above_m = from_fixed(ground.length(row, Direction::north));
        }
        if (row + 1 < elevations.rows()) {
            around_.below = elevations.row(row + 1).data();
            around_.below_m = from_fixed(ground.length(row, Direction::south));
        }
    }

    [[nodiscard]] double slope(std::int64_t column) const {
        const bool has_east = column + 1 < columns_;
        const bool has_west = column > 0;
        const double here = value(around_.at, column);
        return around_.slope_between(side(value(around_.at, has_east ? column + 1 : column) - here, has_east ? around_.beside_m : 0.0),
                                     side(value(around_.at, has_west ? column - 1 : column) - here, has_west ? around_.beside_m : 0.0),
                                     side(value(around_.below, column) - here, around_.below_m),
                                     side(value(around_.above, column) - here, around_.above_m));
    }
    /// Those of neighbouring cells from a column on, as many at a time as the machine can.
    void slopes(std::int64_t column, std::span<double> found) const {
        const auto count = static_cast<std::int64_t>(found.size());
        if (count == 0) return;
        if (count > 2) slopes_inside(around_, column + 1, found.subspan(1, found.size() - 2));
        found.front() = slope(column);
        found.back() = slope(column + count - 1);
    }

private:
    using Side = typename RowsAround<Z>::Side;
    static double value(const Z* row, std::int64_t column) { return static_cast<double>(row[column]); }
    static Side side(double rise, double run_m) { return RowsAround<Z>::side(rise, run_m); }

    std::int64_t columns_;
    RowsAround<Z> around_;
};

}  // namespace rillclock
