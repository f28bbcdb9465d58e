#include "ground_kind.hpp"

#include <algorithm>

namespace rillclock {
namespace {

/// A channel is never made by fewer cells than this, however small the stated area.
constexpr FixedArea least_channel_cells = 20;

}  // namespace

GroundKind kind_of(const SurfaceHydraulics& surface, const ChannelRules& rules, FixedArea contributing, FixedArea cell_area) {
    if (surface.water_depth) return GroundKind::water;
    if (!rules.from_area) return GroundKind::overland;
    const FixedArea from = std::max(to_fixed_area(in_square_metres(*rules.from_area)), least_channel_cells * cell_area);
    return contributing >= from ? GroundKind::channel : GroundKind::overland;
}

}  // namespace rillclock
