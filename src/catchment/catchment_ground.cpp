#include "rillclock/catchment/catchment_ground.hpp"

#include <algorithm>
#include <cmath>
#include <functional>

#include "rillclock/raster/direction.hpp"

namespace rillclock {
namespace {

constexpr double elevation_units_per_m = 1024.0;

/// The ground towards one side of a cell.
struct Side {
    double rise = 0.0;  ///< elevation units
    double run_m = 0.0;
};

template <class Z>
Side side_of(const Raster<Z>& elevations, const Ground& ground, RowColumn at, Direction d) {
    const RowColumn beside = neighbour(at, d);
    if (beside.row < 0 || beside.column < 0 || beside.row >= elevations.rows() || beside.column >= elevations.columns())
        return {};
    const double rise = static_cast<double>(elevations(beside.row, beside.column)) - static_cast<double>(elevations(at.row, at.column));
    if (std::isnan(rise)) return {};
    return {rise, from_fixed(ground.length(at.row, d))};
}

double slope_across(const Side& a, const Side& b) {
    const double run = a.run_m + b.run_m;
    return run > 0 ? (a.rise - b.rise) / run : 0.0;
}

}  // namespace

void CatchmentGround::add(std::uint8_t cover, CellSoil soil, FixedArea area, double slope, double elevation_m) {
    land_.add({.cover = cover, .soil = soil, .slope = slope_band(slope)}, area);
    ++cells_;
    slope_sum_ += to_fixed(slope);
    elevation_sum_ += std::llround(elevation_m * elevation_units_per_m);
}

void CatchmentGround::add_to_zone(std::uint8_t zone, FixedArea area) {
    if (zone >= area_by_zone_.size()) area_by_zone_.resize(zone + 1U);
    area_by_zone_[zone] += area;
}

void CatchmentGround::add(const CatchmentGround& other) {
    if (other.area_by_zone_.size() > area_by_zone_.size()) area_by_zone_.resize(other.area_by_zone_.size());
    std::transform(other.area_by_zone_.begin(), other.area_by_zone_.end(), area_by_zone_.begin(), area_by_zone_.begin(),
                   std::plus<>());
    land_.add(other.land_);
    cells_ += other.cells_;
    slope_sum_ += other.slope_sum_;
    elevation_sum_ += other.elevation_sum_;
}

double CatchmentGround::land_slope() const {
    return from_fixed(slope_sum_) / static_cast<double>(cells_);
}

double CatchmentGround::mean_elevation_m() const {
    return static_cast<double>(elevation_sum_) / elevation_units_per_m / static_cast<double>(cells_);
}

double land_slope(const ElevationStore& elevations, double metres_per_unit, const Ground& ground, Cell cell) {
    const RowColumn at{cell / elevations.columns(), cell % elevations.columns()};
    return elevations.visit([&](const auto& z) {
        const auto side = [&](Direction d) { return side_of(z, ground, at, d); };
        const double east = slope_across(side(Direction::east), side(Direction::west));
        const double south = slope_across(side(Direction::south), side(Direction::north));
        return metres_per_unit * ground.step_weight() * std::sqrt(east * east + south * south);  // far from where a square overflows
    });
}

}  // namespace rillclock
