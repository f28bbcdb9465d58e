#pragma once

#include <algorithm>
#include <cstdint>

#include "rillclock/raster/blocks.hpp"

namespace rillclock {

/// Number of a tile, row by row from the north-west corner.
using Tile = std::uint32_t;

/// How a raster is cut into tiles: squares of `side` cells, those at the southern and eastern edge smaller.
class TileGrid {
public:
    /// `side` is at least 1. A tile of 256² cells fits the second-level cache with all that is computed about it.
    TileGrid(std::int64_t rows, std::int64_t columns, std::int64_t side = 256)
        : rows_(rows), columns_(columns), side_(side), across_((columns + side - 1) / side), down_((rows + side - 1) / side) {}

    [[nodiscard]] std::int64_t rows() const { return rows_; }
    [[nodiscard]] std::int64_t columns() const { return columns_; }
    [[nodiscard]] std::int64_t side() const { return side_; }
    [[nodiscard]] Tile count() const { return static_cast<Tile>(across_ * down_); }
    [[nodiscard]] std::int64_t tiles_across() const { return across_; }
    [[nodiscard]] std::int64_t tiles_down() const { return down_; }

    /// The cells of a tile.
    [[nodiscard]] Window window(Tile tile) const {
        const std::int64_t row = tile / across_ * side_;
        const std::int64_t column = tile % across_ * side_;
        return {.row = row, .column = column, .rows = std::min(side_, rows_ - row), .columns = std::min(side_, columns_ - column)};
    }
    /// The tile that holds a cell.
    [[nodiscard]] Tile tile_of(RowColumn at) const {
        return static_cast<Tile>(at.row / side_ * across_ + at.column / side_);
    }

private:
    std::int64_t rows_;
    std::int64_t columns_;
    std::int64_t side_;
    std::int64_t across_;
    std::int64_t down_;
};

}  // namespace rillclock
