#include "rillclock/catchment/arrival_tally.hpp"

#include <algorithm>
#include <optional>
#include <unordered_map>

namespace rillclock {
namespace {

/// Whether any cell of a window, or beside it, has the edge of the data or a void beside it.
bool touches_edge(const Raster<FlowCode>& codes, const Window& window) {
    const std::int64_t top = window.row - 1;
    const std::int64_t bottom = window.row + window.rows;
    const std::int64_t left = window.column - 1;
    const std::int64_t right = window.column + window.columns;
    if (top < 0 || left < 0 || bottom >= codes.rows() || right >= codes.columns()) return true;
    for (std::int64_t row = top; row <= bottom; ++row) {
        const auto cells = codes.row(row).subspan(static_cast<std::size_t>(left), static_cast<std::size_t>(right - left + 1));
        if (std::find(cells.begin(), cells.end(), flow_void) != cells.end()) return true;
    }
    return false;
}

/// What the ground of a cell is, for formulas that take a catchment as one lump.
struct GroundOfCell {
    std::uint8_t cover = 0;
    CellSoil soil = CellSoil::unknown;
    std::optional<std::uint8_t> rain_zone = {};
    double slope = 0.0;
    double elevation_m = 0.0;
};

GroundOfCell ground_of_cell(const TiledGround& in, const TileDesk& desk, Local local) {
    const Cell cell = desk.flow.cell(local);
    return {.cover = in.surface.index[cell],
            .soil = in.surface.soil_at(cell),
            .rain_zone = in.rain_zones == nullptr ? std::nullopt : std::optional((*in.rain_zones)[cell]),
            .slope = land_slope(in.elevations, in.metres_per_elevation_unit, in.ground, cell),
            .elevation_m = desk.elevation[local] * in.metres_per_elevation_unit};
}

/// Arrivals of the subareas that meet in one tile. Cells of a subarea lie together, and so do those of one second: both are looked up
/// only where they change.
class TileTally {
public:
    TileTally(double storm_factor, Storms storms) : storm_factor_(storm_factor), storms_(storms) {}

    void add(std::uint32_t owner, const ArrivingCell& cell, const GroundOfCell& ground) {
        if (owner != owner_ || arrivals_ == nullptr) {
            owner_ = owner;
            arrivals_ = &by_owner_[owner];
        }
        arrivals_->add_unbinned(cell);
        arrivals_->ground.add(ground.cover, ground.soil, cell.area, ground.slope, ground.elevation_m);
        if (ground.rain_zone) arrivals_->ground.add_to_zone(*ground.rain_zone, cell.area);
        if (storms_ == Storms::by_point) return arrivals_->storm_bins.add(cell.head, cell.area, storm_factor_);
        const std::int64_t second = ArrivalBins::second_of(cell.head.time, storm_factor_);
        ArrivalBins::Bin& bin = bins_[{owner, second}];
        const bool is_first = bin.area == 0;
        bin.second = second;
        bin.area += cell.area;
        if (is_first || arrives_later(cell.head, bin.last, storm_factor_)) bin.last = cell.head;
    }

    /// To be called once, after the last cell.
    void finish() {
        std::unordered_map<std::uint32_t, std::vector<ArrivalBins::Bin>> bins;
        for (const auto& [key, bin] : bins_) bins[key.owner].push_back(bin);
        for (auto& [owner, of_owner] : bins) by_owner_[owner].bins.add(std::move(of_owner), storm_factor_);
    }

    void hand_over(std::vector<Arrivals>& subareas) {
        for (auto& [owner, arrivals] : by_owner_) subareas[owner - 1].add(std::move(arrivals), storm_factor_);
    }

private:
    struct Key {
        std::uint32_t owner;
        std::int64_t second;
        bool operator==(const Key&) const = default;
    };
    struct KeyHash {
        std::size_t operator()(const Key& key) const {
            return (static_cast<std::size_t>(key.second) * 0x9E3779B97F4A7C15ULL) ^ (static_cast<std::size_t>(key.owner) << 32U);
        }
    };

    double storm_factor_;
    Storms storms_;
    std::uint32_t owner_ = 0;
    Arrivals* arrivals_ = nullptr;
    std::unordered_map<std::uint32_t, Arrivals> by_owner_;
    std::unordered_map<Key, ArrivalBins::Bin, KeyHash> bins_;
};

}  // namespace

bool is_beside_edge(const Raster<FlowCode>& codes, Cell cell) {
    const RowColumn at{cell / codes.columns(), cell % codes.columns()};
    return std::any_of(all_directions.begin(), all_directions.end(), [&](Direction d) {
        const RowColumn beside = neighbour(at, d);
        const bool outside = beside.row < 0 || beside.row >= codes.rows() || beside.column < 0 || beside.column >= codes.columns();
        return outside || codes(beside.row, beside.column) == flow_void;
    });
}

void ArrivalTally::add(const TileDesk& desk) {
    const TiledGround& ground = travel_.ground();
    const bool at_edge = touches_edge(ground.forest.codes(), desk.flow.window());
    TileTally tally(storm_factor_, storms_);
    for (Local local = 0; local < desk.flow.size(); ++local) {
        if (desk.owner[local] == 0) continue;
        const Cell cell = desk.flow.cell(local);
        tally.add(desk.owner[local], {.head = {cell, desk.time_to_root(local)},
                                      .area = ground.ground.cell_area(desk.flow.row(local)),
                                      .flow_distance = desk.flow_distance[local],
                                      .is_border = at_edge && is_beside_edge(ground.forest.codes(), cell)},
                  ground_of_cell(ground, desk, local));
    }
    tally.finish();
    const std::lock_guard lock(mutex_);
    tally.hand_over(subareas_);
}

}  // namespace rillclock
