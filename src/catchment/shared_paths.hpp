#pragma once

#include <cstdint>
#include <span>
#include <unordered_map>
#include <vector>

#include "rillclock/catchment/flow_path.hpp"
#include "rillclock/raster/large_memory.hpp"
#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

/// Where a path begins and ends.
struct PathEnds {
    Cell head = no_cell;
    Cell end = no_cell;
};

/// A path as the functions on paths want it; memory that is used again for the next one.
struct LaidPath {
    PathCells cells;
    std::vector<PathPiece> pieces;
};

/// The cells of many flow paths. Paths run together and stay together, so that thousands of them to the points of one network have few
/// cells: each is walked, looked up and cut into its pieces once, however many paths run through it.
class SharedPaths {
public:
    /// Each head must drain through its end. A single cell is a path of itself. Cost: a pass over the tiles that the paths cross.
    SharedPaths(const TiledTravel& travel, std::span<const PathEnds> paths);

    /// A cell of any of the paths.
    [[nodiscard]] const PathCell& cell(Cell cell) const { return cells_[place_.at(cell)]; }
    /// Lays out one of the paths. Cost: its length.
    void lay(const PathEnds& path, LaidPath& laid) const;

private:
    void walk(const Raster<FlowCode>& codes, const PathEnds& path);
    [[nodiscard]] std::uint32_t step(const Raster<FlowCode>& codes, std::uint32_t at);
    std::uint32_t place_of(Cell cell);
    void look_up(const TiledTravel& travel);

    std::unordered_map<Cell, std::uint32_t> place_;
    std::vector<Cell> walked_;
    std::vector<std::uint32_t> below_;        ///< place of the next cell down; `unknown` where no path goes on
    std::vector<std::uint32_t> run_of_;       ///< cells with places one after the other that drain one to the other make a run
    std::vector<std::uint32_t> run_ends_;     ///< place of each run's last cell
    std::vector<PathCell, LargeMemory<PathCell>> cells_;
    std::vector<PathPiece, LargeMemory<PathPiece>> first_pieces_;     ///< of the steps that paths take, with position 0
    std::unordered_map<std::uint32_t, PathPiece> second_pieces_;   ///< where sheet flow ends within the step
};

}  // namespace rillclock
