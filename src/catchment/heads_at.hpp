#pragma once

#include <algorithm>
#include <utility>
#include <vector>

#include "rillclock/catchment/outlet.hpp"

namespace rillclock {

/// What decides a catchment's times and paths under one storm; own area apart.
[[nodiscard]] inline PointHeads heads_at(const Arrivals& catchment, const ArrivalBins& bins, double storm_factor,
                                         double ignore_tail) {
    PointHeads heads;
    heads.area = catchment.area;
    heads.border_cells = catchment.border_cells;
    heads.storm_factor = storm_factor;
    const std::vector<Head> by_share = bins.by_shares(told_shares);
    std::copy(by_share.begin(), by_share.end(), heads.by_share.begin());
    heads.last = catchment.front.last_to_arrive(storm_factor);
    heads.governing = ignore_tail > 0 ? bins.last_without(ignore_tail) : heads.last;
    heads.farthest = catchment.farthest;
    heads.ground = catchment.ground;
    return heads;
}

/// Joins subareas (by number − 1) down the tree and asks `look(catchment, number)` for the heads of each whole
/// catchment.
template <class Look>
[[nodiscard]] std::vector<PointHeads> join_down(std::vector<Arrivals> subareas, const PointTree& tree,
                                                double storm_factor, Look look) {
    std::vector<FixedArea> own_areas;
    std::vector<Front> own_fronts;
    std::vector<LandTally> own_lands;
    for (const Arrivals& subarea : subareas) {
        own_areas.push_back(subarea.area);
        own_fronts.push_back(subarea.front);
        own_lands.push_back(subarea.ground.land());
    }
    std::vector<PointHeads> heads(subareas.size());
    for (const PointNumber number : tree.upstream_first) {
        Arrivals& catchment = subareas[number - 1];  // by now with all that joins from above
        catchment.bins.settle();
        heads[number - 1] = look(std::as_const(catchment), number);
        heads[number - 1].own_area = own_areas[number - 1];
        heads[number - 1].own_front = std::move(own_fronts[number - 1]);
        heads[number - 1].own_land = std::move(own_lands[number - 1]);
        const PointNumber next = tree.next_of(number);
        if (next != 0) subareas[next - 1].add(std::move(catchment), storm_factor);
    }
    return heads;
}

}  // namespace rillclock
