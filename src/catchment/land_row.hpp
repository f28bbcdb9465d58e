#pragma once

#include <cmath>
#include <cstddef>
#include <cstdint>
#include <span>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// Slopes of the ground at the cells of one row, as of `land_slope`: what the row has in common is looked up once.
template <class Z>
class LandRow {
public:
    /// The raster must outlive this.
    LandRow(const Raster<Z>& elevations, double metres_per_unit, const Ground& ground, std::int64_t row)
        : columns_(elevations.columns()), at_(elevations.row(row).data()), above_(at_), below_(at_),
          beside_m_(from_fixed(ground.length(row, Direction::east))), scale_(metres_per_unit * ground.step_weight()) {
        if (row > 0) {
            above_ = elevations.row(row - 1).data();
            above_m_ = from_fixed(ground.length(row, Direction::north));
        }
        if (row + 1 < elevations.rows()) {
            below_ = elevations.row(row + 1).data();
            below_m_ = from_fixed(ground.length(row, Direction::south));
        }
    }

    [[nodiscard]] double slope(std::int64_t column) const {
        const bool has_east = column + 1 < columns_;
        const bool has_west = column > 0;
        const double here = value(at_, column);
        return slope_between(side(value(at_, has_east ? column + 1 : column) - here, has_east ? beside_m_ : 0.0),
                             side(value(at_, has_west ? column - 1 : column) - here, has_west ? beside_m_ : 0.0),
                             side(value(below_, column) - here, below_m_), side(value(above_, column) - here, above_m_));
    }
    /// Those of neighbouring cells from a column on, two at a time as far as the machine can.
    void slopes(std::int64_t column, std::span<double> found) const {
        const auto count = static_cast<std::int64_t>(found.size());
        if (count == 0) return;
        for (std::int64_t i = column == 0 ? 1 : 0; i < (column + count == columns_ ? count - 1 : count); ++i) {
            const std::int64_t c = column + i;
            const double here = value(at_, c);
            found[static_cast<std::size_t>(i)] =
                slope_between(side(value(at_, c + 1) - here, beside_m_), side(value(at_, c - 1) - here, beside_m_),
                              side(value(below_, c) - here, below_m_), side(value(above_, c) - here, above_m_));
        }
        found.front() = slope(column);
        found.back() = slope(column + count - 1);
    }

private:
    /// The ground towards one side of a cell. Where there is none, the rise to the cell itself over no length.
    struct Side {
        double rise = 0.0;   ///< elevation units
        double run_m = 0.0;
    };

    static double value(const Z* row, std::int64_t column) { return static_cast<double>(row[column]); }
    /// A void has no rise. Selected, not branched to: most of the work of a row is then done for several cells at once.
    static Side side(double rise, double run_m) {
        const bool is_there = rise == rise;
        return {is_there ? rise : 0.0, is_there ? run_m : 0.0};
    }
    static double across(const Side& a, const Side& b) {
        const double run = a.run_m + b.run_m;
        return (a.rise - b.rise) / (run > 0 ? run : 1.0);   // without ground on either side both rises are 0
    }
    double slope_between(const Side& east, const Side& west, const Side& south, const Side& north) const {
        const double to_east = across(east, west);
        const double to_south = across(south, north);
        return scale_ * std::sqrt(to_east * to_east + to_south * to_south);   // far from where a square overflows
    }

    std::int64_t columns_;
    const Z* at_;
    const Z* above_;   ///< the row itself where there is none
    const Z* below_;
    double beside_m_;
    double above_m_ = 0.0;   ///< 0 where there is none
    double below_m_ = 0.0;
    double scale_;
};

}  // namespace rillclock
