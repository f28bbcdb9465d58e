#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/forest/tile_flow.hpp"
#include "rillclock/tiles/executor.hpp"
#include "rillclock/tiles/workspaces.hpp"

namespace rillclock {

/// Number of an exit, a cell that drains into another tile; counted over all tiles.
using Exit = std::uint32_t;
inline constexpr Exit no_exit = UINT32_MAX;

/// Where water comes into a tile: through which exit of another tile, and to which cell.
struct Inlet {
    Exit exit = no_exit;
    Local to = 0;
};

/// A flow forest cut into tiles, and the small graph between them.
///
/// The water of an exit comes into the next tile, follows one path through it and leaves by the exit `next`, or ends there. So exits
/// form a forest of their own, less than a hundredth of the cells for tiles of 256²; all that tiles must know of each other during a
/// sweep is a value for each exit. Source: Barnes 2017 (accumulation over tiles), generalised to both sweeps.
class TiledForest {
public:
    /// `codes` must outlive the forest and hold no cycle.
    TiledForest(const Raster<FlowCode>& codes, TileGrid tiles, const Executor& executor);

    [[nodiscard]] const Raster<FlowCode>& codes() const { return *codes_; }
    [[nodiscard]] const TileGrid& tiles() const { return tiles_; }

    [[nodiscard]] Exit exit_count() const { return static_cast<Exit>(next_.size()); }
    /// The first exit of a tile; its exits are numbered on from there, in the order of TilePassage::exits.
    [[nodiscard]] Exit first_exit(Tile tile) const { return first_exit_[tile]; }
    /// The exit that a cell is, which must be one. Cost: logarithmic in the exits of its tile.
    [[nodiscard]] Exit exit_of(Cell cell) const;
    /// The exit through which the water of an exit leaves the tile that it comes into; `no_exit` where it ends there.
    [[nodiscard]] Exit next(Exit exit) const { return next_[exit]; }
    /// All exits, each before its next.
    [[nodiscard]] std::span<const Exit> exit_order() const { return exit_order_; }
    /// Where water of other tiles comes into a tile.
    [[nodiscard]] std::span<const Inlet> inlets(Tile tile) const {
        return std::span(inlets_).subspan(first_inlet_[tile], first_inlet_[tile + 1] - first_inlet_[tile]);
    }
    /// How many cells of a tile water of other tiles passes.
    [[nodiscard]] Local passed_count(Tile tile) const { return passed_count_[tile]; }

private:
    struct Through;
    void number_exits(const std::vector<Through>& tiles);
    void join_exits(const std::vector<Through>& tiles);
    void order_exits();

    const Raster<FlowCode>* codes_;
    TileGrid tiles_;
    std::vector<Local> passed_count_;   ///< by tile
    std::vector<Exit> first_exit_;
    std::vector<Cell> exit_cell_;
    std::vector<Exit> next_;
    std::vector<Exit> exit_order_;
    std::vector<std::size_t> first_inlet_;
    std::vector<Inlet> inlets_;
};

}  // namespace rillclock
