#pragma once

#include <vector>

#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/terrain/elevation_store.hpp"
#include "rillclock/terrain/spill_store.hpp"

namespace rillclock {

/// Ground below its spill elevation: neighbouring cells that fill to one level before any water passes on.
struct Depression {
    double depth = 0.0;       ///< greatest, in elevation units
    double volume = 0.0;      ///< up to the spill elevation, in elevation units times square metres
    FixedArea area = 0;
    std::int64_t cells = 0;
    Cell deepest = no_cell;   ///< the smallest of its deepest cells
    Cell pass = no_cell;      ///< where its water goes over: the first cell on the way down that is not part of it
    bool on_path = false;     ///< whether one of the stated paths runs through it
};

/// The deepest depressions of a terrain.
struct Depressions {
    std::vector<Depression> deepest_first;   ///< those of one depth by their deepest cell
    std::size_t left_out = 0;                ///< shallower than all of these
};

/// What depressions are found on.
struct DepressionGround {
    const ElevationStore& elevations;
    const SpillStore& spill;
    const Raster<FlowCode>& codes;
    const Ground& ground;
};

/// Finds the depressions of a terrain, the deepest `most` of them. `paths` are cells of the paths that `on_path` is about.
///
/// A depression is a connected set (over all eight neighbours) of cells of one spill elevation that lie below it. Cost: linear;
/// two bits a cell, and the cells of the largest depression.
[[nodiscard]] Depressions find_depressions(const DepressionGround& ground, const std::vector<Cell>& paths, std::size_t most);

/// Finds the cells of depressions once more: they are too many to be kept while all depressions are found.
class DepressionCells {
public:
    explicit DepressionCells(const DepressionGround& ground);
    /// All cells of a depression that was found on the same ground, in no order of meaning. Cost: linear in them; a bit for each cell of the raster
    /// while this lives.
    [[nodiscard]] std::vector<Cell> of(const Depression& depression);

private:
    DepressionGround ground_;
    std::vector<bool> seen_;
};

}  // namespace rillclock
