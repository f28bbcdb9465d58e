#include "rillclock/catchment/arrival_tally.hpp"

#include <algorithm>
#include <unordered_map>
#include <utility>
#include <vector>

#include "land_row.hpp"

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

/// What one tile holds of a subarea.
struct TilePart {
    std::uint32_t owner = 0;
    Arrivals arrivals;
    std::vector<ArrivalBins::Bin> bins;   ///< in any order, some seconds more than once
};

/// The parts of the subareas that meet in one tile. Cells of a subarea lie together: it is looked up only where it changes. A bin stays
/// in a slot of a table until another takes its place, so that a cell costs one look: cells of one subarea and second mostly lie together.
/// What leaves the table in parts becomes one bin again in `ArrivalBins`.
class TileParts {
public:
    explicit TileParts(double storm_factor) : storm_factor_(storm_factor), slots_(slot_count) {}

    [[nodiscard]] Arrivals& arrivals(std::uint32_t owner) {
        if (owner != owner_) turn_to(owner);
        return *arrivals_;
    }
    /// Of the subarea that was asked for last.
    void add_to_bins(const Head& head, FixedArea area) {
        const std::int64_t second = ArrivalBins::second_of(head.time, storm_factor_);
        Slot& slot = slots_[(static_cast<std::size_t>(second) + std::size_t{part_} * spread) % slot_count];
        if (slot.part != part_ || slot.bin.second != second) {
            clear(slot);
            slot.put(part_, second, area, head);
            return;
        }
        slot.bin.area += area;
        if (arrives_later(head, slot.bin.last, storm_factor_)) slot.put(head);
    }
    /// All that was found, by the owners' first cells in the tile.
    [[nodiscard]] std::vector<TilePart> take() {
        for (const Slot& slot : slots_) clear(slot);
        for (TilePart& part : parts_) part.arrivals.bins.add(std::move(part.bins), storm_factor_);
        return std::move(parts_);
    }

private:
    struct Slot {
        ArrivalBins::Bin bin;
        std::uint32_t part = no_part;   ///< whose bin it is; none where the slot is free

        void put(std::uint32_t new_part, std::int64_t second, FixedArea area, const Head& head) {
            part = new_part;
            bin.second = second;
            bin.area = area;
            put(head);
        }
        void put(const Head& head) {
            bin.last.cell = head.cell;
            bin.last.time.fixed = head.time.fixed;
            bin.last.time.storm = head.time.storm;
        }
    };
    static constexpr std::uint32_t no_part = UINT32_MAX;
    static constexpr std::size_t slot_count = 4096;
    static constexpr std::size_t usual_bins = 1024;
    static constexpr std::size_t spread = 1031;   // seconds of neighbouring subareas are much alike

    void turn_to(std::uint32_t owner) {
        owner_ = owner;
        const auto [place, is_new] = part_of_.try_emplace(owner, static_cast<std::uint32_t>(parts_.size()));
        if (is_new) {
            parts_.push_back({.owner = owner, .arrivals = {}, .bins = {}});
            parts_.back().bins.reserve(usual_bins);
        }
        part_ = place->second;
        arrivals_ = &parts_[part_].arrivals;
    }
    void clear(const Slot& slot) {
        if (slot.part != no_part) parts_[slot.part].bins.push_back(slot.bin);
    }

    double storm_factor_;
    std::uint32_t owner_ = 0;
    std::uint32_t part_ = 0;
    Arrivals* arrivals_ = nullptr;
    std::unordered_map<std::uint32_t, std::uint32_t> part_of_;
    std::vector<TilePart> parts_;
    TileValues<Slot> slots_;
};

/// What the cells of a tile are added by.
struct TallyRules {
    double storm_factor = 1.0;
    Storms storms = Storms::one;
};

/// Adds the cells of the tile on the desk, row by row.
template <class Z>
void add_cells(const TiledGround& in, const TallyRules& rules, const Raster<Z>& elevations, const TileDesk& desk, TileParts& parts) {
    const Window& window = desk.flow.window();
    const bool at_edge = touches_edge(in.forest.codes(), window);
    std::vector<double> slopes(static_cast<std::size_t>(window.columns));
    Local local = 0;
    for (std::int64_t row = window.row; row < window.row + window.rows; ++row) {
        LandRow(elevations, in.metres_per_elevation_unit, in.ground, row).slopes(window.column, slopes);
        const FixedArea area = in.ground.cell_area(row);
        Cell cell = desk.flow.cell(local);
        for (std::int64_t column = window.column; column < window.column + window.columns; ++column, ++local, ++cell) {
            if (desk.owner[local] == 0) continue;
            Arrivals& arrivals = parts.arrivals(desk.owner[local]);
            // A copy of the head would wait until what it is made of has been written.
            const ArrivingCell arriving{.head = {cell, {desk.fixed[local], desk.storm[local]}}, .area = area,
                                        .flow_distance = desk.flow_distance[local],
                                        .is_border = at_edge && is_beside_edge(in.forest.codes(), cell)};
            arrivals.add_unbinned(arriving);
            arrivals.ground.add(in.surface.index[cell], in.surface.soil_at(cell), area, slopes[static_cast<std::size_t>(column - window.column)],
                                desk.elevation[local] * in.metres_per_elevation_unit);
            if (in.rain_zones != nullptr) arrivals.ground.add_to_zone((*in.rain_zones)[cell], area);
            if (rules.storms == Storms::by_point) arrivals.storm_bins.add(arriving.head, area, rules.storm_factor);
            else parts.add_to_bins(arriving.head, area);
        }
    }
}

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
    TileParts parts(storm_factor_);
    travel_.ground().elevations.visit([&](const auto& elevations) {
        add_cells(travel_.ground(), {storm_factor_, storms_}, elevations, desk, parts);
    });
    std::vector<TilePart> found = parts.take();
    const std::lock_guard lock(mutex_);
    for (TilePart& part : found) subareas_[part.owner - 1].add(std::move(part.arrivals), storm_factor_);
}

}  // namespace rillclock
