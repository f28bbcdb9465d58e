#pragma once

#include <span>

#include "rillclock/catchment/flow_path.hpp"

namespace rillclock {

/// Where shallow flow becomes a channel at the latest, as handbooks say. Source: USDA NRCS, National Engineering Handbook,
/// Part 630, chapter 15, 2010 (value from memory).
inline constexpr Length longest_shallow_flow = feet(1000);
/// Speeds beyond which a reviewer asks whether the ground would bear them.
inline constexpr Speed fastest_shallow_flow = metres_per_second(3);
inline constexpr Speed fastest_channel_flow = metres_per_second(5);
/// The part of a path at its head whose share of the time is told.
inline constexpr double head_share = 0.05;

/// Flow of one path beyond a bound.
struct Beyond {
    double length_m = 0.0;   ///< of path where it is so
    double greatest = 0.0;   ///< of the quantity that has the bound
    double effect_s = 0.0;   ///< time the path would take more if the flow kept to the bound
};

/// Where a path's flow goes beyond what its formulas were made for. Ponded pieces, which no formula times, are left out.
struct PathDoubts {
    Beyond shallow_length;   ///< unbroken shallow flow, m; the effect is the time beyond the bound, which a channel would shorten
    Beyond shallow_speed;    ///< m/s
    Beyond channel_speed;    ///< m/s
    Beyond supercritical;    ///< Froude number V/√(g·D) above 1
    Beyond small_channels;   ///< channels sized by a law made from larger ones; the greatest is how many times, the effect their time
    double head_s = 0.0;     ///< time over the uppermost `head_share` of the length, ponds included
};

/// Looks through the pieces of a path, in order.
[[nodiscard]] PathDoubts doubts_of(const PathGround& ground, std::span<const PathPiece> pieces);

}  // namespace rillclock
