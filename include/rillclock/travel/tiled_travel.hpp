#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/forest/tile_sweep.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/terrain/elevation_store.hpp"
#include "rillclock/terrain/spill_store.hpp"
#include "rillclock/tiles/tile_memory.hpp"
#include "rillclock/travel/root_area.hpp"
#include "rillclock/travel/step.hpp"

namespace rillclock {

/// The ground that travel times are made on, cut into tiles.
struct TiledGround {
    const TiledForest& forest;
    const Ground& ground;
    const ElevationStore& elevations;
    double metres_per_elevation_unit = 1.0;
    const SurfaceTable& surface;
    std::span<const Cell> mapped_channels = {};   ///< channels whatever drains to them and whatever covers them
    const ChannelReaches* reaches = nullptr;      ///< of channel cells that have one of their own; null where none has
    const Raster<std::uint8_t>* rain_zones = nullptr;   ///< zone of each cell, where the study has zones
};

/// A label on a cell: a design point's number.
struct CellLabel {
    Cell cell = no_cell;
    std::uint32_t number = 0;
};

/// Everything about the cells of one tile, by `Local`; room that is used for tile after tile.
struct TileDesk {
    TileFlow flow;
    TilePassage passage;                       ///< of work that needs no more of the flow than that
    TileValues<FixedLength> length;            ///< of the step out of the cell
    TileValues<FixedLength> index_step;        ///< what the step adds to the sheet index
    TileValues<double> elevation;              ///< elevation units; NaN where void
    TileValues<double> spill;
    TileValues<FixedArea> area;
    TileValues<FixedLength> from_divide;
    TileValues<FixedLength> sheet_index;
    TileValues<FixedLength> flow_distance;     ///< to the root
    TileValues<FixedTime> sheet_time;          ///< T at the sheet index, as SharedSheet keeps it
    TileValues<StepTime> step;                 ///< time of the step out of the cell
    TileValues<Regime> regime;                 ///< in which the step begins
    TileValues<FixedTime> storm;               ///< A to the root
    TileValues<FixedTime> fixed;               ///< B to the root
    TileValues<std::uint32_t> label;           ///< labels of the tile's own cells
    TileValues<std::uint32_t> owner;           ///< first label on the way down

    /// Time from a cell of the tile to its root.
    [[nodiscard]] StepTime time_to_root(Local cell) const { return {fixed[cell], storm[cell]}; }
};

/// Travel times over tiles: all that the plain travel field (tests/reference/plain) computes cell by cell, in passes over tiles,
/// bit for bit.
///
/// pass               local work                                            kept a cell
/// 1 areas            down: area, distance from the divide; up: distance    –
///                    to the root, spill elevation
/// 2 kinds            spill elevation, kind of ground                       kind 1, spill as SpillStore
/// 3 slopes           slope ahead; down: sheet index                        slope 4
/// 4 times            step times where water of other tiles passes; up: A, B –
/// Between two passes stands one sweep over the exits of all tiles. Pass 4 looks at no cell that is not passed: what reaches the passed cells of the
/// tile's own water is kept in passes 1 and 3 (PassedValues), 24 bytes for each, until the times are found, where there is room for them. What is
/// not kept is made again from the border values by `read_tile`, for the last pass over the raster and for the few tiles that flow paths cross.
class TiledTravel {
public:
    /// Runs the four passes.
    TiledTravel(const TiledGround& ground, const TravelRules& rules, const Executor& executor);

    /// The roots with what drains to them, by cell.
    [[nodiscard]] const std::vector<RootArea>& roots() const { return roots_; }
    [[nodiscard]] const TiledGround& ground() const { return in_; }
    [[nodiscard]] const TravelRules& rules() const { return rules_; }
    [[nodiscard]] const Executor& executor() const { return executor_; }
    /// Desks for whoever works on tiles; those of the passes, so that no more are made than there are threads.
    [[nodiscard]] Workspaces<TileDesk>& desks() const { return desks_; }
    [[nodiscard]] const SpillStore& spill() const { return spill_; }
    /// Slope ahead of a cell, rise over run.
    [[nodiscard]] float slope(Cell cell) const { return slope_[cell]; }
    /// What a cell's ground asks of the water.
    [[nodiscard]] GroundKind kind(Cell cell) const { return kind_[cell]; }

    /// Reads the areas of a tile's cells alone, for placing points.
    void read_areas(Tile tile, TileDesk& desk) const;
    /// Makes everything about a tile's cells but labels and owners.
    void read_tile(Tile tile, TileDesk& desk) const;
    /// As `read_tile`, for those who look at few cells of the tile: no step has its time and regime, and times to the root are those of
    /// `cells` and of what lies below them in the tile alone.
    void read_ways(Tile tile, TileDesk& desk, std::span<const Cell> cells) const;
    /// Makes the times once more, with other reaches of channels; all else stays. `reaches` must outlive the times.
    void time_again(const ChannelReaches& reaches);
    /// The step out of a cell of a tile that was read.
    [[nodiscard]] StepView step_view(const TileDesk& desk, Local local) const { return step_view(desk, local, desk.flow.cell(local)); }

private:
    struct OwnOfPassed;
    [[nodiscard]] StepView step_view(const TileDesk& desk, Local local, Cell cell) const;
    [[nodiscard]] StepView index_view(const TileDesk& desk, Local local, Cell cell) const;
    [[nodiscard]] StepOutcome outcome_with_shared(TileDesk& desk, Local local, Cell cell) const;
    void find_areas(OwnOfPassed& own);
    void find_kinds();
    void find_slopes(OwnOfPassed& own);
    void find_times(OwnOfPassed* own);

    [[nodiscard]] auto area_channel(const TileFlow& flow) const {
        const FixedArea everywhere = in_.ground.is_uniform() ? in_.ground.cell_area(0) : 0;
        return down::Sum{[this, &flow, everywhere](Local cell) {
            return everywhere != 0 ? everywhere : in_.ground.cell_area(flow.row(cell));
        }};
    }
    [[nodiscard]] static auto divide_channel(const TileDesk& desk) {
        return down::Max{[&desk](Local cell) { return desk.length[cell]; }};
    }
    [[nodiscard]] static auto distance_channel(const TileDesk& desk) {
        return up::Add{[&desk](Local cell) { return desk.length[cell]; }};
    }
    [[nodiscard]] static auto spill_channel(const TileDesk& desk) {
        return up::Max{[&desk](Local cell) { return desk.elevation[cell]; }};
    }
    [[nodiscard]] static auto index_channel(const TileDesk& desk) {
        return down::Max{[&desk](Local cell) { return desk.index_step[cell]; }};
    }
    [[nodiscard]] static auto storm_channel(const TileDesk& desk) {
        return up::Add{[&desk](Local cell) { return desk.step[cell].storm; }};
    }
    [[nodiscard]] static auto fixed_channel(const TileDesk& desk) {
        return up::Add{[&desk](Local cell) { return desk.step[cell].fixed; }};
    }
    void read_step_ground(Tile tile, TileDesk& desk) const;
    void read_passed_ground(Tile tile, TileDesk& desk, OwnOfPassed& own);
    void read_steps(Tile tile, TileDesk& desk) const;
    void time_way(Tile tile, TileDesk& desk, std::span<const Local> way) const;
    void read_elevations(TileDesk& desk) const;
    void read_spill(Tile tile, TileDesk& desk) const;
    void read_lengths(TileDesk& desk) const;
    void read_index_steps(TileDesk& desk) const;

    TiledGround in_;
    TravelRules rules_;
    const Executor& executor_;
    mutable Workspaces<TileDesk> desks_;
    DownBorders<std::int64_t> area_;
    DownBorders<std::int64_t> from_divide_;
    DownBorders<std::int64_t> sheet_index_;
    UpBorders<std::int64_t> flow_distance_;
    UpBorders<double> spill_border_;
    UpBorders<std::int64_t> storm_;
    UpBorders<std::int64_t> fixed_;
    SpillStore spill_;
    Raster<GroundKind> kind_;
    Raster<float> slope_;
    std::vector<RootArea> roots_;
};

/// The first label on the way down of every cell, over tiles.
class TiledOwners {
public:
    TiledOwners(const TiledForest& forest, std::vector<CellLabel> labels, const Executor& executor);

    /// Labels and owners of a tile whose flow was read into the desk.
    void read_tile(Tile tile, TileDesk& desk) const;
    /// The owner of one cell; 0 where no label lies on its way. Cost: its way through its tile.
    [[nodiscard]] std::uint32_t owner_of(Cell cell) const;

private:
    void put_labels(Tile tile, const TileFrame& frame, TileDesk& desk) const;

    const TiledForest& forest_;
    std::vector<CellLabel> labels_;              ///< by tile, then by cell
    std::vector<std::size_t> first_of_tile_;
    UpBorders<std::uint32_t> owner_;
};

}  // namespace rillclock
