#pragma once

#include <span>
#include <vector>

#include "rillclock/catchment/path_cell.hpp"

namespace rillclock {

/// The cells from `head` down to `end`, both included. `head` must drain through `end`.
[[nodiscard]] std::vector<Cell> flow_path(const Raster<FlowCode>& codes, Cell head, Cell end);

/// One homogeneous piece of a flow path: a part of the step out of one of its cells.
struct PathPiece {
    StepPart part;
    std::size_t position = 0;     ///< of the cell in the path
    double share_from = 0.0;      ///< of the step, where the piece begins and ends
    double share_to = 1.0;
    std::uint8_t surface = 0;     ///< position of the surface class
    FixedArea area = 0;           ///< contributing area at the cell
    const ChannelReach* reach = nullptr;   ///< of a channel that has one of its own
};

/// A place on a path: at a share of the step out of the cell at that position.
struct PathSpot {
    std::size_t position = 0;
    double share = 0.0;
};

/// Appends the pieces of the step out of the cell at that position of its path: one, or two where sheet flow ends within it.
void add_pieces(const PathGround& ground, const PathCell& cell, std::size_t position, std::vector<PathPiece>& pieces);

/// The pieces of a path, in order; the last cell has no step and gives none.
[[nodiscard]] std::vector<PathPiece> path_pieces(const PathGround& ground, std::span<const PathCell> path);

/// What stands for a whole path beside its segments.
struct PathSummary {
    FixedLength length = 0;
    StepTime time;
    double fall_m = 0.0;               ///< of spill elevation, head to end
    double profile_area_m2 = 0.0;      ///< between the profile of spill elevation and the level of the end
    double slope_length_m = 0.0;       ///< Σ S·d: the fall that the slopes used would make
    double ponded_length_m = 0.0;
    double floor_length_m = 0.0;       ///< where the time hangs on the slope floor: not on open water, nor where ponded

    /// Σ S·d over the real fall; 1 on a plane. NaN where there is no fall.
    [[nodiscard]] double fall_ratio() const;
    /// Of the straight line from the end that has the same area under it as the profile; 0 where the path has no length.
    [[nodiscard]] double equal_area_slope() const;
    /// A part of the path's length in metres as a share of the whole, 0 to 1; 0 where the path has no length.
    [[nodiscard]] double share_of_length(double part_m) const;
};

/// Sums up a path; `pieces` are its own. Cost: its length.
[[nodiscard]] PathSummary summary_of(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces);

}  // namespace rillclock
