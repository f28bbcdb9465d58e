#include "rillclock/catchment/point_way.hpp"

namespace rillclock {

double PointWay::share(Regime regime) const {
    return length > 0 ? regime_length_m[static_cast<std::size_t>(regime)] / from_fixed(length) : 0.0;
}

PointWay way_of(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces) {
    PointWay way;
    if (path.empty()) return way;
    for (const PathCell& cell : path) way.cells.push_back(cell.cell);
    way.length = path.front().flow_distance - path.back().flow_distance;
    way.time = path.front().time_to_root - path.back().time_to_root;
    way.fall_m = (path.front().spill - path.back().spill) * ground.metres_per_elevation_unit;
    for (const PathPiece& piece : pieces) {
        way.regime_length_m[static_cast<std::size_t>(piece.part.regime)] += piece.part.length_m;
    }
    return way;
}

}  // namespace rillclock
