#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/raster.hpp"
#include "rillclock/tiles/tile_grid.hpp"
#include "rillclock/tiles/tile_memory.hpp"

namespace rillclock {

/// Position of a cell within its tile, row by row.
using Local = std::uint32_t;
inline constexpr Local leaves_tile = UINT32_MAX;       ///< the cell drains into another tile
inline constexpr Local ends_here = UINT32_MAX - 1;     ///< the cell is a root, or void

/// Where water comes into a tile: from a cell of another tile to one of its own.
struct TileEntry {
    Cell from = no_cell;
    Local to = 0;
};

/// The flow within one tile: which cell each drains to, an order from divides to ends, and where water leaves and comes in.
///
/// An object is used for one tile after another and keeps its memory. Reads the tile's codes and the ring around it, no more.
/// Cost: linear in the cells of the tile.
class TileFlow {
public:
    /// Reads the flow of the tile that is `window`.
    void read(const Raster<FlowCode>& codes, const Window& window);

    [[nodiscard]] Local size() const { return static_cast<Local>(down_.size()); }
    [[nodiscard]] const Window& window() const { return window_; }
    /// The cell of the whole raster.
    [[nodiscard]] Cell cell(Local local) const {
        // 32 bits divide faster, and the cells of a tile are counted in them.
        const auto columns = static_cast<Local>(window_.columns);
        const Local row = local / columns;
        return static_cast<Cell>((window_.row + row) * raster_columns_ + window_.column + (local - row * columns));
    }
    /// Whether a cell of the whole raster lies in the tile.
    [[nodiscard]] bool holds(Cell cell) const;
    /// The position of a cell that lies in the tile: `cell` the other way round.
    [[nodiscard]] Local local(Cell cell) const {
        return static_cast<Local>((cell / raster_columns_ - window_.row) * window_.columns + cell % raster_columns_ - window_.column);
    }
    /// The row of the whole raster.
    [[nodiscard]] std::int64_t row(Local local) const { return window_.row + local / static_cast<Local>(window_.columns); }
    /// The cell of the tile it drains to, or `leaves_tile` or `ends_here`.
    [[nodiscard]] Local down(Local local) const { return down_[local]; }
    /// The code it has in the raster.
    [[nodiscard]] FlowCode code(Local local) const { return code_[local]; }
    /// All cells but voids, each before the one it drains to.
    [[nodiscard]] std::span<const Local> order() const { return order_; }
    /// Cells that drain into other tiles, by increasing position.
    [[nodiscard]] std::span<const Local> exits() const { return exits_; }
    [[nodiscard]] std::span<const TileEntry> entries() const { return entries_; }
    /// Cells that water of other tiles passes, each after the one it drains to: some in a hundred, and all that other tiles hang on.
    [[nodiscard]] std::span<const Local> passed() const { return passed_; }

private:
    void read_steps(const Raster<FlowCode>& codes);
    void read_rim_step(Local local);
    void read_entries(const Raster<FlowCode>& codes);
    void find_order();
    void find_passed();

    Window window_;
    std::int64_t raster_columns_ = 0;
    TileValues<Local> down_;
    TileValues<FlowCode> code_;
    TileValues<std::uint8_t> waiting_;   ///< tributaries not yet in the order; one place more, for steps that end or leave
    TileValues<Local> order_;
    TileValues<std::uint8_t> is_passed_;
    std::vector<Local> passed_;
    std::vector<Local> exits_;
    std::vector<TileEntry> entries_;
};

}  // namespace rillclock
