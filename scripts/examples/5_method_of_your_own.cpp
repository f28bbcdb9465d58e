// A method of your own: what a step takes is yours, and the library lets it flow down any terrain, tile by tile, on all threads.
//
// Here water runs at the speed that its land cover states, whatever the slope: 0.1 m/s over grass, 1 m/s along streets.
#include <algorithm>
#include <cmath>
#include <cstdint>
#include <cstdio>
#include <utility>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/forest/tile_sweep.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/terrain/tiled_directions.hpp"

using namespace rillclock;

namespace {

/// Room for one tile, used for one after another: the flow within it, and what is swept over it.
struct Desk {
    TileFlow flow;
    TileValues<FixedTime> time;
};

/// Time to where the water leaves the data, as the sum of steps on the way down. Sums are of integers (2⁻²⁰ s), so that
/// no figure depends on tiles or threads.
class TimeByCover {
public:
    TimeByCover(const TiledForest& forest, const Ground& ground, const Raster<double>& metres_per_second)
        : forest_(forest), ground_(ground), speed_(metres_per_second) {}

    /// The step out of a cell, in fixed point.
    [[nodiscard]] auto channel(const Desk& desk) const {
        return up::Add{[this, &desk](Local cell) -> FixedTime {
            const FlowCode code = desk.flow.code(cell);
            if (!is_direction(code)) return 0;
            const double length_m = from_fixed(ground_.length(desk.flow.row(cell), static_cast<Direction>(code)));
            return to_fixed(length_m / speed_[desk.flow.cell(cell)]);
        }};
    }

    [[nodiscard]] Raster<double> seconds_to_root(const Executor& executor) const {
        using Channel = decltype(channel(std::declval<const Desk&>()));
        UpBorders<FixedTime> below(forest_);
        Workspaces<Desk> desks;
        // Each tile alone, then once over the cells that drain from tile to tile, then each tile again.
        for_each_tile(forest_, executor, desks, [&](Tile tile, Desk& desk) { collect_up(tile, desk.flow, below.part(channel(desk), desk.time)); });
        below.solve<Channel>();
        Raster<double> seconds(speed_.rows(), speed_.columns());
        for_each_tile(forest_, executor, desks, [&](Tile tile, Desk& desk) {
            fill_up(tile, desk.flow, std::as_const(below).part(channel(desk), desk.time));
            for (Local cell = 0; cell < desk.flow.size(); ++cell) seconds[desk.flow.cell(cell)] = from_fixed(desk.time[cell]);
        });
        return seconds;
    }

private:
    const TiledForest& forest_;
    const Ground& ground_;
    const Raster<double>& speed_;
};

}  // namespace

int main() {
    // Ground that falls to the south and to a street in its middle column, cells of 2 m.
    Raster<double> elevations(300, 101);
    Raster<double> speed(300, 101, 0.1);
    for (std::int64_t row = 0; row < 300; ++row) {
        for (std::int64_t column = 0; column < 101; ++column)
            elevations(row, column) = 50.0 - 0.02 * static_cast<double>(row) + 0.5 * std::abs(static_cast<double>(column) - 50.0);
        speed(row, 50) = 1.0;
    }
    const Ground ground = Ground::planar(metres(2), metres(2));
    const Executor executor;
    const TileGrid tiles(elevations.rows(), elevations.columns());
    const Raster<FlowCode> codes = flow_codes(elevations, ground, tiles, executor);
    const TiledForest forest(codes, tiles, executor);
    const Raster<double> seconds = TimeByCover(forest, ground, speed).seconds_to_root(executor);
    // From the far corner: 50 steps of 2 m over grass, then down the street.
    std::printf("from the north-western corner the water takes %.0f s\n", seconds(0, 0));
    return 0;
}
