#pragma once

#include <optional>
#include <span>
#include <string>
#include <vector>

#include "rillclock/catchment/point_network.hpp"
#include "rillclock/study/network_edits.hpp"

namespace rillclock {

/// What is stated of a point in place of what is computed, by its number.
struct PointEdit {
    const StatedPipe* pipe = nullptr;          ///< that leaves the point
    PointNumber piped_to = 0;
    const PointOverride* stated = nullptr;

    /// Whether a time is another one than that over the ground.
    [[nodiscard]] bool changes_times() const;
    [[nodiscard]] bool is_any() const { return pipe != nullptr || stated != nullptr; }
};

/// Finds the points that pipes and overrides name; by number − 1. Throws an input error for a name that no point has, or several, and for
/// pipes that lead water in a circle. The pipes and overrides must outlive the answer.
[[nodiscard]] std::vector<PointEdit> point_edits(std::span<const StatedPipe> pipes, std::span<const PointOverride> overrides,
                                                 std::span<const Outlet> outlets);

/// The velocity in a pipe that carries a flow; full-bore where it carries more than it can, or no flow is given.
[[nodiscard]] Speed pipe_velocity(const StatedPipe& pipe, std::optional<Discharge> flow);

/// The network with pipes in place of flow paths, and stated times. `velocities`: in the pipes, by number − 1. All that arrives at the
/// inlet of a pipe goes on from its end. An own time that is stated counts for the whole subarea; a way time counts before a pipe's.
[[nodiscard]] DrainageNetwork edited_network(std::span<const Outlet> outlets, std::span<const PointEdit> edits,
                                             std::span<const Speed> velocities);

/// What is stated of a point: "time, C, pipe"; empty where nothing is.
[[nodiscard]] std::string marks_of(const PointEdit& edit);

}  // namespace rillclock
