#pragma once

#include <cmath>
#include <cstdint>

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
        : columns_(elevations.columns()), at_(elevations.row(row).data()),
          above_(row > 0 ? elevations.row(row - 1).data() : nullptr),
          below_(row + 1 < elevations.rows() ? elevations.row(row + 1).data() : nullptr),
          beside_m_(from_fixed(ground.length(row, Direction::east))), above_m_(from_fixed(ground.length(row, Direction::north))),
          below_m_(from_fixed(ground.length(row, Direction::south))), scale_(metres_per_unit * ground.step_weight()) {}

    [[nodiscard]] double slope(std::int64_t column) const {
        const double here = static_cast<double>(at_[column]);
        const double east = across(side(column + 1 < columns_ ? &at_[column + 1] : nullptr, here, beside_m_),
                                   side(column > 0 ? &at_[column - 1] : nullptr, here, beside_m_));
        const double south = across(side(below_ != nullptr ? &below_[column] : nullptr, here, below_m_),
                                    side(above_ != nullptr ? &above_[column] : nullptr, here, above_m_));
        return scale_ * std::sqrt(east * east + south * south);  // far from where a square overflows
    }

private:
    /// The ground towards one side of a cell.
    struct Side {
        double rise = 0.0;   ///< elevation units
        double run_m = 0.0;
    };

    /// `beside`: null outside the raster.
    static Side side(const Z* beside, double here, double run_m) {
        if (beside == nullptr) return {};
        const double rise = static_cast<double>(*beside) - here;
        return std::isnan(rise) ? Side{} : Side{rise, run_m};
    }
    static double across(const Side& a, const Side& b) {
        const double run = a.run_m + b.run_m;
        return run > 0 ? (a.rise - b.rise) / run : 0.0;
    }

    std::int64_t columns_;
    const Z* at_;
    const Z* above_;
    const Z* below_;
    double beside_m_;
    double above_m_;
    double below_m_;
    double scale_;
};

}  // namespace rillclock
