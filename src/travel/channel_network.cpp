#include "rillclock/travel/channel_network.hpp"

#include <algorithm>
#include <cmath>
#include <mutex>
#include <unordered_map>
#include <utility>

namespace rillclock {
namespace {

/// What a step out of the network adds to an arrival, so that none from the network counts as overland. 194 days: more than any arrival,
/// and small enough that the steps of a whole tile can be added.
constexpr FixedTime not_overland = -(FixedTime{1} << 44);

/// The greater storm factor over the reference.
constexpr double tangent = 1.0 + 1.0 / 1024;

/// The weights of one tile's cells.
struct Weights {
    const TiledTravel& travel;
    const std::vector<bool>& is_in;
    std::span<const double> runoff;
    const TileDesk& desk;

    [[nodiscard]] FixedArea runoff_area(Local local) const {
        const TiledGround& in = travel.ground();
        const Cell cell = desk.flow.cell(local);
        const double c = runoff[in.surface.index[cell] * cell_soils + static_cast<std::size_t>(in.surface.soil_at(cell))];
        return std::llround(c * static_cast<double>(in.ground.cell_area(desk.flow.row(local))));
    }
    [[nodiscard]] FixedTime step(Local local, double more) const {
        if (is_in[desk.flow.cell(local)]) return not_overland;
        const StepTime& time = desk.step[local];
        return time.fixed + std::llround(static_cast<double>(time.storm) * travel.rules().sheet.storm_factor * more);
    }

    [[nodiscard]] auto runoff_channel() const {
        return down::Sum{[this](Local local) { return runoff_area(local); }};
    }
    [[nodiscard]] auto arrival_channel(double more) const {
        return down::Max{[this, more](Local local) { return step(local, more); }};
    }
};

/// What is swept over one tile.
struct NetworkFields {
    TileValues<std::int64_t> runoff_area;
    TileValues<std::int64_t> arrival;
    TileValues<std::int64_t> arrival_more;
};

/// Sums and greatest arrivals at the exits of all tiles.
struct Borders {
    explicit Borders(const TiledForest& forest) : runoff_area(forest), arrival(forest), arrival_more(forest) {}

    /// Calls `sweep` with the parts of all three in a sweep over one tile.
    template <class Sweep>
    void over_tile(const Weights& weights, NetworkFields& fields, Sweep sweep) {
        sweep(runoff_area.part(weights.runoff_channel(), fields.runoff_area), arrival.part(weights.arrival_channel(1.0), fields.arrival),
              arrival_more.part(weights.arrival_channel(tangent), fields.arrival_more));
    }

    DownBorders<std::int64_t> runoff_area;
    DownBorders<std::int64_t> arrival;        ///< under the reference storm
    DownBorders<std::int64_t> arrival_more;   ///< under the greater factor
};

using RunoffChannel = decltype(std::declval<Weights>().runoff_channel());
using ArrivalChannel = decltype(std::declval<Weights>().arrival_channel(1.0));

template <class Look>
void for_all_tiles(const TiledTravel& travel, Look look) {
    travel.executor().for_each(travel.ground().forest.tiles().count(), [&](std::size_t number) {
        const auto tile = static_cast<Tile>(number);
        const auto desk = travel.desks().lease();
        travel.read_tile(tile, *desk);
        look(tile, *desk);
    });
}

/// Both parts of a time from what it is under two storms.
StepTime parts_of(FixedTime reference, FixedTime more, double storm_factor) {
    const double storm = static_cast<double>(more - reference) / ((tangent - 1.0) * storm_factor);
    StepTime time{.fixed = 0, .storm = std::llround(storm)};
    time.fixed = reference - std::llround(static_cast<double>(time.storm) * storm_factor);
    return time;
}

}  // namespace

ChannelNetwork::ChannelNetwork(const TiledTravel& travel, std::span<const double> runoff) : codes_(travel.ground().forest.codes()) {
    find_cells(travel);
    look_at_tiles(travel, runoff);
    link();
}

/// Walks down from each channel cell until the way is known.
void ChannelNetwork::find_cells(const TiledTravel& travel) {
    is_in_.assign(static_cast<std::size_t>(codes_.rows() * codes_.columns()), false);
    for (Cell cell = 0; cell < is_in_.size(); ++cell) {
        if (codes_[cell] == flow_void || travel.kind(cell) != GroundKind::channel) continue;
        for (Cell at = cell; !is_in_[at];) {
            is_in_[at] = true;
            if (!is_direction(codes_[at])) break;
            at = neighbour(at, static_cast<Direction>(codes_[at]), codes_.columns());
        }
    }
}

void ChannelNetwork::look_at_tiles(const TiledTravel& travel, std::span<const double> runoff) {
    Borders borders(travel.ground().forest);
    for_all_tiles(travel, [&](Tile tile, TileDesk& desk) {
        const Weights weights{travel, is_in_, runoff, desk};
        NetworkFields fields;
        borders.over_tile(weights, fields, [&](const auto&... parts) { collect_down(tile, desk.flow, parts...); });
    });
    borders.runoff_area.solve<RunoffChannel>();
    borders.arrival.solve<ArrivalChannel>();
    borders.arrival_more.solve<ArrivalChannel>();
    std::mutex mutex;
    for_all_tiles(travel, [&](Tile tile, TileDesk& desk) {
        const Weights weights{travel, is_in_, runoff, desk};
        NetworkFields fields;
        borders.over_tile(weights, fields, [&](const auto&... parts) { fill_down(tile, desk.flow, parts...); });
        const std::lock_guard lock(mutex);
        for (const Local local : desk.flow.order()) {
            if (!is_in_[desk.flow.cell(local)]) continue;
            cells_.push_back({.cell = desk.flow.cell(local),
                              .step = travel.step_view(desk, local),
                              .flow_distance = desk.flow_distance[local],
                              .overland = parts_of(fields.arrival[local], fields.arrival_more[local], travel.rules().sheet.storm_factor),
                              .runoff_area_m2 = from_fixed_area(fields.runoff_area[local])});
        }
    });
}

/// Every step has a length, so the cell below is nearer to the root.
void ChannelNetwork::link() {
    std::sort(cells_.begin(), cells_.end(), [](const NetworkCell& a, const NetworkCell& b) {
        return std::pair(-a.flow_distance, a.cell) < std::pair(-b.flow_distance, b.cell);
    });
    std::unordered_map<Cell, std::size_t> position;
    for (std::size_t i = 0; i < cells_.size(); ++i) position.emplace(cells_[i].cell, i);
    for (NetworkCell& cell : cells_) {
        if (!is_direction(codes_[cell.cell])) continue;
        cell.next = position.at(neighbour(cell.cell, static_cast<Direction>(codes_[cell.cell]), codes_.columns()));
    }
}

}  // namespace rillclock
