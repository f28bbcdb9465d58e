#pragma once

#include <span>
#include <vector>

#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/travel/tiled_travel.hpp"
#include "rillclock/travel/travel_setting.hpp"

namespace rillclock {

/// For each setting, the cell of each subarea that would be the last to arrive if every step took as many times longer as its kind and
/// surface do under that setting.
///
/// Which cells those are is an estimate (where sheet flow ends is kept, and sums of sheet flow are scaled cell by cell); it serves to
/// keep few heads whose times are then found exactly (`HeadPaths`). Of equal cells the smaller index counts. `own_areas` are those of the
/// subareas, by the owners' numbers − 1. Cost: one pass over the raster, with a sweep for every eight settings; kept meanwhile, eight bytes
/// a setting for each way by which heads that lie close together leave their tile.
///
/// Returns the cells of all subareas, each once, in the order of their indices.
[[nodiscard]] std::vector<Cell> candidate_heads(const TiledTravel& travel, const TiledOwners& owners,
                                                std::span<const FixedArea> own_areas, std::span<const TravelSetting> settings);

}  // namespace rillclock
