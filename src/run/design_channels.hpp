#pragma once

#include <span>
#include <vector>

#include "rillclock/travel/design_flow.hpp"
#include "last_pass.hpp"
#include "study_data.hpp"

namespace rillclock {

/// What a run with channel flow by the design storm works on; `last` is its last pass.
struct DesignChannels {
    std::span<const MappedSection> sections;
    std::span<const double> runoff;   ///< coefficient of each surface class and soil
    TiledTravel& travel;              ///< the one of `last`
    ChannelReaches& reaches;          ///< room for the reaches; afterwards those of the raster's return period
};

/// As `heads_and_rasters`, with the velocities of channels by the flow that each return period's storms bring them. The times are made and
/// gathered once for each return period, that of the rasters last.
[[nodiscard]] std::vector<PointHeads> heads_under_design_flow(const LastPass& last, const DesignChannels& channels);

}  // namespace rillclock
