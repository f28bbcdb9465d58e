#include "rillclock/catchment/point_network.hpp"

#include <utility>

namespace rillclock {
namespace {

NetworkStorm storm_at(const DrainageNetwork& network, PointNumber number, double storm_factor, SubareasListed listed) {
    const PointArrivals at = network.arrivals_at(number, storm_factor);
    return {.storm_factor = storm_factor,
            .time = at.time,
            .last = at.last,
            .lead = at.lead,
            .critical_way = network.way(at.last, number),
            .subareas = least_slacks(at, listed == SubareasListed::all ? at.subareas.size() : listed_slacks),
            .subareas_above = at.subareas.size()};
}

}  // namespace

DrainageNetwork network_of(std::span<const Outlet> outlets) {
    std::vector<NetworkPoint> points;
    points.reserve(outlets.size());
    for (const Outlet& outlet : outlets) {
        points.push_back({.next = outlet.next, .to_root = outlet.time_to_root, .own = outlet.own_front});
    }
    return DrainageNetwork(std::move(points));
}

std::vector<double> storm_factors_of(const Outlet& outlet) {
    std::vector<double> factors;
    for (const PointStorm& storm : outlet.storms) factors.push_back(storm.storm_factor);
    if (factors.empty()) factors.push_back(outlet.storm_factor);
    return factors;
}

std::vector<std::vector<double>> storm_factors_of(std::span<const Outlet> outlets) {
    std::vector<std::vector<double>> factors;
    for (const Outlet& outlet : outlets) factors.push_back(storm_factors_of(outlet));
    return factors;
}

std::vector<PointNetwork> point_networks(const DrainageNetwork& network, std::span<const Outlet> outlets, const NetworkLook& look) {
    std::vector<PointNetwork> made(outlets.size());
    for (std::size_t i = 0; i < outlets.size(); ++i) {
        const PointNumber number = outlets[i].number;
        PointNetwork& point = made[i];
        point.raster = look.raster;
        point.next = network.next_of(number);
        point.way = network.way_time(number);
        for (const PointNumber above : network.above(number)) {
            point.area += outlets[above - 1].own_area;
            if (!look.stated.empty() && look.stated[above - 1]) point.stated_above.push_back(above);
        }
        for (const double factor : look.storm_factors[i]) {
            const bool same = !point.storms.empty() && point.storms.back().storm_factor == factor;
            point.storms.push_back(same ? point.storms.back() : storm_at(network, number, factor, look.listed));
        }
    }
    return made;
}

}  // namespace rillclock
