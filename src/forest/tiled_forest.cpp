#include "rillclock/forest/tiled_forest.hpp"

#include <algorithm>

#include "rillclock/core/error.hpp"

namespace rillclock {

/// What one tile tells of itself: its exits, and for each entry the exit that its path leaves by.
struct TiledForest::Through {
    struct Path {
        TileEntry entry;
        Local exit_position;   ///< among the tile's exits; `ends_here` where the path ends in the tile
    };
    std::vector<Cell> exits;
    std::vector<Path> paths;
};

namespace {

struct Desk {
    TilePassage passage;
    TileValues<Local> end;   ///< of passed cells and exits: the position among the tile's exits of the one that their path leaves by
};

void find_ends(Desk& desk) {
    desk.end.resize(desk.passage.frame().size());
    const auto exits = desk.passage.exits();
    for (std::size_t i = 0; i < exits.size(); ++i) desk.end[exits[i]] = static_cast<Local>(i);
    for (const auto& [cell, below] : desk.passage.cells()) {
        if (below != leaves_tile) desk.end[cell] = below == ends_here ? ends_here : desk.end[below];
    }
}

}  // namespace

TiledForest::TiledForest(const Raster<FlowCode>& codes, TileGrid tiles, const Executor& executor)
    : codes_(&codes), tiles_(tiles), passed_count_(tiles.count()) {
    std::vector<Through> through(tiles_.count());
    Workspaces<Desk> desks;
    executor.for_each(tiles_.count(), [&](std::size_t tile) {
        const auto desk = desks.lease();
        const TilePassage& passage = desk->passage;
        desk->passage.read(codes, tiles_.window(static_cast<Tile>(tile)));
        find_ends(*desk);
        for (const Local exit : passage.exits()) through[tile].exits.push_back(passage.frame().cell(exit));
        for (const TileEntry& entry : passage.entries()) through[tile].paths.push_back({entry, desk->end[entry.to]});
        passed_count_[tile] = static_cast<Local>(passage.cells().size());
    });
    number_exits(through);
    join_exits(through);
    order_exits();
}

void TiledForest::number_exits(const std::vector<Through>& tiles) {
    for (const Through& tile : tiles) {
        first_exit_.push_back(static_cast<Exit>(exit_cell_.size()));
        exit_cell_.insert(exit_cell_.end(), tile.exits.begin(), tile.exits.end());
    }
    first_exit_.push_back(static_cast<Exit>(exit_cell_.size()));
}

void TiledForest::join_exits(const std::vector<Through>& tiles) {
    next_.assign(exit_cell_.size(), no_exit);
    for (Tile tile = 0; tile < tiles.size(); ++tile) {
        first_inlet_.push_back(inlets_.size());
        for (const Through::Path& path : tiles[tile].paths) {
            const Exit exit = exit_of(path.entry.from);
            inlets_.push_back({exit, path.entry.to});
            if (path.exit_position != ends_here) next_[exit] = first_exit_[tile] + path.exit_position;
        }
    }
    first_inlet_.push_back(inlets_.size());
}

/// Within a tile exits are in the order of their cells.
Exit TiledForest::exit_of(Cell cell) const {
    const Tile tile = tiles_.tile_of({cell / codes_->columns(), cell % codes_->columns()});
    const auto begin = exit_cell_.begin() + first_exit_[tile];
    const auto end = exit_cell_.begin() + first_exit_[tile + 1];
    const auto found = std::lower_bound(begin, end, cell);
    if (found == end || *found != cell) throw bug("water comes into a tile from a cell that is no exit");
    return static_cast<Exit>(found - exit_cell_.begin());
}

void TiledForest::order_exits() {
    std::vector<std::uint32_t> waiting(next_.size(), 0);
    for (const Exit next : next_) {
        if (next != no_exit) ++waiting[next];
    }
    for (Exit exit = 0; exit < exit_count(); ++exit) {
        if (waiting[exit] == 0) exit_order_.push_back(exit);
    }
    for (std::size_t i = 0; i < exit_order_.size(); ++i) {
        const Exit next = next_[exit_order_[i]];
        if (next != no_exit && --waiting[next] == 0) exit_order_.push_back(next);
    }
    if (exit_order_.size() != next_.size()) throw bug("the flow directions hold a cycle through several tiles");
}

}  // namespace rillclock
