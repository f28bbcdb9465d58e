#include "reference/plain/basins.hpp"

#include <limits>
#include <vector>

namespace rillclock {
namespace {

constexpr std::uint32_t unlabelled = std::numeric_limits<std::uint32_t>::max();

Cell step(const Raster<FlowCode>& codes, Cell cell) {
    const auto d = static_cast<Direction>(codes[cell]);
    return neighbour(cell, d, codes.columns());
}

/// Labels the level undecided cells around `pit`, itself included.
void label_flat(const Elevations& z, const Raster<FlowCode>& codes, Cell pit, std::uint32_t number,
                Raster<std::uint32_t>& label) {
    std::vector<Cell> queue{pit};
    label[pit] = number;
    for (std::size_t next = 0; next < queue.size(); ++next) {
        for_each_neighbour(z, queue[next], [&](Cell beside, Direction) {
            if (codes[beside] != flow_undecided || z[beside] != z[pit] || label[beside] != unlabelled) return;
            label[beside] = number;
            queue.push_back(beside);
        });
    }
}

std::uint32_t label_ends(const Elevations& z, const Raster<FlowCode>& codes, Raster<std::uint32_t>& label) {
    std::uint32_t count = 0;
    const auto size = static_cast<Cell>(codes.size());
    for (Cell cell = 0; cell < size; ++cell) {
        if (codes[cell] == flow_root || codes[cell] == flow_void) label[cell] = 0;
        if (codes[cell] == flow_undecided && label[cell] == unlabelled) label_flat(z, codes, cell, ++count, label);
    }
    return count;
}

}  // namespace

Basins label_basins(const Elevations& z, const Raster<FlowCode>& codes) {
    Basins basins{.label = Raster<std::uint32_t>(z.rows(), z.columns(), unlabelled)};
    basins.count = label_ends(z, codes, basins.label);
    std::vector<Cell> way;
    const auto size = static_cast<Cell>(codes.size());
    for (Cell cell = 0; cell < size; ++cell) {
        Cell at = cell;
        for (; basins.label[at] == unlabelled; at = step(codes, at)) way.push_back(at);
        for (const Cell passed : way) basins.label[passed] = basins.label[at];
        way.clear();
    }
    return basins;
}

}  // namespace rillclock
