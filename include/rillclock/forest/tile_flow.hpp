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

/// Where the cells of a tile lie in the whole raster.
class TileFrame {
public:
    TileFrame() = default;
    TileFrame(const Window& window, std::int64_t raster_columns) : window_(window), raster_columns_(raster_columns) {}

    [[nodiscard]] const Window& window() const { return window_; }
    [[nodiscard]] Local size() const { return static_cast<Local>(window_.size()); }
    /// The cell of the whole raster.
    [[nodiscard]] Cell cell(Local local) const {
        // 32 bits divide faster, and the cells of a tile are counted in them.
        const auto columns = static_cast<Local>(window_.columns);
        const Local row = local / columns;
        return static_cast<Cell>((window_.row + row) * raster_columns_ + window_.column + (local - row * columns));
    }
    /// Whether a cell of the whole raster lies in the tile.
    [[nodiscard]] bool holds(RowColumn at) const {
        return at.row >= window_.row && at.row < window_.row + window_.rows && at.column >= window_.column &&
               at.column < window_.column + window_.columns;
    }
    /// The position of a cell that lies in the tile: `cell` the other way round.
    [[nodiscard]] Local local(RowColumn at) const {
        return static_cast<Local>((at.row - window_.row) * window_.columns + at.column - window_.column);
    }
    /// Row and column in the whole raster of one of the raster's cells.
    [[nodiscard]] RowColumn row_column(Cell cell) const { return {cell / raster_columns_, cell % raster_columns_}; }
    /// The row of the whole raster.
    [[nodiscard]] std::int64_t row(Local local) const { return window_.row + local / static_cast<Local>(window_.columns); }

private:
    Window window_;
    std::int64_t raster_columns_ = 0;
};

/// Where water comes into a tile: from a cell of another tile to one of its own.
struct TileEntry {
    Cell from = no_cell;
    Local to = 0;
};

/// What other tiles know of one: where water leaves it and comes in, and the cells that water of other tiles passes, some in a hundred.
///
/// An object is used for one tile after another and keeps its memory. Cost: linear in the tile's rim and in the cells passed; no other cell is
/// looked at.
class TilePassage {
public:
    /// A cell that is passed, and where it drains to, as TileFlow::down says it.
    struct Passed {
        Local cell = 0;
        Local below = ends_here;
    };

    /// Reads what is passed of the tile that is `window`.
    void read(const Raster<FlowCode>& codes, const Window& window);

    [[nodiscard]] const TileFrame& frame() const { return frame_; }
    /// Cells that drain into other tiles, by increasing position.
    [[nodiscard]] std::span<const Local> exits() const { return exits_; }
    [[nodiscard]] std::span<const TileEntry> entries() const { return entries_; }
    /// The cells passed, each after the one it drains to.
    [[nodiscard]] std::span<const Passed> cells() const { return cells_; }

private:
    void read_exits(const Raster<FlowCode>& codes);
    void read_entries(const Raster<FlowCode>& codes);
    [[nodiscard]] Local step_down(const Raster<FlowCode>& codes, RowColumn& at) const;
    void follow(const Raster<FlowCode>& codes, const TileEntry& entry);

    TileFrame frame_;
    std::vector<Local> exits_;
    std::vector<TileEntry> entries_;
    std::vector<Passed> cells_;
    TileValues<std::uint8_t> is_passed_;
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
    [[nodiscard]] const TileFrame& frame() const { return passage_.frame(); }
    [[nodiscard]] const Window& window() const { return frame().window(); }
    /// The cell of the whole raster.
    [[nodiscard]] Cell cell(Local local) const { return frame().cell(local); }
    /// Whether a cell of the whole raster lies in the tile.
    [[nodiscard]] bool holds(Cell cell) const { return frame().holds(frame().row_column(cell)); }
    /// The position of a cell that lies in the tile: `cell` the other way round.
    [[nodiscard]] Local local(Cell cell) const { return frame().local(frame().row_column(cell)); }
    /// The row of the whole raster.
    [[nodiscard]] std::int64_t row(Local local) const { return frame().row(local); }
    /// The cell of the tile it drains to, or `leaves_tile` or `ends_here`.
    [[nodiscard]] Local down(Local local) const { return down_[local]; }
    /// The code it has in the raster.
    [[nodiscard]] FlowCode code(Local local) const { return code_[local]; }
    /// All cells but voids, each before the one it drains to.
    [[nodiscard]] std::span<const Local> order() const { return order_; }
    /// Cells that drain into other tiles, by increasing position.
    [[nodiscard]] std::span<const Local> exits() const { return passage_.exits(); }
    /// Where water of other tiles comes in, and the cells it passes.
    [[nodiscard]] const TilePassage& passage() const { return passage_; }

private:
    void read_codes(const Raster<FlowCode>& codes);
    void read_steps();
    void count_tributaries();
    void find_order();

    TileValues<Local> down_;
    TileValues<FlowCode> code_;
    TileValues<std::uint8_t> waiting_;   ///< tributaries not yet in the order; one place more, for steps that end or leave
    TileValues<Local> order_;
    TilePassage passage_;
};

}  // namespace rillclock
