#include "tile_slopes.hpp"

#include <array>
#include <atomic>
#include <optional>
#include <utility>
#include <vector>

#include "slope_rules.hpp"

namespace rillclock {
namespace {

/// Another tile may make a river of its open water at the same time. Whether a cell is concentrated does not change by that.
GroundKind read_shared(Raster<GroundKind>& kind, Cell cell) {
    return std::atomic_ref<GroundKind>(kind[cell]).load(std::memory_order_relaxed);
}
void write_shared(Raster<GroundKind>& kind, Cell cell, GroundKind value) {
    std::atomic_ref<GroundKind>(kind[cell]).store(value, std::memory_order_relaxed);
}

class TileWalk {
public:
    TileWalk(const SlopeGround& ground, const TileDesk& desk, Raster<GroundKind>& kind, Raster<float>& slope)
        : ground_(ground), codes_(ground.in.forest.codes()), desk_(desk), kind_(kind), slope_(slope),
          at_top_(ground.rules, ground.in.metres_per_elevation_unit) {
        for (const Direction d : all_directions) offset_[flow_code(d)] = static_cast<Local>(row_step(d) * desk.flow.window().columns + column_step(d));
    }

    /// Walks the tree of cells above an exit or a root of the tile, each cell after the one below it.
    void walk_from(Local end) {
        Cell at = desk_.flow.cell(end);
        FixedLength distance = desk_.flow_distance[end];
        FlowProfile path([this, at, distance]() mutable { return place_beyond(at, distance); });
        pending_.push_back({end, 0});
        while (!pending_.empty()) {
            const auto [local, position] = pending_.back();
            pending_.pop_back();
            visit(path, local, position);
            push_upstream(local, position + 1);
        }
    }

private:
    struct Pending {
        Local local;
        std::size_t position;
    };

    /// Steps one cell down from `at` over the whole raster; nothing at a root.
    std::optional<ProfilePlace> place_beyond(Cell& at, FixedLength& distance) {
        const FlowCode code = codes_[at];
        if (!is_direction(code)) return std::nullopt;
        const auto d = static_cast<Direction>(code);
        distance -= ground_.in.ground.length(at / codes_.columns(), d);
        at = neighbour(at, d, codes_.columns());
        return place(at, distance, ground_.spill[at]);
    }

    ProfilePlace place(Cell cell, FixedLength distance, double level) {
        return {.distance_m = from_fixed(distance), .level = level,
                .concentrated = read_shared(kind_, cell) != GroundKind::overland};
    }

    template <class Path>
    void visit(Path& path, Local local, std::size_t position) {
        const Cell cell = desk_.flow.cell(local);
        path.put(position, place(cell, desk_.flow_distance[local], desk_.spill[local]));
        const GroundKind kind = read_shared(kind_, cell);
        const bool is_root = !is_direction(desk_.flow.code(local));
        slope_[cell] = is_root ? static_cast<float>(at_top_.floor(kind)) : at_top_.slope(path, kind);
        if (kind == GroundKind::water && at_top_.falls_within(path)) write_shared(kind_, cell, GroundKind::channel);
    }

    void push_upstream(Local local, std::size_t position) {
        const Window& window = desk_.flow.window();
        const auto columns = static_cast<Local>(window.columns);
        const RowColumn at{local / columns, local % columns};
        const bool is_inner = at.row > 0 && at.column > 0 && at.row + 1 < window.rows && at.column + 1 < window.columns;
        for (const Direction d : all_directions) {
            if (!is_inner) {
                const RowColumn beside = neighbour(at, d);
                if (beside.row < 0 || beside.row >= window.rows || beside.column < 0 || beside.column >= window.columns) continue;
            }
            const Local up = local + offset_[flow_code(d)];
            if (desk_.flow.code(up) == flow_code(opposite(d))) pending_.push_back({up, position});
        }
    }

    const SlopeGround& ground_;
    const Raster<FlowCode>& codes_;
    const TileDesk& desk_;
    Raster<GroundKind>& kind_;
    Raster<float>& slope_;
    SlopeAtTop at_top_;
    std::array<Local, 8> offset_{};   ///< to the neighbour in a direction, modulo 2³²
    std::vector<Pending> pending_;
};

}  // namespace

void find_tile_slopes(const SlopeGround& ground, const TileDesk& desk, Raster<GroundKind>& kind, Raster<float>& slope) {
    TileWalk walk(ground, desk, kind, slope);
    for (const Local exit : desk.flow.exits()) walk.walk_from(exit);
    for (const Local local : desk.flow.order()) {
        if (desk.flow.code(local) == flow_root) walk.walk_from(local);
    }
}

}  // namespace rillclock
