#pragma once

#include <optional>

#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/channel_size.hpp"
#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {

/// The least slope any rule works with: where a study turns a floor off, so that no time is infinite.
inline constexpr double least_slope = 1e-6;

/// Where the slope of a step is read, and from what fall on it is believed. See slope_ahead.hpp.
struct SlopeRules {
    Length window = metres(20);
    Length vertical_step = metres(0.2);
    double overland_floor = 0.001;  ///< after KC et al. 2014
    double channel_floor = 0.0001;
};

/// What sheet flow is a function of.
enum class SheetBasis {
    index,           ///< the sheet index u alone: T(u1) − T(u0)
    characteristic,  ///< each stretch and its distance from the divide, as SheetFormula::along_characteristic
};

/// How sheet flow is timed and where it ends.
struct SheetRules {
    SheetFormula formula = nrcs_sheet_formula();
    SheetBasis basis = SheetBasis::index;
    double storm_factor = 1.0;                     ///< s of the study's own storm
    Length limit = feet(100);                      ///< of the distance from the divide
    Length index_limit = mccuen_spiess_index;      ///< of u; infinite where only `limit` counts
};

/// Manning channels: one stated hydraulic radius, or R = W·D/(W+2D) from top width and mean depth by area.
struct ChannelRules {
    double n = 0.045;
    std::optional<Length> hydraulic_radius;
    PowerLaw width = channel_sizes().front().width;
    PowerLaw depth = channel_sizes().front().depth;
    /// Smallest area of the channels that width and depth were made from; none where they are the study's own.
    std::optional<Area> sizes_from;
    /// Area from which a cell is a channel; none where only mapped lines are.
    std::optional<Area> from_area = hectares(5);

    /// Hydraulic radius of a channel that drains an area.
    [[nodiscard]] Length radius_at(Area area) const {
        return hydraulic_radius ? *hydraulic_radius : hydraulic_radius_of(width(area), depth(area));
    }
    /// Flow area over top width. Where a hydraulic radius is stated and no section, that radius, which is never more.
    [[nodiscard]] Length mean_depth_at(Area area) const { return hydraulic_radius ? *hydraulic_radius : depth(area); }
};

/// Ponded cells carry water at the wave celerity of the depth above the ground.
struct PondRules {
    Length depth = metres(0.3);              ///< from which a cell counts as ponded
    Speed speed = metres_per_second(2.0);    ///< the most it may be; infinite for no cap
};

/// Everything that times hang on beside the data.
struct TravelRules {
    SlopeRules slope;
    SheetRules sheet;
    ChannelRules channel;
    PondRules pond;
};

}  // namespace rillclock
