#include "cells_by_tile.hpp"

#include <algorithm>

namespace rillclock {

std::vector<Cell> each_once(std::vector<Cell> cells) {
    std::sort(cells.begin(), cells.end());
    cells.erase(std::unique(cells.begin(), cells.end()), cells.end());
    return cells;
}

CellsByTile::CellsByTile(const TiledForest& forest, std::span<const Cell> cells) : cells_(cells) {
    const std::int64_t columns = forest.codes().columns();
    std::vector<Tile> tile_of;
    tile_of.reserve(cells.size());
    for (const Cell cell : cells) tile_of.push_back(forest.tiles().tile_of({cell / columns, cell % columns}));
    std::vector<std::size_t> place(forest.tiles().count() + 1U, 0);   // by tile: where its next position goes
    for (const Tile tile : tile_of) ++place[tile + 1U];
    for (std::size_t tile = 0; tile + 1 < place.size(); ++tile) {
        if (place[tile + 1] > 0) {
            tiles_.push_back(static_cast<Tile>(tile));
            first_.push_back(place[tile]);
        }
        place[tile + 1] += place[tile];
    }
    first_.push_back(cells.size());
    positions_.resize(cells.size());
    for (std::size_t i = 0; i < cells.size(); ++i) positions_[place[tile_of[i]]++] = static_cast<std::uint32_t>(i);
}

std::vector<Cell> CellsByTile::cells(std::size_t i) const {
    std::vector<Cell> of_tile;
    for (const std::uint32_t at : positions(i)) of_tile.push_back(cells_[at]);
    return of_tile;
}

}  // namespace rillclock
