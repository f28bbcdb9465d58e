#include "rillclock/catchment/tiled_outlets.hpp"

#include "rillclock/catchment/arrival_tally.hpp"

namespace rillclock {
namespace {

using Found = std::unordered_map<Cell, PathCell>;

/// The cells from a point down to the next; none where there is no next.
std::vector<Cell> way_cells(const Raster<FlowCode>& codes, std::span<const DesignPoint> points, PointNumber next, std::size_t i) {
    return next == 0 ? std::vector<Cell>{} : flow_path(codes, points[i].cell, points[next - 1].cell);
}

std::vector<Cell> cells_of_all_paths(const Raster<FlowCode>& codes, std::span<const DesignPoint> points, const PointTree& tree,
                                     const std::vector<PointHeads>& heads) {
    std::vector<Cell> cells;
    for (std::size_t i = 0; i < points.size(); ++i) {
        for (const Cell head : {heads[i].governing.cell, heads[i].farthest}) {
            const std::vector<Cell> path = flow_path(codes, head, points[i].cell);
            cells.insert(cells.end(), path.begin(), path.end());
        }
        const std::vector<Cell> way = way_cells(codes, points, tree.next[i], i);
        cells.insert(cells.end(), way.begin(), way.end());
        for (const PointStorm& storm : heads[i].storms) cells.push_back(storm.governing.cell);
    }
    return cells;
}

PathCells found_path(const Found& found, const std::vector<Cell>& cells) {
    PathCells path;
    for (const Cell cell : cells) path.push_back(found.at(cell));
    return path;
}

PathCells path_of(const Raster<FlowCode>& codes, const Found& found, Cell head, Cell end) {
    return found_path(found, flow_path(codes, head, end));
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
    const Found found = path_cells_at(travel, cells_of_all_paths(codes, points, tree, heads));
    std::vector<Outlet> outlets(points.size());
    travel.executor().for_each(points.size(), [&](std::size_t i) {
        const Cell end = points[i].cell;
        const PathGround ground{.classes = travel.ground().surface.classes,
                                .metres_per_elevation_unit = travel.ground().metres_per_elevation_unit,
                                .rules = travel.rules(),
                                .storm_factor = heads[i].storm_factor};
        outlets[i] = outlet_of({.number = static_cast<PointNumber>(i + 1), .point = points[i], .next = tree.next[i], .heads = heads[i],
                                .border_cells_at_point = border_cells_at(codes, end),
                                .governing = path_of(codes, found, heads[i].governing.cell, end),
                                .longest = path_of(codes, found, heads[i].farthest, end),
                                .way = found_path(found, way_cells(codes, points, tree.next[i], i))},
                               ground, rules);
        for (PointStorm& storm : outlets[i].storms) {
            storm.length = found.at(storm.governing.cell).flow_distance - found.at(end).flow_distance;
        }
    });
    return outlets;
}

}  // namespace rillclock
