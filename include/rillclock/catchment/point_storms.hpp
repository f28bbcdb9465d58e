#pragma once

#include <optional>
#include <span>
#include <vector>

#include "rillclock/catchment/outlet.hpp"
#include "rillclock/hydraulics/storm_time.hpp"

namespace rillclock {

/// The storms of one zone of rain.
struct ZoneStorms {
    std::vector<IntensityOfDuration> rain;    ///< by return period
    std::optional<double> storm_factor = {};  ///< of all of them, where no intensity changes it
};

/// The storms that points are timed under, where sheet flow depends on the intensity, or where zones have their own rain.
struct OwnStorms {
    std::vector<IntensityOfDuration> rain;  ///< by return period
    std::size_t raster = 0;                 ///< among them: the storm that paths and segments are for
    StormDuration duration = StormDuration::whole_path;
    double reference_factor = 1.0;  ///< of the storm that cells were binned under
    double ignore_tail = 0.0;
    StormSearch search = {};
    std::optional<double> storm_factor = {};  ///< of `rain`, where no intensity changes it
    std::vector<ZoneStorms> zones = {};       ///< numbered from 1; `rain` is then for what lies outside of them
    bool is_everywhere = true;                ///< whether `rain` is meant for that
};

/// Joins the arrivals of subareas (by number − 1, gathered under `Storms::by_point`) down the tree of points, and
/// solves each point's time under each storm: the storm lasts as long as the path of the last cell to arrive, or as its
/// sheet part (its storm part; where sheet flow is faster as a wave on ponded ground that is no part of it).
///
/// The time of a front under intensity i is the greatest of A·i^-0.4 + B over its heads, so a time is found without a
/// pass over the raster, and the rounds close in as `solve_storm_time` says. With an ignored tail it is the last of the
/// bins that are left, which grows with i^-0.4 too. The sheet part of the last to arrive grows in steps as i falls,
/// when a head with more sheet flow takes over; the rounds then go on in the same direction to the first duration that
/// gives itself. Where there are zones, each point has the rain of the zone that prevails in its catchment, and a share
/// of 0 where none does; where their intensity changes no time, the storm factor is that of the zone.
/// `times_of_points`: times to the root of the points' cells. Whether each storm settled stands in the
/// answer.
[[nodiscard]] std::vector<PointHeads> heads_of(std::vector<Arrivals> subareas, const PointTree& tree,
                                               std::span<const StepTime> times_of_points, const OwnStorms& storms);

/// The storms of points whose time no storm changes: the intensity is read for a storm as long as the whole path.
void add_storms(std::vector<PointHeads>& heads, std::span<const StepTime> times_of_points,
                std::span<const IntensityOfDuration> rain);

}  // namespace rillclock
