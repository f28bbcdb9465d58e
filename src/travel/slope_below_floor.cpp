#include "rillclock/travel/slope_below_floor.hpp"

#include <optional>

#include "slope_rules.hpp"

namespace rillclock {
namespace {

/// Steps down the forest from a cell.
class WayDown {
public:
    WayDown(const TiledTravel& travel, Cell from, FixedLength flow_distance)
        : travel_(travel), at_(from), distance_(flow_distance) {}

    [[nodiscard]] ProfilePlace place() const {
        return {.distance_m = from_fixed(distance_), .level = travel_.spill()[at_],
                .concentrated = travel_.kind(at_) != GroundKind::overland};
    }

    std::optional<ProfilePlace> next() {
        const Raster<FlowCode>& codes = travel_.ground().forest.codes();
        if (!is_direction(codes[at_])) return std::nullopt;
        const auto d = static_cast<Direction>(codes[at_]);
        distance_ -= travel_.ground().ground.length(at_ / codes.columns(), d);
        at_ = neighbour(at_, d, codes.columns());
        return place();
    }

private:
    const TiledTravel& travel_;
    Cell at_;
    FixedLength distance_;
};

}  // namespace

float slope_with_floors(const TiledTravel& travel, Cell cell, FixedLength flow_distance, double overland_floor,
                        double channel_floor) {
    SlopeRules rules = travel.rules().slope;
    rules.overland_floor = overland_floor;
    rules.channel_floor = channel_floor;
    const SlopeAtTop at_top(rules, travel.ground().metres_per_elevation_unit);
    const GroundKind kind = travel.kind(cell);
    if (!is_direction(travel.ground().forest.codes()[cell])) return static_cast<float>(at_top.floor(kind));
    WayDown way(travel, cell, flow_distance);
    FlowProfile path([way]() mutable { return way.next(); });
    path.put(0, way.place());
    return at_top.slope(path, kind);
}

}  // namespace rillclock
