#include "rillclock/catchment/tiled_outlets.hpp"

#include <optional>
#include <utility>

#include "rillclock/catchment/arrival_tally.hpp"
#include "shared_paths.hpp"

namespace rillclock {
namespace {

/// The paths of one point, and from it to the next.
struct PointPaths {
    PathEnds governing;
    PathEnds longest;
    std::optional<PathEnds> way;   ///< none where there is no next point
};

PointPaths paths_of(std::span<const DesignPoint> points, PointNumber next, const PointHeads& heads, std::size_t i) {
    const Cell end = points[i].cell;
    PointPaths paths{.governing = {heads.governing.cell, end}, .longest = {heads.farthest, end}, .way = {}};
    if (next != 0) paths.way = {end, points[next - 1].cell};
    return paths;
}

SharedPaths all_paths(const TiledTravel& travel, std::span<const DesignPoint> points, const PointTree& tree,
                      const std::vector<PointHeads>& heads) {
    std::vector<PathEnds> all;
    for (std::size_t i = 0; i < points.size(); ++i) {
        const PointPaths paths = paths_of(points, tree.next[i], heads[i], i);
        all.push_back(paths.governing);
        all.push_back(paths.longest);
        if (paths.way) all.push_back(*paths.way);
        for (const PointStorm& storm : heads[i].storms) all.push_back({storm.governing.cell, storm.governing.cell});
    }
    return {travel, all};
}

/// Border cells that are the point's own or drain straight into it: an outlet at the edge has some for certain.
std::int64_t border_cells_at(const Raster<FlowCode>& codes, Cell point) {
    std::int64_t count = is_beside_edge(codes, point) ? 1 : 0;
    const RowColumn at{point / codes.columns(), point % codes.columns()};
    for (const Direction d : all_directions) {
        const RowColumn beside = neighbour(at, d);
        if (beside.row < 0 || beside.row >= codes.rows() || beside.column < 0 || beside.column >= codes.columns()) continue;
        if (codes(beside.row, beside.column) != flow_code(opposite(d))) continue;
        if (is_beside_edge(codes, static_cast<Cell>(beside.row * codes.columns() + beside.column))) ++count;
    }
    return count;
}

}  // namespace

std::vector<Outlet> outlets_of(const TiledTravel& travel, std::span<const DesignPoint> points, const PointTree& tree,
                               const std::vector<PointHeads>& heads, const OutletRules& rules) {
    const Raster<FlowCode>& codes = travel.ground().forest.codes();
    const SharedPaths shared = all_paths(travel, points, tree, heads);
    Workspaces<LaidPath> memory;
    std::vector<Outlet> outlets(points.size());
    travel.executor().for_each(points.size(), [&](std::size_t i) {
        const PathGround ground{.classes = travel.ground().surface.classes,
                                .metres_per_elevation_unit = travel.ground().metres_per_elevation_unit,
                                .rules = travel.rules(),
                                .storm_factor = heads[i].storm_factor};
        const PointPaths paths = paths_of(points, tree.next[i], heads[i], i);
        const auto laid = memory.lease();
        const auto path_of = [&](const PathEnds& path) {
            shared.lay(path, *laid);
            return point_path(ground, laid->cells, laid->pieces, rules.segments);
        };
        OutletParts parts{.number = static_cast<PointNumber>(i + 1), .point = points[i], .next = tree.next[i], .heads = heads[i],
                          .border_cells_at_point = border_cells_at(codes, points[i].cell),
                          .governing = path_of(paths.governing), .longest = {}, .way = {}, .cell = shared.cell(points[i].cell)};
        parts.longest = paths.longest.head == paths.governing.head ? parts.governing : path_of(paths.longest);
        if (paths.way) {
            shared.lay(*paths.way, *laid);
            parts.way = way_of(ground, laid->cells, laid->pieces);
        }
        outlets[i] = outlet_of(std::move(parts), ground);
        for (PointStorm& storm : outlets[i].storms) {
            storm.length = shared.cell(storm.governing.cell).flow_distance - shared.cell(points[i].cell).flow_distance;
        }
    });
    return outlets;
}

}  // namespace rillclock
