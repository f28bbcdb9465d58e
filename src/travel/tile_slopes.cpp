#include "tile_slopes.hpp"

#include <algorithm>
#include <atomic>
#include <optional>
#include <span>

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

/// The cells of a tile tree by tree, a tree being all that drains to an exit or a root within the tile: each cell after the one below it, and
/// all that drains to it right behind it. Two walks of the tile's order, neither of which asks a cell for its neighbours.
class TileTrees {
public:
    explicit TileTrees(const TileFlow& flow) {
        const auto order = flow.order();
        next_.assign(flow.size(), 1);
        for (const Local local : order) {
            const Local below = flow.down(local);
            if (below < ends_here) next_[below] += next_[local];
        }
        cells_.resize(order.size());
        Local first_free = 0;
        for (std::size_t i = order.size(); i-- > 0;) {
            const Local local = order[i];
            const Local below = flow.down(local);
            Local& free = below < ends_here ? next_[below] : first_free;
            const Local place = free;
            free += next_[local];
            next_[local] = place + 1;
            cells_[place] = local;
        }
    }

    [[nodiscard]] std::span<const Local> cells() const { return cells_; }

private:
    TileValues<Local> next_;    ///< first how many cells a cell's own tree has, then where the next one of them goes
    TileValues<Local> cells_;
};

class TileWalk {
public:
    TileWalk(const SlopeGround& ground, const TileDesk& desk, Raster<GroundKind>& kind)
        : ground_(ground), codes_(ground.in.forest.codes()), desk_(desk), kind_(kind),
          at_top_(ground.rules, ground.in.metres_per_elevation_unit), path_(Beyond{this, no_cell, 0}) {
        kind_here_.resize(desk.flow.size());
        slope_here_.assign(desk.flow.size(), 0.0F);
        position_.resize(desk.flow.size());
        for_each_row([this](std::int64_t row, std::int64_t first, std::size_t local, std::int64_t columns) {
            std::copy_n(kind_.row(row).data() + first, columns, kind_here_.data() + local);
        });
    }

    /// Visits each cell after the one below it, `path_` being the path below.
    void walk() {
        const TileTrees trees(desk_.flow);
        for (const Local local : trees.cells()) {
            const Local below = desk_.flow.down(local);
            const bool is_end = below >= ends_here;
            if (is_end) path_.begin({this, desk_.flow.cell(local), desk_.flow_distance[local]});
            position_[local] = is_end ? 0 : position_[below] + 1;
            visit(local);
        }
    }

    void write(Raster<float>& slope) const {
        for_each_row([&](std::int64_t row, std::int64_t first, std::size_t local, std::int64_t columns) {
            std::copy_n(slope_here_.data() + local, columns, slope.row(row).data() + first);
        });
    }

private:
    /// The places beyond an exit, over the whole raster; beyond a root there are none.
    struct Beyond {
        TileWalk* walk;
        Cell at;
        FixedLength distance;
        std::optional<ProfilePlace> operator()() { return walk->step_down(at, distance); }
    };

    /// Calls `look(row of the raster, first column, first cell of the tile, columns)`.
    template <class Look>
    void for_each_row(Look look) const {
        const Window& window = desk_.flow.window();
        for (std::int64_t r = 0; r < window.rows; ++r) {
            look(window.row + r, window.column, static_cast<std::size_t>(r * window.columns), window.columns);
        }
    }

    std::optional<ProfilePlace> step_down(Cell& at, FixedLength& distance) const {
        const FlowCode code = codes_[at];
        if (!is_direction(code)) return std::nullopt;
        const auto d = static_cast<Direction>(code);
        distance -= ground_.in.ground.length(at / codes_.columns(), d);
        at = neighbour(at, d, codes_.columns());
        return place(distance, ground_.spill[at], read_shared(kind_, at));
    }

    static ProfilePlace place(FixedLength distance, double level, GroundKind kind) {
        return {.distance_m = from_fixed(distance), .level = level, .concentrated = kind != GroundKind::overland};
    }

    void visit(Local local) {
        const GroundKind kind = kind_here_[local];
        path_.put(position_[local], place(desk_.flow_distance[local], desk_.spill[local], kind));
        const bool is_root = desk_.flow.down(local) == ends_here;
        slope_here_[local] = is_root ? static_cast<float>(at_top_.floor(kind)) : at_top_.slope(path_, kind);
        if (kind == GroundKind::water && at_top_.falls_within(path_)) write_shared(kind_, desk_.flow.cell(local), GroundKind::channel);
    }

    const SlopeGround& ground_;
    const Raster<FlowCode>& codes_;
    const TileDesk& desk_;
    Raster<GroundKind>& kind_;
    SlopeAtTop at_top_;
    FlowProfile<Beyond> path_;
    // Of the tile's own cells:
    TileValues<GroundKind> kind_here_;
    TileValues<float> slope_here_;
    TileValues<Local> position_;   ///< on the path of `path_`
};

}  // namespace

void find_tile_slopes(const SlopeGround& ground, const TileDesk& desk, Raster<GroundKind>& kind, Raster<float>& slope) {
    TileWalk walk(ground, desk, kind);
    walk.walk();
    walk.write(slope);
}

}  // namespace rillclock
