#include "rillclock/catchment/tiled_cells.hpp"

#include <algorithm>
#include <mutex>

namespace rillclock {
namespace {

/// Cells of one tile, as a stretch of a list sorted by tile.
struct TileCells {
    Tile tile = 0;
    std::span<const Cell> cells;
};

Tile tile_of(const TiledForest& forest, Cell cell) {
    return forest.tiles().tile_of({cell / forest.codes().columns(), cell % forest.codes().columns()});
}

/// Sorts cells by tile, each once, and lists the stretches. The list must outlive them.
std::vector<TileCells> by_tile(const TiledForest& forest, std::vector<Cell>& cells) {
    std::sort(cells.begin(), cells.end());
    cells.erase(std::unique(cells.begin(), cells.end()), cells.end());
    std::stable_sort(cells.begin(), cells.end(), [&](Cell a, Cell b) { return tile_of(forest, a) < tile_of(forest, b); });
    std::vector<TileCells> stretches;
    for (std::size_t first = 0; first < cells.size();) {
        const Tile tile = tile_of(forest, cells[first]);
        std::size_t end = first;
        while (end < cells.size() && tile_of(forest, cells[end]) == tile) ++end;
        stretches.push_back({tile, std::span(cells).subspan(first, end - first)});
        first = end;
    }
    return stretches;
}

Local local_of(const TileDesk& desk, Cell cell, std::int64_t columns) {
    const Window& window = desk.flow.window();
    return static_cast<Local>((cell / columns - window.row) * window.columns + cell % columns - window.column);
}

/// Makes each tile that holds any of the cells by `read(tile, desk)`, and keeps what `look(desk, local, cell)` says of each cell, where it
/// says anything.
template <class Value, class Read, class Look>
std::unordered_map<Cell, Value> look_up(const TiledForest& forest, const Executor& executor, Workspaces<TileDesk>& desks,
                                        std::vector<Cell> cells, Read read, Look look) {
    const std::vector<TileCells> stretches = by_tile(forest, cells);
    std::unordered_map<Cell, Value> found;
    std::mutex mutex;
    executor.for_each(stretches.size(), [&](std::size_t i) {
        const auto desk = desks.lease();
        read(stretches[i].tile, *desk);
        const std::lock_guard lock(mutex);
        for (const Cell cell : stretches[i].cells) {
            const std::optional<Value> value = look(*desk, local_of(*desk, cell, forest.codes().columns()), cell);
            if (value) found.emplace(cell, *value);
        }
    });
    return found;
}

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

}  // namespace

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
