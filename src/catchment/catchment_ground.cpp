#include "rillclock/catchment/catchment_ground.hpp"

#include <algorithm>
#include <cmath>
#include <functional>

#include "land_row.hpp"

namespace rillclock {

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
    return elevations.visit([&](const auto& z) {
        return LandRow(z, metres_per_unit, ground, cell / elevations.columns()).slope(cell % elevations.columns());
    });
}

}  // namespace rillclock
