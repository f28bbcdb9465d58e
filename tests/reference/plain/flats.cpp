#include "reference/plain/flats.hpp"

#include <limits>

namespace rillclock {
namespace {

using Distances = Raster<std::uint32_t>;
constexpr std::uint32_t unreached = std::numeric_limits<std::uint32_t>::max();

template <class Visit>
void for_each_undecided(const Raster<FlowCode>& codes, Visit visit) {
    const auto size = static_cast<Cell>(codes.size());
    for (Cell cell = 0; cell < size; ++cell) {
        if (codes[cell] == flow_undecided) visit(cell);
    }
}

/// Breadth-first from the cells in `queue`, whose distance is set, over level undecided cells.
void spread(const Elevations& z, const Raster<FlowCode>& codes, std::vector<Cell> queue, Distances& distance) {
    for (std::size_t next = 0; next < queue.size(); ++next) {
        const Cell cell = queue[next];
        for_each_neighbour(z, cell, [&](Cell beside, Direction) {
            if (codes[beside] != flow_undecided || z[beside] != z[cell] || distance[beside] != unreached) return;
            distance[beside] = distance[cell] + 1;
            queue.push_back(beside);
        });
    }
}

/// Distances from the undecided cells that `is_seed(cell, beside)` picks by one of their neighbours; decided cells have 0.
template <class IsSeed>
Distances distances_from(const Elevations& z, const Raster<FlowCode>& codes, IsSeed is_seed) {
    Distances distance(z.rows(), z.columns(), 0);
    std::vector<Cell> seeds;
    for_each_undecided(codes, [&](Cell cell) {
        bool seed = false;
        for_each_neighbour(z, cell, [&](Cell beside, Direction) { seed = seed || is_seed(cell, beside); });
        distance[cell] = seed ? 1 : unreached;
        if (seed) seeds.push_back(cell);
    });
    spread(z, codes, std::move(seeds), distance);
    return distance;
}

/// The first level neighbour one step nearer; among these the one with the greatest `preference`.
template <class Preference>
FlowCode way_nearer(const Elevations& z, const Distances& distance, Cell cell, Preference preference) {
    FlowCode code = flow_undecided;
    std::uint32_t best = 0;
    for_each_neighbour(z, cell, [&](Cell beside, Direction d) {
        if (z[beside] != z[cell] || distance[beside] + 1 != distance[cell]) return;
        if (code != flow_undecided && preference(beside) <= best) return;
        best = preference(beside);
        code = flow_code(d);
    });
    return code;
}

}  // namespace

void settle_open_flats(const Elevations& z, Raster<FlowCode>& codes) {
    const Distances to_exit = distances_from(z, codes, [&](Cell cell, Cell beside) {
        return z[beside] == z[cell] && codes[beside] != flow_undecided;
    });
    const Distances from_higher = distances_from(z, codes, [&](Cell cell, Cell beside) { return z[beside] > z[cell]; });
    Raster<FlowCode> settled = codes;
    for_each_undecided(codes, [&](Cell cell) {
        if (to_exit[cell] == unreached) return;
        settled[cell] = way_nearer(z, to_exit, cell, [&](Cell beside) { return from_higher[beside]; });
    });
    codes = std::move(settled);
}

void settle_closed_flats(const Elevations& z, const std::vector<Cell>& entries, Raster<FlowCode>& codes) {
    Distances to_entry(z.rows(), z.columns(), unreached);
    for (const Cell entry : entries) to_entry[entry] = 0;
    spread(z, codes, entries, to_entry);
    for_each_undecided(codes, [&](Cell cell) {
        codes[cell] = way_nearer(z, to_entry, cell, [](Cell) { return 0U; });
    });
}

}  // namespace rillclock
