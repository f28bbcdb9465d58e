#pragma once

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "rillclock/catchment/flow_path.hpp"

namespace rillclock {

/// A row of the calculation sheet: a stretch of a flow path that one formula times.
///
/// Ponded cells do not cut a path. Their length and time stand apart (`pond_…`), and what the formula needs (`length_m`, slopes,
/// radii, indices) is of the rest, so that time = formula + pond to the last unit:
///   sheet    s · (A(u₁) − A(u₀)), with S_e = (n·L/(u₁−u₀))²
///   sheet, kinematic   s · K·(n/√S_e)^0.6·(x₁^0.6 − x₀^0.6), S_e the slope that gives the same sum
///   shallow  L / (k·√S_e), with S_e^-½ = Σ d·S^-½ / L                          (Taylor & Schwarz 1952)
///   shallow by a chart   L / (k·S_e^b), with S_e^-b = Σ d·S^-b / L, between two points of the chart
///   channel  n·L / (R_e^⅔·√S_e), with R_e^-⅔ = Σ d·R^-⅔ / L and S_e^-½ = Σ d·R^-⅔·S^-½ / Σ d·R^-⅔
///   water    L / √(g·depth)
/// S_e lies between the least and the greatest slope of its cells.
struct Segment {
    Regime regime = Regime::none;
    std::optional<std::uint8_t> surface;   ///< position of the surface class; none in channels
    PathSpot from;                         ///< where it begins and ends
    PathSpot to;
    double length_m = 0.0;                 ///< without ponded cells
    double pond_length_m = 0.0;
    StepTime time;                         ///< pond included
    StepTime pond_time;
    double slope_equivalent = 0.0;         ///< 0 where all is ponded, and on water
    double slope_least = 0.0;
    double slope_greatest = 0.0;
    double index_from_m = 0.0;             ///< sheet: u₀ and u₁; x₀ and x₁ where it is kinematic
    double index_to_m = 0.0;
    double shallow_k_m_per_s = 0.0;        ///< shallow: velocity at slope 1, and the power of the slope
    double shallow_exponent = 0.5;
    double channel_n = 0.0;                ///< channel
    const ChannelReach* reach_from = nullptr;   ///< channel: of its first and last cell, where these have one of their own
    const ChannelReach* reach_to = nullptr;
    double radius_equivalent_m = 0.0;      ///< channel
    double radius_from_m = 0.0;
    double radius_to_m = 0.0;
    FixedArea area_from = 0;               ///< contributing area at both ends
    FixedArea area_to = 0;
    double fall_m = 0.0;                   ///< of spill elevation, end to end
    double end_to_end_s = 0.0;             ///< time that the end-to-end slope alone would give

    [[nodiscard]] double whole_length_m() const { return length_m + pond_length_m; }
    [[nodiscard]] double end_to_end_slope() const { return whole_length_m() > 0 ? fall_m / whole_length_m() : 0.0; }
};

/// How short a segment may be.
struct SegmentRules {
    Length shortest = metres(50);      ///< a run of one slope class shorter than this joins its neighbour
    double shortest_share = 0.0;       ///< of the path's length, where that is more
};

/// Cuts a path where the regime changes, the surface class (not in channels), where u jumps in sheet flow, where a channel's area has
/// grown 1.5 ×, where one mapped section ends, where a chart of shallow flow passes a point, and where the slope class changes for longer than the shortest segment. Sheet flow is not cut by slope: its
/// formula is a function of u alone, and exact over any mixture of slopes. `pieces` are those of the path.
[[nodiscard]] std::vector<Segment> segments_of(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces,
                                               const SegmentRules& segment_rules);

/// The slope classes' upper bounds, rise over run.
[[nodiscard]] std::span<const double> slope_class_bounds();

}  // namespace rillclock
