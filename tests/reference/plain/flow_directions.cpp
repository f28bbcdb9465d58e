#include "reference/plain/flow_directions.hpp"

#include <cmath>
#include <utility>

#include "reference/plain/sweeps.hpp"
#include "reference/plain/flats.hpp"
#include "reference/plain/passes.hpp"

namespace rillclock {
namespace {

Cell step(const Raster<FlowCode>& codes, Cell cell, Direction d) {
    return neighbour(cell, d, codes.columns());
}

struct WayOut {
    Cell cell;      ///< of the basin itself
    FlowCode code;  ///< out of it
};

/// A pass as seen from the basin whose water crosses it.
WayOut way_out(const Raster<FlowCode>& codes, const Pass& pass, std::uint32_t basin) {
    if (pass.basin == basin) return {pass.cell, pass.code};
    const auto d = static_cast<Direction>(pass.code);
    return {step(codes, pass.cell, d), flow_code(opposite(d))};
}

/// Turns round the way from a pass down to the lowest ground of its basin; returns the first cell of that ground.
Cell reverse_way(Raster<FlowCode>& codes, WayOut out) {
    for (;;) {
        const FlowCode before = std::exchange(codes[out.cell], out.code);
        if (before == flow_undecided) return out.cell;
        const auto d = static_cast<Direction>(before);
        out = {step(codes, out.cell, d), flow_code(opposite(d))};
    }
}

}  // namespace

void open_basins(const Elevations& z, const Basins& basins, Raster<FlowCode>& codes) {
    const std::vector<Pass> ways = passes_to_outside(z, basins);
    std::vector<Cell> entries;
    for (std::uint32_t basin = 1; basin <= basins.count; ++basin) {
        entries.push_back(reverse_way(codes, way_out(codes, ways[basin], basin)));
    }
    settle_closed_flats(z, entries, codes);
}

FlowForest flow_forest_of(const Elevations& z, const Ground& ground) {
    Raster<FlowCode> codes = steepest_descent(z, ground);
    settle_open_flats(z, codes);
    open_basins(z, label_basins(z, codes), codes);
    return FlowForest(std::move(codes));
}

Elevations spill_elevations(const FlowForest& forest, const Elevations& z) {
    auto [spill] = sweep_up(forest, up::Max{[&](Cell cell) { return z[cell]; }});
    for (std::size_t i = 0; i < spill.values().size(); ++i) {
        if (std::isnan(z.values()[i])) spill.values()[i] = z.values()[i];
    }
    return std::move(spill);
}

}  // namespace rillclock
