#include "rillclock/catchment/arrival_tally.hpp"

#include <algorithm>
#include <iterator>
#include <optional>
#include <unordered_map>
#include <utility>
#include <vector>

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

/// Bins of the subareas that meet in one tile. A bin stays in a slot of a table until another takes its place, so that a cell costs one look:
/// cells of one subarea and second mostly lie together. What leaves the table in parts becomes one bin again in `ArrivalBins`.
class TileBins {
public:
    explicit TileBins(double storm_factor) : storm_factor_(storm_factor), slots_(slot_count) {}

    void add(std::uint32_t owner, const Head& head, FixedArea area) {
        const std::int64_t second = ArrivalBins::second_of(head.time, storm_factor_);
        Slot& slot = slots_[(static_cast<std::size_t>(second) + std::size_t{owner} * spread) % slot_count];
        if (slot.owner != owner || slot.bin.second != second) {
            if (slot.owner != 0) done_.push_back(slot);
            slot = {owner, {second, area, head}};
            return;
        }
        slot.bin.area += area;
        if (arrives_later(head, slot.bin.last, storm_factor_)) slot.bin.last = head;
    }

    /// Hands over the bins, each subarea's in one go: `take(owner, bins)`.
    template <class Take>
    void hand_over(Take take) {
        std::copy_if(slots_.begin(), slots_.end(), std::back_inserter(done_), [](const Slot& slot) { return slot.owner != 0; });
        std::sort(done_.begin(), done_.end(), [](const Slot& a, const Slot& b) { return a.owner < b.owner; });
        for (auto first = done_.begin(); first != done_.end();) {
            const auto last = std::find_if(first, done_.end(), [&](const Slot& slot) { return slot.owner != first->owner; });
            std::vector<ArrivalBins::Bin> bins;
            std::transform(first, last, std::back_inserter(bins), [](const Slot& slot) { return slot.bin; });
            take(first->owner, std::move(bins));
            first = last;
        }
    }

private:
    struct Slot {
        std::uint32_t owner = 0;   ///< 0 where the slot is free
        ArrivalBins::Bin bin;
    };
    static constexpr std::size_t slot_count = 4096;
    static constexpr std::size_t spread = 1031;   // seconds of neighbouring subareas are much alike

    double storm_factor_;
    std::vector<Slot> slots_;
    std::vector<Slot> done_;
};

/// Arrivals of the subareas that meet in one tile. Cells of a subarea lie together: it is looked up only where it changes.
class TileTally {
public:
    TileTally(double storm_factor, Storms storms) : storm_factor_(storm_factor), storms_(storms), bins_(storm_factor) {}

    void add(std::uint32_t owner, const ArrivingCell& cell, const GroundOfCell& ground) {
        if (owner != owner_ || arrivals_ == nullptr) {
            owner_ = owner;
            arrivals_ = &by_owner_[owner];
        }
        arrivals_->add_unbinned(cell);
        arrivals_->ground.add(ground.cover, ground.soil, cell.area, ground.slope, ground.elevation_m);
        if (ground.rain_zone) arrivals_->ground.add_to_zone(*ground.rain_zone, cell.area);
        if (storms_ == Storms::by_point) return arrivals_->storm_bins.add(cell.head, cell.area, storm_factor_);
        bins_.add(owner, cell.head, cell.area);
    }

    /// To be called once, after the last cell.
    void finish() {
        bins_.hand_over([&](std::uint32_t owner, std::vector<ArrivalBins::Bin>&& bins) {
            by_owner_[owner].bins.add(std::move(bins), storm_factor_);
        });
    }

    void hand_over(std::vector<Arrivals>& subareas) {
        for (auto& [owner, arrivals] : by_owner_) subareas[owner - 1].add(std::move(arrivals), storm_factor_);
    }

private:
    double storm_factor_;
    Storms storms_;
    std::uint32_t owner_ = 0;
    Arrivals* arrivals_ = nullptr;
    std::unordered_map<std::uint32_t, Arrivals> by_owner_;
    TileBins bins_;
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
