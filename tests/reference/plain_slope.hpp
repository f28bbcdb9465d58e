#pragma once

#include <algorithm>
#include <cstddef>
#include <optional>
#include <vector>

#include "reference/plain/slope_ahead.hpp"

namespace rillclock::reference {

/// A place on the way down from a cell: how far, and how much lower in metres.
struct Ahead {
    double distance_m;
    double fall_m;
    bool concentrated;  ///< channel or water
};

inline std::vector<Ahead> way_down(const SlopeInputs& in, Cell from) {
    std::vector<Ahead> way;
    for (Cell cell = from; cell != no_cell; cell = in.forest.downstream(cell)) {
        way.push_back({from_fixed(in.flow_distance[from] - in.flow_distance[cell]),
                       (in.spill[from] - in.spill[cell]) * in.metres_per_elevation_unit,
                       in.kind[cell] != GroundKind::overland});
    }
    return way;
}

inline double fall_at(const std::vector<Ahead>& way, double distance_m) {
    for (std::size_t i = 1; i < way.size(); ++i) {
        if (way[i].distance_m < distance_m) continue;
        const double share = (distance_m - way[i - 1].distance_m) / (way[i].distance_m - way[i - 1].distance_m);
        return way[i - 1].fall_m + share * (way[i].fall_m - way[i - 1].fall_m);
    }
    return way.back().fall_m;
}

inline std::optional<double> distance_of_fall(const std::vector<Ahead>& way, double fall_m) {
    for (std::size_t i = 1; i < way.size(); ++i) {
        if (way[i].fall_m < fall_m) continue;
        const double share = (fall_m - way[i - 1].fall_m) / (way[i].fall_m - way[i - 1].fall_m);
        return way[i - 1].distance_m + share * (way[i].distance_m - way[i - 1].distance_m);
    }
    return std::nullopt;
}

/// The slope ahead of one cell by walking down its path cell by cell: the definition, with no bisection and nothing
/// kept.
inline double plain_slope(const SlopeInputs& in, const SlopeRules& rules, Cell cell) {
    const bool overland = in.kind[cell] == GroundKind::overland;
    const double floor = std::max(overland ? rules.overland_floor : rules.channel_floor, least_slope);
    const std::vector<Ahead> way = way_down(in, cell);
    if (way.size() == 1) return floor;
    double reach = std::min(in_metres(rules.window), way.back().distance_m);
    const auto turn = std::find_if(way.begin(), way.end(), [](const Ahead& place) { return place.concentrated; });
    if (overland && turn != way.end()) reach = std::min(reach, turn->distance_m);
    const double step = in_metres(rules.vertical_step);
    const double fall = fall_at(way, reach);
    if (fall >= step) return std::max(fall / reach, floor);
    if (const auto distance = distance_of_fall(way, step)) return std::max(step / *distance, floor);
    return std::max(way.back().fall_m / way.back().distance_m, floor);
}

}  // namespace rillclock::reference
