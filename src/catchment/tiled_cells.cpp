#include "rillclock/catchment/tiled_cells.hpp"

#include <algorithm>

#include "cells_by_tile.hpp"

namespace rillclock {
namespace {

/// Makes each tile that holds any of the cells by `read(tile, desk)`, and keeps what `look(desk, local, cell)` says of each cell, where it
/// says anything.
template <class Value, class Read, class Look>
std::unordered_map<Cell, Value> look_up(const TiledForest& forest, const Executor& executor, Workspaces<TileDesk>& desks,
                                        std::vector<Cell> cells, Read read, Look look) {
    std::sort(cells.begin(), cells.end());
    cells.erase(std::unique(cells.begin(), cells.end()), cells.end());
    const CellsByTile by_tile(forest, cells);
    std::vector<std::optional<Value>> values(cells.size());
    executor.for_each(by_tile.size(), [&](std::size_t i) {
        const auto desk = desks.lease();
        read(by_tile.tile(i), *desk);
        for (const std::uint32_t at : by_tile.positions(i)) {
            values[at] = look(*desk, desk->flow.local(cells[at]), cells[at]);
        }
    });
    std::unordered_map<Cell, Value> found;
    found.reserve(cells.size());
    for (std::size_t i = 0; i < cells.size(); ++i) {
        if (values[i]) found.emplace(cells[i], *values[i]);
    }
    return found;
}

}  // namespace

PathCell path_cell(const TiledTravel& travel, const TileDesk& desk, Local local, Cell cell) {
    PathCell made;
    made.cell = cell;
    made.step = travel.step_view(desk, local);
    made.spill = desk.spill[local];
    made.flow_distance = desk.flow_distance[local];
    made.time_to_root = desk.time_to_root(local);
    made.surface = travel.ground().surface.index[cell];
    return made;
}

std::unordered_map<Cell, FixedArea> areas_at(const TiledTravel& travel, std::vector<Cell> cells) {
    return look_up<FixedArea>(
        travel.ground().forest, travel.executor(), travel.desks(), std::move(cells),
        [&](Tile tile, TileDesk& desk) { travel.read_areas(tile, desk); },
        [](const TileDesk& desk, Local local, Cell) -> std::optional<FixedArea> {
            if (desk.flow.code(local) == flow_void) return std::nullopt;
            return desk.area[local];
        });
}

std::unordered_map<Cell, PathCell> path_cells_at(const TiledTravel& travel, std::vector<Cell> cells) {
    return look_up<PathCell>(
        travel.ground().forest, travel.executor(), travel.desks(), std::move(cells),
        [&](Tile tile, TileDesk& desk) { travel.read_tile(tile, desk); },
        [&](const TileDesk& desk, Local local, Cell cell) { return std::optional(path_cell(travel, desk, local, cell)); });
}

std::vector<PointNumber> next_points(const TiledForest& forest, const TiledOwners& owners, std::span<const DesignPoint> points,
                                     const Executor& executor) {
    const Raster<FlowCode>& codes = forest.codes();
    const auto below = [&](Cell cell) {
        if (!is_direction(codes[cell])) return no_cell;
        const auto d = static_cast<Direction>(codes[cell]);
        return neighbour(cell, d, codes.columns());
    };
    std::vector<Cell> cells;
    for (const DesignPoint& point : points) {
        if (below(point.cell) != no_cell) cells.push_back(below(point.cell));
    }
    Workspaces<TileDesk> desks;
    const auto owner = look_up<PointNumber>(
        forest, executor, desks, std::move(cells),
        [&](Tile tile, TileDesk& desk) {
            desk.flow.read(codes, forest.tiles().window(tile));
            owners.read_tile(tile, desk);
        },
        [](const TileDesk& desk, Local local, Cell) { return std::optional<PointNumber>(desk.owner[local]); });
    std::vector<PointNumber> next;
    for (const DesignPoint& point : points) {
        const auto found = owner.find(below(point.cell));
        next.push_back(found == owner.end() ? 0 : found->second);
    }
    return next;
}

}  // namespace rillclock
