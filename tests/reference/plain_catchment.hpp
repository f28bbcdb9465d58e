#pragma once

#include <utility>
#include <vector>

#include "rillclock/catchment/outlet.hpp"
#include "reference/plain/sweeps.hpp"
#include "reference/plain/steepest_descent.hpp"
#include "reference/plain/travel_field.hpp"

/// Points, arrivals and outlets worked out from fields of the whole raster: the plain way, against which tiles are held.
namespace rillclock::reference {

/// Points with the owner of every cell.
struct OwnedTree : PointTree {
    Raster<PointNumber> owner;
};

inline OwnedTree owned_tree(const FlowForest& forest, const std::vector<DesignPoint>& points) {
    Raster<PointNumber> label(forest.rows(), forest.columns());
    for (std::size_t i = 0; i < points.size(); ++i) label[points[i].cell] = static_cast<PointNumber>(i + 1);
    auto [owner] = sweep_up(forest, up::First{[&](Cell cell) { return label[cell]; }});
    std::vector<PointNumber> next;
    for (const DesignPoint& point : points) {
        const Cell below = forest.downstream(point.cell);
        next.push_back(below == no_cell ? 0 : owner[below]);
    }
    return {point_tree(std::move(next)), std::move(owner)};
}

inline PathCells path_cells(const TravelInputs& in, const TravelField& field, const std::vector<Cell>& path) {
    PathCells cells;
    for (const Cell cell : path) {
        cells.push_back({.cell = cell, .step = step_view(in, field, cell), .spill = field.spill[cell],
                         .flow_distance = field.flow_distance[cell], .time_to_root = field.time_to_root(cell),
                         .surface = in.surface.index[cell]});
    }
    return cells;
}

inline bool is_beside_edge(const TravelInputs& in, Cell cell) {
    return is_border(in.elevations, {in.forest.row(cell), cell % in.forest.columns()});
}

inline std::vector<Arrivals> arrivals_by_subarea(const TravelInputs& in, const TravelField& field, const OwnedTree& tree,
                                                 double storm_factor) {
    std::vector<Arrivals> subareas(tree.next.size());
    for (const Cell cell : in.forest.order()) {
        if (tree.owner[cell] == 0) continue;
        subareas[tree.owner[cell] - 1].add({.head = {cell, field.time_to_root(cell)},
                                            .area = in.ground.cell_area(in.forest.row(cell)),
                                            .flow_distance = field.flow_distance[cell],
                                            .is_border = is_beside_edge(in, cell)},
                                           storm_factor);
    }
    return subareas;
}

inline std::vector<Outlet> outlets_of(const TravelInputs& in, const TravelField& field, const TravelRules& rules,
                                      const std::vector<DesignPoint>& points, const OutletRules& outlet_rules) {
    const OwnedTree tree = owned_tree(in.forest, points);
    const double s = rules.sheet.storm_factor;
    const auto heads = heads_of(arrivals_by_subarea(in, field, tree, s), tree, s, outlet_rules.ignore_tail);
    const PathGround ground{.classes = in.surface.classes, .metres_per_elevation_unit = in.metres_per_elevation_unit,
                            .rules = rules, .storm_factor = s};
    std::vector<Outlet> outlets;
    for (std::size_t i = 0; i < points.size(); ++i) {
        const Cell end = points[i].cell;
        std::int64_t at_point = is_beside_edge(in, end) ? 1 : 0;
        in.forest.for_each_upstream(end, [&](Cell up) { at_point += is_beside_edge(in, up) ? 1 : 0; });
        const auto path = [&](Cell head, Cell to) { return path_cells(in, field, flow_path(in.forest.codes(), head, to)); };
        const auto path_to_point = [&](Cell head) {
            const PathCells cells = path(head, end);
            return point_path(ground, cells, path_pieces(ground, cells), outlet_rules.segments);
        };
        const PathCells way = tree.next[i] == 0 ? PathCells{} : path(end, points[tree.next[i] - 1].cell);
        outlets.push_back(outlet_of({.number = static_cast<PointNumber>(i + 1), .point = points[i], .next = tree.next[i],
                                     .heads = heads[i], .border_cells_at_point = at_point,
                                     .governing = path_to_point(heads[i].governing.cell),
                                     .longest = path_to_point(heads[i].farthest),
                                     .way = way_of(ground, way, path_pieces(ground, way)),
                                     .cell = path_cells(in, field, {end}).front()},
                                    ground));
    }
    return outlets;
}

inline std::vector<RootArea> ways_out(const FlowForest& forest, const Raster<FixedArea>& area) {
    std::vector<RootArea> ways;
    for (const Cell cell : forest.order()) {
        if (forest.is_root(cell)) ways.push_back({cell, area[cell]});
    }
    return ways;
}

}  // namespace rillclock::reference
