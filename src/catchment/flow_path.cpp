#include "rillclock/catchment/flow_path.hpp"

#include <algorithm>
#include <limits>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

/// Waves over open water and ponded ground have a speed without any slope.
bool is_on_floor(const PathPiece& piece, const SlopeRules& rules) {
    if (piece.part.ponded || piece.part.regime == Regime::water) return false;
    const bool overland = piece.part.regime == Regime::sheet || piece.part.regime == Regime::shallow;
    const double floor = std::max(overland ? rules.overland_floor : rules.channel_floor, least_slope);
    // Slopes are kept in single precision; so is the floor where it is one.
    return piece.part.slope <= static_cast<double>(static_cast<float>(floor));
}

PathPiece piece_of(const StepPart& part, std::size_t position, const StepView& step, std::uint8_t surface) {
    PathPiece piece;
    piece.part = part;
    piece.position = position;
    piece.surface = surface;
    piece.area = step.area;
    if (part.regime == Regime::channel) piece.reach = step.reach;
    return piece;
}

}  // namespace

std::vector<Cell> flow_path(const Raster<FlowCode>& codes, Cell head, Cell end) {
    std::vector<Cell> path{head};
    while (path.back() != end) {
        const FlowCode code = codes[path.back()];
        if (!is_direction(code)) throw bug("a flow path misses the point it was asked for");
        const auto d = static_cast<Direction>(code);
        path.push_back(neighbour(path.back(), d, codes.columns()));
    }
    return path;
}

void add_pieces(const PathGround& ground, const PathCell& cell, std::size_t position, std::vector<PathPiece>& pieces) {
    const StepParts parts = step_parts(cell.step, ground.rules);
    pieces.push_back(piece_of(parts.first, position, cell.step, cell.surface));
    if (parts.second.regime == Regime::none) return;
    const double share = parts.first.length_m / from_fixed(cell.step.length);
    pieces.back().share_to = share;
    pieces.push_back(piece_of(parts.second, position, cell.step, cell.surface));
    pieces.back().share_from = share;
}

std::vector<PathPiece> path_pieces(const PathGround& ground, std::span<const PathCell> path) {
    std::vector<PathPiece> pieces;
    pieces.reserve(path.size() + 1);   // sheet flow ends within one step, as a rule
    for (std::size_t position = 0; position + 1 < path.size(); ++position) add_pieces(ground, path[position], position, pieces);
    return pieces;
}

double PathSummary::fall_ratio() const {
    return fall_m > 0 ? slope_length_m / fall_m : std::numeric_limits<double>::quiet_NaN();
}

double PathSummary::equal_area_slope() const {
    const double length_m = from_fixed(length);
    return length > 0 ? 2.0 * profile_area_m2 / (length_m * length_m) : 0.0;
}

double PathSummary::share_of_length(double part_m) const { return length > 0 ? part_m / from_fixed(length) : 0.0; }

namespace {

double profile_area_m2(const PathGround& ground, std::span<const PathCell> path) {
    double area = 0.0;
    for (std::size_t i = 0; i + 1 < path.size(); ++i) {
        const double heights = path[i].spill + path[i + 1].spill - 2.0 * path.back().spill;
        area += 0.5 * heights * from_fixed(path[i].flow_distance - path[i + 1].flow_distance);
    }
    return area * ground.metres_per_elevation_unit;
}

}  // namespace

PathSummary summary_of(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces) {
    PathSummary summary;
    summary.length = path.front().flow_distance - path.back().flow_distance;
    summary.time = path.front().time_to_root - path.back().time_to_root;
    summary.fall_m = (path.front().spill - path.back().spill) * ground.metres_per_elevation_unit;
    summary.profile_area_m2 = profile_area_m2(ground, path);
    for (const PathPiece& piece : pieces) {
        summary.slope_length_m += piece.part.slope * piece.part.length_m;
        if (piece.part.ponded) summary.ponded_length_m += piece.part.length_m;
        if (is_on_floor(piece, ground.rules.slope)) summary.floor_length_m += piece.part.length_m;
    }
    return summary;
}

}  // namespace rillclock
