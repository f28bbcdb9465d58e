#include "depressions.hpp"

#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_rows = 10'000;

}  // namespace

Depressions depressions_of(const TiledTravel& travel, const std::vector<Outlet>& outlets) {
    std::vector<Cell> paths;
    for (const Outlet& outlet : outlets) paths.insert(paths.end(), outlet.governing.cells.begin(), outlet.governing.cells.end());
    const TiledGround& ground = travel.ground();
    return find_depressions({.elevations = ground.elevations, .spill = travel.spill(), .codes = ground.forest.codes(), .ground = ground.ground},
                            paths, most_rows);
}

Notices notices_of(const Depressions& depressions, double metres_per_elevation_unit) {
    if (depressions.left_out == 0) return {};
    const double least_m = depressions.deepest_first.back().depth * metres_per_elevation_unit;
    return {{.code = "depressions-left-out",
             .text = "tables/depressions.csv holds the " + std::to_string(depressions.deepest_first.size()) + " deepest depressions; " +
                     std::to_string(depressions.left_out) + " more, none deeper than " + significant(least_m, 3) + " m, are left out",
             .value = static_cast<double>(depressions.left_out), .threshold = static_cast<double>(most_rows)}};
}

}  // namespace rillclock
