#pragma once

#include <cstdint>
#include <vector>

#include "rillclock/core/quantity.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/surface/land.hpp"
#include "rillclock/terrain/elevation_store.hpp"

namespace rillclock {

/// What the formulas that time a catchment as one lump ask of its ground. Sums are integers, so the order of cells does
/// not matter; means are over cells.
class CatchmentGround {
public:
    /// `cover` is the class's position in the book, `slope` as of `land_slope`, `elevation_m` within ±8·10⁶ m.
    void add(std::uint8_t cover, CellSoil soil, FixedArea area, double slope, double elevation_m) {
        land_.add({.cover = cover, .soil = soil, .slope = slope_band(slope)}, area);
        ++cells_;
        slope_sum_ += to_fixed(slope);
        elevation_sum_ += nearest_whole(elevation_m * elevation_units_per_m);
    }
    /// Counts an area to a zone of rain, 0 being outside of all.
    void add_to_zone(std::uint8_t zone, FixedArea area);
    /// Adds the ground of other cells.
    void add(const CatchmentGround& other);

    /// Cells and area by cover class, soil group and slope of the land.
    [[nodiscard]] const LandTally& land() const { return land_; }
    /// By zone of rain, up to the last one met; empty where there are no zones.
    [[nodiscard]] const std::vector<FixedArea>& area_by_zone() const { return area_by_zone_; }
    [[nodiscard]] std::int64_t cells() const { return cells_; }
    /// Average slope of the ground, not of any path. NaN without cells.
    [[nodiscard]] double land_slope() const;
    [[nodiscard]] double mean_elevation_m() const;

private:
    static constexpr double elevation_units_per_m = 1024.0;

    LandTally land_;
    std::vector<FixedArea> area_by_zone_;
    std::int64_t cells_ = 0;
    std::int64_t slope_sum_ = 0;      ///< in 2⁻²⁰
    std::int64_t elevation_sum_ = 0;  ///< in 2⁻¹⁰ m
};

/// Slope of the ground at a cell from its four neighbours: differences across the cell, or from the cell itself where
/// one neighbour is void or outside; 0 in a direction without either.
[[nodiscard]] double land_slope(const ElevationStore& elevations, double metres_per_unit, const Ground& ground,
                                Cell cell);

}  // namespace rillclock
