#pragma once

#include <functional>
#include <span>

#include "rillclock/hydraulics/storm_time.hpp"
#include "rillclock/travel/channel_network.hpp"

namespace rillclock {

/// The storms of one return period, as channels meet them.
struct DesignRain {
    IntensityOfDuration intensity;
    bool drives_sheet_flow = false;   ///< the storm factor is that of the intensity; else that of the rules, whatever the storm
};

/// What channels have that no mapped section states: a trapezoid whose bottom width goes by contributing area.
struct DesignSection {
    PowerLaw bottom_width;
    double side_slope = 0.0;   ///< run over rise
};

/// The flow of every channel cell under the storms of one return period, in one pass down the network: the arrival at a cell gives the
/// duration, that the intensity, that the flow C·i·A, that the normal depth, that the velocity to the next cell. Nothing
/// is assumed that has to be found again, since the flow of a cell depends on what lies above it alone.
///
/// - The arrival is the time of the water that arrives last, whether beside the network or along it. With kinematic sheet flow its
///   sheet part is under the storm that lasts as long as the arrival (`solve_storm_time`).
/// - Mapped trapezoids and gutters keep their shape; the depth or spread they state gives way to what the flow needs.
/// - The depth is normal for the slope of the step; backwater is not modelled. `mapped` are the study's sections.
/// Throws an input error, with the arrival, where the rain ends before it, and where no runoff reaches a channel (C is 0 above it).
[[nodiscard]] ChannelReaches design_reaches(const ChannelNetwork& network, std::span<const MappedSection> mapped, const DesignSection& section,
                                            const DesignRain& rain, const TravelRules& rules);

}  // namespace rillclock
