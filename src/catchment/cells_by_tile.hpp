#pragma once

#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

/// The cells by index, each once.
[[nodiscard]] std::vector<Cell> each_once(std::vector<Cell> cells);

/// Positions in a list of cells, tile by tile, so that each tile is made but once for all its cells.
class CellsByTile {
public:
    /// `cells` must stay as they are.
    CellsByTile(const TiledForest& forest, std::span<const Cell> cells);

    /// How many tiles hold any of the cells.
    [[nodiscard]] std::size_t size() const { return tiles_.size(); }
    [[nodiscard]] Tile tile(std::size_t i) const { return tiles_[i]; }
    /// Of the cells that lie in tile(i), in the order of the list.
    [[nodiscard]] std::span<const std::uint32_t> positions(std::size_t i) const {
        return std::span(positions_).subspan(first_[i], first_[i + 1] - first_[i]);
    }
    /// Those cells.
    [[nodiscard]] std::vector<Cell> cells(std::size_t i) const;

private:
    std::span<const Cell> cells_;      ///< the list
    std::vector<Tile> tiles_;
    std::vector<std::size_t> first_;   ///< position of each tile's first; one more at the end
    std::vector<std::uint32_t> positions_;
};

}  // namespace rillclock
