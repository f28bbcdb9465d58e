#include "tile_basins.hpp"

#include <algorithm>

#include "level_ground.hpp"
#include "rillclock/core/vectorised.hpp"
#include "rillclock/graph/disjoint_sets.hpp"

namespace rillclock {
namespace {

/// What to add to a position for each code, and, for roots and voids, whose way ends outside, not to.
using Steps = std::array<Position, 16>;

RILLCLOCK_VECTORISED
void point_row(const FlowCode* codes, const Steps& steps, Position first, Position outside, Position* __restrict ends,
               Position columns) {
    for (Position i = 0; i < columns; ++i) {
        const auto code = static_cast<Position>(codes[i]);
        const Position next = first + i + steps[code & 15U];
        ends[i] = code == flow_root || code == flow_void ? outside : next;
    }
}

/// One turn; whether anything changed. An end may be read before or after it was lowered in the same turn: both lie on
/// the way.
RILLCLOCK_VECTORISED
bool jump(Position* ends, std::size_t first, std::size_t last) {
    Position changes = 0;
#pragma GCC ivdep
    for (std::size_t i = first; i < last; ++i) {
        const Position end = ends[i];
        const Position further = ends[end];
        changes |= end ^ further;
        ends[i] = further;
    }
    return changes != 0;
}

void point_to_next(const Patch<FlowCode>& codes, Patch<Position>& ends) {
    const PatchShape& shape = codes.shape();
    ends.resize(shape, 0);
    shape.for_each_halo([&](Position p) { ends[p] = codes[p] == flow_void ? shape.size() : p; });
    ends[shape.size()] = shape.size();
    Steps steps{};
    std::copy(shape.steps().begin(), shape.steps().end(), steps.begin());
    for (std::int64_t row = 0; row < shape.rows(); ++row) {
        point_row(codes.at(row, 0), steps, shape.position(row, 0), shape.size(), ends.at(row, 0),
                  static_cast<Position>(shape.columns()));
    }
}

/// Gathers the part of a closed flat that lies in the tile under its first cell; whether there are others.
template <class Z>
bool gather_flat(Desk<Z>& desk, Position first) {
    desk.queue.assign(1, first);
    for (std::size_t next = 0; next < desk.queue.size(); ++next) {
        for (const Position step : desk.z.shape().steps()) {
            const Position beside = desk.queue[next] + step;
            const bool same =
                desk.codes[beside] == flow_undecided && desk.z[beside] == desk.z[first] && beside != first;
            if (!same || desk.numbers[beside] != beside || !desk.z.shape().is_in_tile(beside)) continue;
            desk.numbers[beside] = first;
            desk.queue.push_back(beside);
        }
    }
    return desk.queue.size() > 1;
}

template <class Z>
void gather_lowest(Desk<Z>& desk, bool level, TileBasins& basins) {
    const PatchShape& shape = desk.codes.shape();
    for (std::int64_t row = 0; row < shape.rows(); ++row) {
        const Position last = shape.position(row, shape.columns());
        for (Position p = shape.position(row, 0); p < last; ++p) {
            if (desk.codes[p] != flow_undecided || desk.numbers[p] != p) continue;
            basins.lowest.push_back(p);
            if (level && gather_flat(desk, p)) basins.has_closed_flat = true;
        }
    }
}

void follow_ways(Patch<Position>& ends) {
    const PatchShape& shape = ends.shape();
    const std::size_t first = shape.position(0, 0);
    const std::size_t last = std::size_t{shape.position(shape.rows() - 1, shape.columns() - 1)} + 1;
    while (jump(ends.data(), first, last)) {
    }
}

void collect_rim(const Patch<Position>& ends, TileBasins& basins) {
    const PatchShape& shape = ends.shape();
    Position before = shape.size() + 1;
    shape.for_each_rim([&](Position p) {
        if (ends[p] != std::exchange(before, ends[p])) basins.rim_ends.push_back(ends[p]);
    });
    std::sort(basins.rim_ends.begin(), basins.rim_ends.end());
    basins.rim_ends.erase(std::unique(basins.rim_ends.begin(), basins.rim_ends.end()), basins.rim_ends.end());
    basins.rim.resize(rim_places(shape));
    shape.for_each_rim([&](Position p) {
        const auto found = std::lower_bound(basins.rim_ends.begin(), basins.rim_ends.end(), ends[p]);
        basins.rim[rim_place(shape, shape.row_column(p))] = static_cast<std::uint32_t>(found - basins.rim_ends.begin());
    });
}

/// Where closed flats go on in other tiles.
template <class Z>
void collect_level_joins(const Desk<Z>& desk, TileBasins& basins) {
    const PatchShape& shape = desk.z.shape();
    shape.for_each_rim([&](Position p) {
        if (desk.codes[p] != flow_undecided) return;
        for (const Position step : shape.steps()) {
            const Position beside = p + step;
            if (desk.codes[beside] != flow_undecided || desk.z[beside] != desk.z[p] || shape.is_in_tile(beside))
                continue;
            basins.has_closed_flat = true;
            basins.level_joins.emplace_back(basins.rim[rim_place(shape, shape.row_column(p))], shape.cell(beside));
        }
    });
}

/// Place among all rim ends of the end of a rim cell's way.
Node rim_end_of(const TileGrid& tiles, const std::vector<TileBasins>& basins, const std::vector<Node>& first,
                Cell cell) {
    const RowColumn at{cell / tiles.columns(), cell % tiles.columns()};
    const Tile tile = tiles.tile_of(at);
    const PatchShape shape(tiles.window(tile), tiles.columns());
    const RowColumn in_tile{at.row - shape.window().row, at.column - shape.window().column};
    return first[tile] + basins[tile].rim[rim_place(shape, in_tile)];
}

/// Names each set by a number, that of node 0 being 0.
RimBasins number_sets(DisjointSets& sets, std::vector<Node> first, std::size_t nodes) {
    RimBasins joined{.first = std::move(first), .basin = std::vector<Node>(nodes)};
    for (Node node = 0; node < nodes; ++node) {
        const Node representative = sets.find(node);
        joined.basin[node] = representative == node ? static_cast<Node>(joined.count++) : joined.basin[representative];
    }
    return joined;
}

}  // namespace

template <class Z>
TileBasins find_ends(Desk<Z>& desk, bool level) {
    TileBasins basins;
    point_to_next(desk.codes, desk.numbers);
    gather_lowest(desk, level, basins);
    follow_ways(desk.numbers);
    collect_rim(desk.numbers, basins);
    if (level) collect_level_joins(desk, basins);
    return basins;
}

RimBasins join_basins(const TileGrid& tiles, const std::vector<TileBasins>& basins) {
    std::vector<Node> first;
    Node nodes = 1;  // node 0 is the outside
    for (const TileBasins& of_tile : basins) {
        first.push_back(nodes);
        nodes += static_cast<Node>(of_tile.rim_ends.size());
    }
    DisjointSets sets(nodes);
    for (Tile tile = 0; tile < tiles.count(); ++tile) {
        const PatchShape shape(tiles.window(tile), tiles.columns());
        for (std::size_t i = 0; i < basins[tile].rim_ends.size(); ++i) {
            const Position end = basins[tile].rim_ends[i];
            const Node node = first[tile] + static_cast<Node>(i);
            if (end == shape.size()) {
                sets.join(node, 0);
            } else if (!shape.is_in_tile(end)) {
                sets.join(node, rim_end_of(tiles, basins, first, shape.cell(end)));
            }
        }
        for (const auto& [end, beyond] : basins[tile].level_joins) {
            sets.join(first[tile] + end, rim_end_of(tiles, basins, first, beyond));
        }
    }
    return number_sets(sets, std::move(first), nodes);
}

Node basin_of(const TileGrid& tiles, const std::vector<TileBasins>& basins, const RimBasins& joined, Cell rim_cell) {
    return joined.basin[rim_end_of(tiles, basins, joined.first, rim_cell)];
}

template TileBasins find_ends(Desk<float>&, bool);
template TileBasins find_ends(Desk<double>&, bool);

}  // namespace rillclock
