#include "rillclock/catchment/tiled_own_paths.hpp"

#include <utility>

namespace rillclock {
namespace {

std::vector<Cell> own_path(const Raster<FlowCode>& codes, const Outlet& outlet) {
    return flow_path(codes, outlet.own_front.last_to_arrive(outlet.storm_factor).cell, outlet.point.cell);
}

}  // namespace

std::vector<StepTime> restated_own_times(const TiledTravel& travel, std::span<const Outlet> outlets,
                                         std::span<const RestatedPoint> points) {
    const Raster<FlowCode>& codes = travel.ground().forest.codes();
    std::vector<Cell> cells;
    for (const RestatedPoint& point : points) {
        const std::vector<Cell> path = own_path(codes, outlets[point.number - 1]);
        cells.insert(cells.end(), path.begin(), path.end());
    }
    const auto found = path_cells_at(travel, std::move(cells));
    std::vector<StepTime> times;
    for (const RestatedPoint& point : points) {
        const Outlet& outlet = outlets[point.number - 1];
        const PathGround ground{.classes = travel.ground().surface.classes,
                                .metres_per_elevation_unit = travel.ground().metres_per_elevation_unit,
                                .rules = travel.rules(),
                                .storm_factor = outlet.storm_factor};
        PathCells path;
        for (const Cell cell : own_path(codes, outlet)) path.push_back(found.at(cell));
        times.push_back(restated_time(ground, path_pieces(ground, path), point.stated));
    }
    return times;
}

}  // namespace rillclock
