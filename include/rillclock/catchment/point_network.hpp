#pragma once

#include <cstddef>
#include <span>
#include <vector>

#include "rillclock/catchment/drainage_network.hpp"
#include "rillclock/catchment/outlet.hpp"

namespace rillclock {

/// Which subareas of a point are listed: a chain of points has as many pairs as the square of its length.
enum class SubareasListed { least_slacks, all };

/// How many subareas are listed beside the one that arrives last, unless all are.
inline constexpr std::size_t listed_slacks = 10;

/// What the network says of a point under one storm.
struct NetworkStorm {
    double storm_factor = 1.0;
    FixedTime time = 0;                      ///< the greatest arrival; the point's time where no tail is left out
    PointNumber last = 0;                    ///< the subarea that arrives last
    std::optional<FixedTime> lead = {};      ///< by how much; none where there is no other
    std::vector<PointNumber> critical_way;   ///< the points from the last subarea's down to this one, both included
    std::vector<SubareaArrival> subareas;    ///< those listed, with less slack first
    std::size_t subareas_above = 0;          ///< how many there are, the own one included
};

/// A point in the network: by return period as `Outlet::storms`, or under the one storm where there are none of these.
struct PointNetwork {
    std::vector<NetworkStorm> storms;
    std::size_t raster = 0;    ///< among them: the storm that paths and segments are for
    PointNumber next = 0;      ///< the next point in the network: below, or at the end of a pipe; 0 none
    StepTime way;              ///< to there
    FixedArea area = 0;        ///< of all subareas that drain through the point
    std::vector<PointNumber> stated_above;  ///< points above, or this one, of which something is stated in place of what is computed

    [[nodiscard]] const NetworkStorm& raster_storm() const { return storms[raster]; }
};

/// The network that worked-out points make; their numbers run from 1.
[[nodiscard]] DrainageNetwork network_of(std::span<const Outlet> outlets);

/// The storm factors of a point, by return period, or the one it has.
[[nodiscard]] std::vector<double> storm_factors_of(const Outlet& outlet);

/// The storm factors of all points where nothing is stated of any.
[[nodiscard]] std::vector<std::vector<double>> storm_factors_of(std::span<const Outlet> outlets);

/// How points are looked at in the network.
struct NetworkLook {
    std::span<const std::vector<double>> storm_factors;  ///< of each point, by return period
    std::size_t raster = 0;                              ///< the place of the paths' storm among the return periods
    SubareasListed listed = SubareasListed::least_slacks;
    std::vector<bool> stated = {};                       ///< by number − 1: whether something is stated of a point; may be empty
};

/// Every point in the network.
[[nodiscard]] std::vector<PointNetwork> point_networks(const DrainageNetwork& network, std::span<const Outlet> outlets,
                                                       const NetworkLook& look);

}  // namespace rillclock
