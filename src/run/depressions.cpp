#include "depressions.hpp"

#include "rillclock/core/number_text.hpp"
#include "rillclock/raster/cell_outlines.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_rows = 10'000;
constexpr std::size_t most_outlines = 1'000;

DepressionGround depression_ground(const TiledTravel& travel) {
    const TiledGround& ground = travel.ground();
    return {.elevations = ground.elevations, .spill = travel.spill(), .codes = ground.forest.codes(), .ground = ground.ground};
}

}  // namespace

Depressions depressions_of(const TiledTravel& travel, const std::vector<Outlet>& outlets) {
    std::vector<Cell> paths;
    for (const Outlet& outlet : outlets) paths.insert(paths.end(), outlet.governing.cells.begin(), outlet.governing.cells.end());
    return find_depressions(depression_ground(travel), paths, most_rows);
}

std::vector<OutlinedDepression> outlined(const TiledTravel& travel, const Grid& grid, const std::vector<Depression>& deepest_first) {
    DepressionCells cells(depression_ground(travel));
    std::vector<OutlinedDepression> found;
    for (std::size_t i = 0; i < deepest_first.size(); ++i) {
        const Depression& depression = deepest_first[i];
        if (i >= most_outlines && !depression.on_path) continue;
        found.push_back({.number = i + 1, .depression = depression, .outline = cell_outlines(cells.of(depression), grid)});
    }
    return found;
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
