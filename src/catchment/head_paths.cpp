#include "rillclock/catchment/head_paths.hpp"

#include <algorithm>
#include <cmath>
#include <map>

#include "cells_by_tile.hpp"
#include "channel_factor.hpp"
#include "kept_cells.hpp"
#include "rillclock/catchment/tiled_cells.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/hydraulics/open_water.hpp"
#include "rillclock/travel/slope_below_floor.hpp"

namespace rillclock {
namespace {

constexpr std::size_t not_there = SIZE_MAX;

/// Cells that were looked up, by index.
class FoundCells {
public:
    explicit FoundCells(std::vector<PathCell> cells) : cells_(std::move(cells)) {
        for (const PathCell& cell : cells_) index_.push_back(cell.cell);
    }
    [[nodiscard]] std::size_t size() const { return cells_.size(); }
    [[nodiscard]] const PathCell& operator[](std::size_t place) const { return cells_[place]; }
    /// `not_there` where it is not among them.
    [[nodiscard]] std::size_t place(Cell cell) const {
        const auto found = std::lower_bound(index_.begin(), index_.end(), cell);
        return found != index_.end() && *found == cell ? static_cast<std::size_t>(found - index_.begin()) : not_there;
    }

private:
    std::vector<PathCell> cells_;
    std::vector<Cell> index_;
};

Cell cell_below(const Raster<FlowCode>& codes, Cell cell) {
    return neighbour(cell, static_cast<Direction>(codes[cell]), codes.columns());
}

/// Calls `work(i)` for all below a count, on threads, many at a time.
template <class Work>
void for_each_part(const Executor& executor, std::size_t count, Work work) {
    constexpr std::size_t at_a_time = 1024;
    executor.for_each((count + at_a_time - 1) / at_a_time, [&](std::size_t part) {
        const std::size_t end = std::min(count, (part + 1) * at_a_time);
        for (std::size_t i = part * at_a_time; i < end; ++i) work(i);
    });
}

double floor_of(GroundKind kind, double overland, double channel) {
    return std::max(kind == GroundKind::overland ? overland : channel, least_slope);
}

/// Makes the parts of HeadPaths from the raster.
class PathMaker {
public:
    PathMaker(const TiledTravel& travel, const KeptCells& kept, const SettingBounds& bounds)
        : travel_(travel), codes_(travel.ground().forest.codes()), kept_(kept), bounds_(bounds), found_(looked_up()),
          sheet_place_(found_.size(), not_there), link_place_(found_.size(), not_there) {}

    std::vector<SheetCell> sheet_cells() {
        std::vector<Place> order;
        for (const Cell cell : kept_.sheet) order.push_back(place_of(cell));
        std::sort(order.begin(), order.end(), [](const Place& a, const Place& b) { return b < a; });
        for (std::size_t i = 0; i < order.size(); ++i) sheet_place_[order[i].found] = i;
        std::vector<bool> on_path(found_.size(), false);
        for (const Cell cell : kept_.path) on_path[found_.place(cell)] = !kept_.ends.contains(cell);
        std::vector<SheetCell> cells(order.size());
        for_each_part(travel_.executor(), cells.size(), [&](std::size_t i) {
            const PathCell& at = found_[order[i].found];
            cells[i] = {.step = at.step, .surface = at.surface, .slope = free_slope(at), .down = sheet_place_below(at.cell),
                        .on_path = on_path[order[i].found]};
        });
        return cells;
    }

    /// Downstream first. To be called once the sheet cells are made.
    std::vector<PathLink> links() {
        std::vector<Place> tops;
        for (const Cell cell : kept_.starts) tops.push_back(place_of(cell));
        std::sort(tops.begin(), tops.end());
        for (std::size_t i = 0; i < tops.size(); ++i) link_place_[tops[i].found] = i;
        std::vector<PathLink> links(tops.size());
        for_each_part(travel_.executor(), links.size(), [&](std::size_t i) { links[i] = link_from(tops[i].found); });
        return links;
    }

    [[nodiscard]] std::size_t link_of(Cell top) const { return link_place_[found_.place(top)]; }

private:
    /// A cell that was looked up, with what says where on the way down it comes.
    struct Place {
        FixedLength flow_distance = 0;
        Cell cell = no_cell;
        std::size_t found = not_there;
        /// Downstream first; of cells equally far from the root the greater one.
        [[nodiscard]] bool operator<(const Place& other) const {
            return flow_distance != other.flow_distance ? flow_distance < other.flow_distance : cell > other.cell;
        }
    };

    [[nodiscard]] FoundCells looked_up() const {
        std::vector<Cell> cells = kept_.path;
        cells.insert(cells.end(), kept_.sheet.begin(), kept_.sheet.end());
        return FoundCells(path_cells_by_index(travel_, std::move(cells)));
    }

    [[nodiscard]] Place place_of(Cell cell) const {
        const std::size_t place = found_.place(cell);
        return {found_[place].flow_distance, cell, place};
    }

    [[nodiscard]] std::size_t sheet_place_below(Cell cell) const {
        if (!is_direction(codes_[cell])) return not_there;
        const std::size_t below = found_.place(cell_below(codes_, cell));
        return below == not_there ? not_there : sheet_place_[below];
    }

    /// The slope ahead down to the least floor of any setting.
    [[nodiscard]] double free_slope(const PathCell& at) const {
        const SlopeRules& rules = travel_.rules().slope;
        const auto floor = static_cast<float>(floor_of(at.step.kind, rules.overland_floor, rules.channel_floor));
        const double least = floor_of(at.step.kind, bounds_.least_overland_floor, bounds_.least_channel_floor);
        if (at.step.slope > static_cast<double>(floor) || !(least < static_cast<double>(floor))) return at.step.slope;
        return static_cast<double>(slope_with_floors(travel_, at.cell, at.flow_distance, bounds_.least_overland_floor,
                                                     bounds_.least_channel_floor));
    }

    /// The link that begins at a cell, by its place.
    [[nodiscard]] PathLink link_from(std::size_t top) const {
        PathLink link{.top = found_[top].cell, .below = link_place_[top]};
        if (kept_.ends.contains(link.top)) return link;
        std::map<std::uint8_t, double> shallow;
        std::size_t at = top;
        do {
            add_step(at, link, shallow);
            at = found_.place(cell_below(codes_, found_[at].cell));
        } while (link_place_[at] == not_there);
        link.below = link_place_[at];
        link.shallow.assign(shallow.begin(), shallow.end());
        return link;
    }

    void add_step(std::size_t place, PathLink& link, std::map<std::uint8_t, double>& shallow) const {
        if (sheet_place_[place] != not_there) return link.sheet_cells.push_back(sheet_place_[place]);
        const PathCell& at = found_[place];
        const BentStep step = bent_step(at);
        const double greatest = floor_of(step.kind, bounds_.greatest_overland_floor, bounds_.greatest_channel_floor);
        const bool floor_may_reach = step.kind != GroundKind::water && step.slope < greatest;
        if (step.celerity > 0 || floor_may_reach) return link.bent.push_back(step);
        switch (step.kind) {
            case GroundKind::overland: shallow[step.surface] += shallow_metres(step); return;
            case GroundKind::channel:
                (step.is_known_channel ? link.known_s : link.channel_s) += step.unit_time / std::sqrt(step.slope);
                return;
            case GroundKind::water: link.known_s += step.unit_time; return;
        }
    }

    /// The length of shallow flow at slope 1 that takes as long. Under a chart that holds for the velocities of the study, and all that a setting
    /// changes of them is a factor, the same on k.
    [[nodiscard]] double shallow_metres(const BentStep& step) const {
        const SurfaceHydraulics& surface = travel_.ground().surface.classes[step.surface];
        if (!surface.shallow_line) return step.length_m / std::sqrt(step.slope);
        return step.length_m * (surface.shallow_k / surface.shallow_line->at(step.slope));
    }

    [[nodiscard]] BentStep bent_step(const PathCell& at) const {
        BentStep step{.kind = at.step.kind, .surface = at.surface, .slope = free_slope(at), .length_m = from_fixed(at.step.length)};
        const ChannelRules& channel = travel_.rules().channel;
        switch (step.kind) {
            case GroundKind::overland: break;
            case GroundKind::channel: {
                const Length radius = channel_radius(at.step, channel);
                const Speed speed = manning_velocity({.n = channel_n(at.step, channel), .hydraulic_radius = radius, .slope = 1.0});
                step.is_known_channel = at.step.reach != nullptr;
                step.unit_time = step.length_m / in_metres_per_second(speed);
                break;
            }
            case GroundKind::water:
                step.unit_time = step.length_m / in_metres_per_second(wave_celerity(at.step.surface->water_depth.value()));
                break;
        }
        if (at.step.ponded_m > in_metres(travel_.rules().pond.depth)) {
            step.celerity = in_metres_per_second(wave_celerity(metres(at.step.ponded_m)));
        }
        return step;
    }

    const TiledTravel& travel_;
    const Raster<FlowCode>& codes_;
    const KeptCells& kept_;
    const SettingBounds& bounds_;
    FoundCells found_;
    std::vector<std::size_t> sheet_place_;   ///< by place among the cells found: the place among the sheet cells
    std::vector<std::size_t> link_place_;    ///< likewise of the links that begin there
};

double bent_time(const BentStep& step, const TravelSetting& setting, double channel) {
    const SlopeRules& rules = setting.rules.slope;
    const double slope = std::max(step.slope, floor_of(step.kind, rules.overland_floor, rules.channel_floor));
    double own = step.unit_time;
    if (step.kind == GroundKind::channel) own = step.unit_time * (step.is_known_channel ? 1.0 : channel) / std::sqrt(slope);
    if (step.kind == GroundKind::overland) own = step.length_m / in_metres_per_second(shallow_speed(setting.classes[step.surface], slope));
    if (!(step.celerity > 0)) return own;
    return std::min(own, step.length_m / std::min(step.celerity, in_metres_per_second(setting.rules.pond.speed)));
}

double slope_under(const TravelSetting& setting, const SheetCell& cell) {
    const SlopeRules& rules = setting.rules.slope;
    // As a whole run has it, in single precision.
    const auto floor = static_cast<float>(floor_of(cell.step.kind, rules.overland_floor, rules.channel_floor));
    return std::max(cell.slope, static_cast<double>(floor));
}

/// New places of what is kept, in its old order; `not_there` for what is not.
std::vector<std::size_t> new_places(const std::vector<bool>& kept) {
    std::vector<std::size_t> places(kept.size(), not_there);
    std::size_t next = 0;
    for (std::size_t i = 0; i < kept.size(); ++i) {
        if (kept[i]) places[i] = next++;
    }
    return places;
}

template <class Item>
void keep_items(std::vector<Item>& items, const std::vector<bool>& kept) {
    std::size_t next = 0;
    for (std::size_t i = 0; i < items.size(); ++i) {
        if (!kept[i]) continue;
        if (next != i) items[next] = std::move(items[i]);
        ++next;
    }
    items.resize(next);
}

}  // namespace

HeadPaths::HeadPaths(const TiledTravel& travel, std::span<const Cell> heads, std::span<const DesignPoint> points,
                     const SettingBounds& bounds)
    : rules_(travel.rules()), heads_(each_once({heads.begin(), heads.end()})) {
    const KeptCells kept = kept_cells(travel, heads_, points, bounds.greatest_sheet_limit);
    owners_ = kept.owners;
    PathMaker maker(travel, kept, bounds);
    sheet_cells_ = maker.sheet_cells();
    links_ = maker.links();
    for (const Cell head : heads_) link_of_head_.push_back(maker.link_of(head));
    for (const DesignPoint& point : points) {
        if (!kept.starts.contains(point.cell)) throw bug("a point has no head of its own subarea");
        link_of_point_.push_back(maker.link_of(point.cell));
    }
}

void HeadPaths::keep(const std::vector<bool>& wanted) {
    keep_items(heads_, wanted);
    keep_items(owners_, wanted);
    keep_items(link_of_head_, wanted);
    keep_links();
    keep_sheet_cells();
}

void HeadPaths::keep_links() {
    std::vector<bool> kept(links_.size(), false);
    for (const std::vector<std::size_t>* tops : {&link_of_head_, &link_of_point_}) {
        for (const std::size_t top : *tops) kept[top] = true;
    }
    // Links come downstream first, so a link is reached before the one below it when they are gone through from the end.
    for (std::size_t i = links_.size(); i-- > 0;) {
        if (kept[i]) kept[links_[i].below] = true;
    }
    const std::vector<std::size_t> places = new_places(kept);
    keep_items(links_, kept);
    for (PathLink& link : links_) link.below = places[link.below];
    for (std::size_t& top : link_of_head_) top = places[top];
    for (std::size_t& top : link_of_point_) top = places[top];
}

void HeadPaths::keep_sheet_cells() {
    std::vector<bool> kept(sheet_cells_.size(), false);
    for (SheetCell& cell : sheet_cells_) cell.on_path = false;
    for (const PathLink& link : links_) {
        for (const std::size_t cell : link.sheet_cells) kept[cell] = sheet_cells_[cell].on_path = true;
    }
    for (std::size_t i = sheet_cells_.size(); i-- > 0;) {
        if (sheet_cells_[i].down != not_there && kept[sheet_cells_[i].down]) kept[i] = true;
    }
    const std::vector<std::size_t> places = new_places(kept);
    keep_items(sheet_cells_, kept);
    for (SheetCell& cell : sheet_cells_) {
        if (cell.down != not_there) cell.down = places[cell.down];
    }
    for (PathLink& link : links_) {
        for (std::size_t& cell : link.sheet_cells) cell = places[cell];
    }
}

std::vector<WayTime> HeadPaths::sheet_times(const TravelSetting& setting) const {
    std::vector<FixedLength> index(sheet_cells_.size(), 0);
    std::vector<WayTime> times(sheet_cells_.size());
    for (std::size_t i = 0; i < sheet_cells_.size(); ++i) {
        const SheetCell& cell = sheet_cells_[i];
        StepView step = cell.step;
        step.surface = &setting.classes[cell.surface];
        step.slope = slope_under(setting, cell);
        step.sheet_index = index[i];
        if (cell.down != not_there) index[cell.down] = std::max(index[cell.down], index[i] + sheet_index_step(step));
        if (!cell.on_path) continue;
        const StepTime time = step_parts(step, setting.rules).time();
        times[i] = {.storm_s = from_fixed(time.storm), .fixed_s = from_fixed(time.fixed)};
    }
    return times;
}

WayTime HeadPaths::link_time(const PathLink& link, const TravelSetting& setting, const std::vector<WayTime>& sheet) const {
    const double channel = channel_factor(setting.rules.channel, rules_.channel);
    WayTime time{.storm_s = 0.0, .fixed_s = link.channel_s * channel + link.known_s};
    for (const std::size_t cell : link.sheet_cells) time = time + sheet[cell];
    for (const auto& [surface, sum] : link.shallow) time.fixed_s += sum / in_metres_per_second(setting.classes[surface].shallow_k);
    for (const BentStep& step : link.bent) time.fixed_s += bent_time(step, setting, channel);
    return time;
}

PathTimes HeadPaths::times(const TravelSetting& setting) const {
    const std::vector<WayTime> sheet = sheet_times(setting);
    std::vector<WayTime> from_top(links_.size());
    for (std::size_t i = 0; i < links_.size(); ++i) {
        const WayTime below = links_[i].below == i ? WayTime{} : from_top[links_[i].below];
        from_top[i] = link_time(links_[i], setting, sheet) + below;
    }
    PathTimes times;
    for (const std::size_t link : link_of_head_) times.heads.push_back(from_top[link]);
    for (const std::size_t link : link_of_point_) times.points.push_back(from_top[link]);
    return times;
}

}  // namespace rillclock
