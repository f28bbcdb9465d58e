#pragma once

#include <span>

#include "reference/plain/slope_ahead.hpp"
#include "reference/plain/steepest_descent.hpp"
#include "reference/plain/sweeps.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/travel/step.hpp"

namespace rillclock {

/// The ground that travel times are made on.
struct TravelInputs {
    const FlowForest& forest;
    const Ground& ground;
    const Elevations& elevations;
    double metres_per_elevation_unit = 1.0;  ///< of the elevations as stored
    const SurfaceTable& surface;
    std::span<const Cell> mapped_channels = {};  ///< channels whatever drains to them and whatever covers them
};

/// All that is per cell. Times and lengths are to the *root*: those to a point below are differences.
struct TravelField {
    Elevations spill;                        ///< elevation units
    Raster<FixedArea> contributing_area;     ///< own cell included
    Raster<FixedLength> flow_distance;       ///< to the root
    Raster<FixedLength> from_divide;         ///< greatest over the ways that arrive
    Raster<FixedLength> sheet_index;         ///< greatest over the ways that arrive
    Raster<GroundKind> kind;
    Raster<float> slope;
    Raster<Regime> regime;
    Raster<FixedTime> storm_part;            ///< A: multiplied by the storm factor
    Raster<FixedTime> fixed_part;            ///< B: the same in every storm

    [[nodiscard]] StepTime time_to_root(Cell cell) const { return {fixed_part[cell], storm_part[cell]}; }
};

/// Length of the step out of a cell; 0 at roots and voids.
[[nodiscard]] FixedLength step_length(const FlowForest& forest, const Ground& ground, Cell cell);

/// The step out of a cell as the hydraulics sees it.
[[nodiscard]] StepView step_view(const TravelInputs& inputs, const TravelField& field, Cell cell);

/// Computes the field in three rounds of sweeps, each with its weights fixed beforehand: areas, distances and spill elevation; the
/// slope ahead and from it the sheet index; times. Linear but for the slope's bisection.
[[nodiscard]] TravelField travel_field(const TravelInputs& inputs, const TravelRules& rules);

}  // namespace rillclock
