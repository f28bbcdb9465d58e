#include "rillclock/catchment/tiled_cells.hpp"

#include <utility>

#include "cells_by_tile.hpp"

namespace rillclock {
namespace {

/// Makes each tile that holds any of the cells by `read(tile, desk, cells)`, the cells being those, and calls `look(desk, local, i)` for each, i being its place.
/// `cells` by index, each once.
template <class Read, class Look>
void visit(const TiledForest& forest, const Executor& executor, Workspaces<TileDesk>& desks, const std::vector<Cell>& cells, Read read,
           Look look) {
    const CellsByTile by_tile(forest, cells);
    executor.for_each(by_tile.size(), [&](std::size_t i) {
        const auto desk = desks.lease();
        read(by_tile.tile(i), *desk, by_tile.cells(i));
        for (const std::uint32_t at : by_tile.positions(i)) look(*desk, desk->flow.local(cells[at]), at);
    });
}

/// Keeps what `look(desk, local, cell)` says of each cell, where it says anything. `cells` may repeat.
template <class Value, class Read, class Look>
std::unordered_map<Cell, Value> look_up(const TiledForest& forest, const Executor& executor, Workspaces<TileDesk>& desks,
                                        std::vector<Cell> cells, Read read, Look look) {
    cells = each_once(std::move(cells));
    std::vector<std::optional<Value>> values(cells.size());
    visit(forest, executor, desks, cells, read, [&](const TileDesk& desk, Local local, std::size_t at) {
        values[at] = look(desk, local, cells[at]);
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
        [&](Tile tile, TileDesk& desk, const std::vector<Cell>&) { travel.read_areas(tile, desk); },
        [](const TileDesk& desk, Local local, Cell) -> std::optional<FixedArea> {
            if (desk.flow.code(local) == flow_void) return std::nullopt;
            return desk.area[local];
        });
}

std::vector<PathCell> path_cells_by_index(const TiledTravel& travel, std::vector<Cell> cells) {
    cells = each_once(std::move(cells));
    std::vector<PathCell> found(cells.size());
    visit(travel.ground().forest, travel.executor(), travel.desks(), cells,
          [&](Tile tile, TileDesk& desk, const std::vector<Cell>& of_tile) { travel.read_ways(tile, desk, of_tile); },
          [&](const TileDesk& desk, Local local, std::size_t at) { found[at] = path_cell(travel, desk, local, cells[at]); });
    return found;
}

std::unordered_map<Cell, PathCell> path_cells_at(const TiledTravel& travel, std::vector<Cell> cells) {
    const std::vector<PathCell> in_order = path_cells_by_index(travel, std::move(cells));
    std::unordered_map<Cell, PathCell> found;
    found.reserve(in_order.size());
    for (const PathCell& cell : in_order) found.emplace(cell.cell, cell);
    return found;
}

std::vector<PointNumber> next_points(const Raster<FlowCode>& codes, const TiledOwners& owners, std::span<const DesignPoint> points,
                                     const Executor& executor) {
    std::vector<PointNumber> next(points.size(), 0);
    executor.for_each(points.size(), [&](std::size_t i) {
        const FlowCode code = codes[points[i].cell];
        if (is_direction(code)) next[i] = owners.owner_of(neighbour(points[i].cell, static_cast<Direction>(code), codes.columns()));
    });
    return next;
}

}  // namespace rillclock
