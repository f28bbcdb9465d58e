#pragma once

#include <optional>
#include <span>

#include "rillclock/catchment/flow_path.hpp"

namespace rillclock {

/// What a user states of the overland flow on a path in place of what was computed.
struct StatedOverland {
    std::optional<Length> sheet_length = {};  ///< from the head on; that of the path where absent
    std::optional<double> n = {};             ///< for sheet flow; that of the classes where absent

    [[nodiscard]] bool is_any() const { return sheet_length || n; }
};

/// The time along a path whose sheet flow is stated. Overland ground within the sheet length is sheet flow, by the index Σ n·d/√S over its
/// pieces; beyond it shallow concentrated flow. Channels, water and ponded ground keep their times; sheet flow ends at the first of them.
[[nodiscard]] StepTime restated_time(const PathGround& ground, std::span<const PathPiece> pieces, const StatedOverland& stated);

}  // namespace rillclock
