#include "rillclock/catchment/candidate_heads.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <compare>
#include <map>
#include <mutex>
#include <unordered_map>
#include <utility>

#include "rillclock/hydraulics/open_water.hpp"

namespace rillclock {
namespace {

/// What kinds of steps a setting makes longer or shorter, as places in a table of factors.
enum class StepSort : std::uint8_t { channel, water, capped_wave, free_wave, first_surface };

std::size_t sort_of(std::uint8_t surface) { return static_cast<std::size_t>(StepSort::first_surface) + surface; }

/// How many times longer steps take under a setting.
struct SettingFactors {
    std::vector<double> roughness;   ///< by surface class: n over the study's
    std::vector<double> fixed;       ///< by sort of step, on free slopes and then on the floor
};

/// Settings that share a walk over a tile; the last group is filled up with the last setting.
struct SettingGroup {
    std::array<const TravelSetting*, up::Lanes::count> setting{};
    std::array<const SettingFactors*, up::Lanes::count> factors{};
    std::vector<std::array<double, up::Lanes::count>> fixed;   ///< of all of them, as in SettingFactors
    std::size_t first = 0;                                     ///< the number of its first setting
};

double floor_factor(double base, double floor) { return std::sqrt(std::max(base, least_slope) / std::max(floor, least_slope)); }

SettingFactors factors_of(const TravelSetting& setting, const TravelRules& base, const std::vector<SurfaceHydraulics>& classes) {
    const auto radius = [](const ChannelRules& channel) { return in_metres(channel.radius_at(square_kilometres(1))); };
    const TravelRules& rules = setting.rules;
    const std::size_t sorts = sort_of(0) + classes.size();
    SettingFactors factors{.roughness = std::vector<double>(classes.size(), 1.0), .fixed = std::vector<double>(2 * sorts, 1.0)};
    for (std::size_t i = 0; i < classes.size(); ++i) {
        if (!(classes[i].sheet_n > 0)) continue;  // open water
        factors.roughness[i] = setting.classes[i].sheet_n / classes[i].sheet_n;
        factors.fixed[sort_of(0) + i] = classes[i].shallow_k / setting.classes[i].shallow_k;
    }
    factors.fixed[static_cast<std::size_t>(StepSort::channel)] =
        rules.channel.n / base.channel.n * std::pow(radius(base.channel) / radius(rules.channel), 2.0 / 3.0);
    factors.fixed[static_cast<std::size_t>(StepSort::capped_wave)] =
        std::isfinite(in_metres_per_second(rules.pond.speed)) ? base.pond.speed / rules.pond.speed : 0.5;
    for (std::size_t sort = 0; sort < sorts; ++sort) {
        const bool overland = sort >= sort_of(0);
        factors.fixed[sorts + sort] = factors.fixed[sort] * (overland ? floor_factor(base.slope.overland_floor, rules.slope.overland_floor)
                                                                      : floor_factor(base.slope.channel_floor, rules.slope.channel_floor));
    }
    for (const StepSort sort : {StepSort::water, StepSort::capped_wave, StepSort::free_wave}) {
        factors.fixed[sorts + static_cast<std::size_t>(sort)] = factors.fixed[static_cast<std::size_t>(sort)];
    }
    return factors;
}

/// A step where sheet flow may be under some setting.
struct SheetStep {
    std::uint8_t surface = 0;
    float length_m = 0.0F;
    float from_divide_m = 0.0F;
    float index_m = 0.0F;       ///< sheet index at the cell, in the study
    float slope = 0.0F;
    float steepness_m = 0.0F;   ///< length over the root of slope
    float celerity = 0.0F;      ///< on ponded ground, m/s; 0 elsewhere
};

/// Heads of a subarea that lie close together, as far as they lie in the tile.
struct HeadBlock {
    std::uint32_t subarea = 0;
    std::int64_t number = 0;   ///< within its subarea
    [[nodiscard]] auto operator<=>(const HeadBlock&) const = default;
};

/// A cell that nothing drains to.
struct HeadCell {
    Local cell = 0;
    std::uint32_t block = 0;   ///< place among the tile's blocks
};

/// A tile with its steps, sorted by what a setting does to them.
struct SortedDesk {
    TileDesk desk;
    std::vector<SheetStep> sheet;
    std::vector<std::uint32_t> sort;   ///< by cell: place among the fixed factors; beyond them, in `sheet`
    std::vector<HeadCell> heads;
    std::vector<HeadBlock> blocks;
    std::vector<up::Lanes> time;       ///< to the root under the settings of a group
};

/// Sheet-flow time by index, read from a table up to 128 m: an estimate, within a second.
class SheetTable {
public:
    explicit SheetTable(const SheetFormula& formula) : formula_(formula), seconds_(entries + 2) {
        for (std::size_t i = 0; i < seconds_.size(); ++i) {
            seconds_[i] = in_seconds(formula.at_unit_storm(metres(static_cast<double>(i) / per_metre)));
        }
    }
    [[nodiscard]] double operator()(double index_m) const {
        const double at = index_m * per_metre;
        if (!(at < static_cast<double>(entries))) return in_seconds(formula_.at_unit_storm(metres(index_m)));
        const auto i = static_cast<std::size_t>(at);
        return seconds_[i] + (at - static_cast<double>(i)) * (seconds_[i + 1] - seconds_[i]);
    }

private:
    static constexpr std::size_t entries = 8192;
    static constexpr double per_metre = 64.0;
    SheetFormula formula_;
    std::vector<double> seconds_;
};

/// Time of a step where sheet flow may be: the sheet index is taken to grow as the roughness of the cell does.
double sheet_step_time(const SheetStep& step, const TravelSetting& setting, double roughness, const SheetTable& table) {
    const SheetRules& rules = setting.rules.sheet;
    const SurfaceHydraulics& surface = setting.classes[step.surface];
    const double length = static_cast<double>(step.length_m);
    const double celerity = static_cast<double>(step.celerity);
    const double index = static_cast<double>(step.index_m) * roughness;
    const double index_step = surface.sheet_n * static_cast<double>(step.steepness_m);
    const double room = in_metres(rules.limit) - static_cast<double>(step.from_divide_m);
    const double index_room = in_metres(rules.index_limit) - index;
    const bool is_sheet = room >= length && index_room >= index_step;   // most are, and need no division
    const double share = is_sheet ? 1.0 : std::clamp(std::min(room / length, index_room / index_step), 0.0, 1.0);
    double time = 0.0;
    if (!is_sheet) time = (1.0 - share) * length / in_metres_per_second(shallow_speed(surface, static_cast<double>(step.slope)));
    if (share > 0) time += surface.sheet_factor * rules.storm_factor * (table(index + share * index_step) - table(index));
    if (!(celerity > 0)) return time;
    return std::min(time, length / std::min(celerity, in_metres_per_second(setting.rules.pond.speed)));
}

/// A block's last cell to arrive under a setting.
struct BlockLast {
    std::int64_t time = -1;
    Cell cell = no_cell;
    std::int64_t block = 0;   ///< within its subarea
    [[nodiscard]] bool is_before(const BlockLast& other) const { return time != other.time ? time > other.time : cell < other.cell; }
};

/// The latest of many blocks. Which ones does not depend on the order in which they come, nor on whether a block comes in parts.
class LatestBlocks {
public:
    void add(const BlockLast& block) {
        const auto same = std::find_if(blocks_.begin(), blocks_.end(), [&](const BlockLast& kept) { return kept.block == block.block; });
        if (same != blocks_.end()) {
            if (!block.is_before(*same)) return;
            blocks_.erase(same);
        }
        if (blocks_.size() == most_blocks && !block.is_before(blocks_.back())) return;
        blocks_.insert(std::upper_bound(blocks_.begin(), blocks_.end(), block,
                                        [](const BlockLast& a, const BlockLast& b) { return a.is_before(b); }),
                       block);
        if (blocks_.size() > most_blocks) blocks_.pop_back();
    }
    [[nodiscard]] const std::vector<BlockLast>& blocks() const { return blocks_; }

private:
    static constexpr std::size_t most_blocks = 16;
    std::vector<BlockLast> blocks_;
};

constexpr double blocks_of_subarea = 256.0;            // about so many, whatever its size
constexpr std::size_t most_heads_of_subarea = 40;

/// Side of a subarea's blocks, in cells.
std::int64_t block_side(std::int64_t cells) {
    return std::max<std::int64_t>(1, static_cast<std::int64_t>(std::sqrt(static_cast<double>(cells) / blocks_of_subarea)));
}

/// Heads of a subarea from the latest blocks of all settings, the latest of each setting first, then the second latest, as long as
/// there is room.
void take_heads(const std::vector<LatestBlocks>& by_setting, std::vector<Cell>& heads) {
    std::vector<Cell> taken;
    for (std::size_t rank = 0; taken.size() < most_heads_of_subarea; ++rank) {
        bool any = false;
        for (const LatestBlocks& latest : by_setting) {
            if (rank >= latest.blocks().size() || taken.size() == most_heads_of_subarea) continue;
            any = true;
            const Cell cell = latest.blocks()[rank].cell;
            if (std::find(taken.begin(), taken.end(), cell) == taken.end()) taken.push_back(cell);
        }
        if (!any) break;
    }
    heads.insert(heads.end(), taken.begin(), taken.end());
}

/// The settings by groups.
std::vector<SettingGroup> grouped(std::span<const TravelSetting> settings, const std::vector<SettingFactors>& factors) {
    constexpr std::size_t lanes = up::Lanes::count;
    std::vector<SettingGroup> groups((settings.size() + lanes - 1) / lanes);
    for (std::size_t i = 0; i < groups.size(); ++i) {
        SettingGroup& group = groups[i];
        group.first = i * lanes;
        group.fixed.resize(factors.front().fixed.size());
        for (std::size_t lane = 0; lane < lanes; ++lane) {
            const std::size_t number = std::min(group.first + lane, settings.size() - 1);
            group.setting[lane] = &settings[number];
            group.factors[lane] = &factors[number];
            for (std::size_t sort = 0; sort < group.fixed.size(); ++sort) group.fixed[sort][lane] = factors[number].fixed[sort];
        }
    }
    return groups;
}

/// The time of a step under each setting of a group.
up::Lanes step_times(const SettingGroup& group, const SortedDesk& at, Local cell, const SheetTable& table) {
    up::Lanes times;
    const std::uint32_t sort = at.sort[cell];
    if (sort >= group.fixed.size()) {
        const SheetStep& step = at.sheet[sort - group.fixed.size()];
        for (std::size_t lane = 0; lane < up::Lanes::count; ++lane) {
            times.total[lane] = to_fixed(sheet_step_time(step, *group.setting[lane], group.factors[lane]->roughness[step.surface], table));
        }
        return times;
    }
    const auto base = static_cast<double>(at.desk.step[cell].fixed);
    for (std::size_t lane = 0; lane < up::Lanes::count; ++lane) times.total[lane] = nearest_whole(base * group.fixed[sort][lane]);
    return times;
}

/// Times to the root under the settings of a group.
auto time_channel(const SettingGroup& group, const SortedDesk& at, const SheetTable& table) {
    return up::AddLanes{[&group, &at, &table](Local cell) { return step_times(group, at, cell, table); }};
}

using TimeChannel = decltype(time_channel(std::declval<SettingGroup&>(), std::declval<SortedDesk&>(), std::declval<SheetTable&>()));

class Candidates {
public:
    Candidates(const TiledTravel& travel, const TiledOwners& owners, std::span<const TravelSetting> settings)
        : travel_(travel), owners_(owners), settings_(settings), table_(travel.rules().sheet.formula) {
        for (const TravelSetting& setting : settings) {
            greatest_limit_ = std::max(greatest_limit_, in_metres(setting.rules.sheet.limit));
            factors_.push_back(factors_of(setting, travel.rules(), travel.ground().surface.classes));
        }
        groups_ = grouped(settings, factors_);
        borders_.assign(groups_.size(), UpBorders<up::Lanes>(travel.ground().forest));
    }

    std::vector<Cell> find() {
        for_each_sorted([&](Tile tile, SortedDesk& at) {
            owners_.read_tile(tile, at.desk);
            count_cells(at.desk);
            for (std::size_t i = 0; i < groups_.size(); ++i) {
                collect_up(tile, at.desk.flow, borders_[i].part(time_channel(groups_[i], at, table_), at.time));
            }
        });
        for (auto& border : borders_) border.solve<TimeChannel>();
        for_each_sorted([&](Tile tile, SortedDesk& at) {
            owners_.read_tile(tile, at.desk);
            list_heads(at);
            for (std::size_t i = 0; i < groups_.size(); ++i) {
                fill_up(tile, at.desk.flow, borders_[i].part(time_channel(groups_[i], at, table_), at.time));
                keep_last(groups_[i], at);
            }
        });
        return cells();
    }

private:
    template <class Work>
    void for_each_sorted(Work work) {
        const TiledForest& forest = travel_.ground().forest;
        travel_.executor().for_each(forest.tiles().count(), [&](std::size_t tile) {
            const auto at = desks_.lease();
            travel_.read_tile(static_cast<Tile>(tile), at->desk);
            sort_steps(*at);
            work(static_cast<Tile>(tile), *at);
        });
    }

    void sort_steps(SortedDesk& at) const {
        const auto sorts = static_cast<std::uint32_t>(sort_of(0) + travel_.ground().surface.classes.size());
        const auto overland_floor = static_cast<float>(std::max(travel_.rules().slope.overland_floor, least_slope));
        const auto channel_floor = static_cast<float>(std::max(travel_.rules().slope.channel_floor, least_slope));
        at.sort.assign(at.desk.flow.size(), 0);
        at.sheet.clear();
        for (const Local local : at.desk.flow.order()) {
            const Cell cell = at.desk.flow.cell(local);
            const GroundKind kind = travel_.kind(cell);
            if (kind == GroundKind::overland && from_fixed(at.desk.from_divide[local]) < greatest_limit_) {
                if (at.desk.length[local] == 0) continue;
                at.sort[local] = 2 * sorts + static_cast<std::uint32_t>(at.sheet.size());
                at.sheet.push_back(sheet_step(at.desk, local));
                continue;
            }
            const float floor = kind == GroundKind::overland ? overland_floor : channel_floor;
            const auto sort = static_cast<std::uint32_t>(sort_of_step(at.desk, local, kind));
            at.sort[local] = sort + (travel_.slope(cell) <= floor ? sorts : 0);
        }
    }

    [[nodiscard]] double ponded_m(const TileDesk& desk, Local local) const {
        return (desk.spill[local] - desk.elevation[local]) * travel_.ground().metres_per_elevation_unit;
    }

    [[nodiscard]] SheetStep sheet_step(const TileDesk& desk, Local local) const {
        const Cell cell = desk.flow.cell(local);
        const double depth = ponded_m(desk, local);
        const bool is_ponded = depth > in_metres(travel_.rules().pond.depth);
        const double length = from_fixed(desk.length[local]);
        const float slope = travel_.slope(cell);
        return {.surface = travel_.ground().surface.index[cell],
                .length_m = static_cast<float>(length),
                .from_divide_m = static_cast<float>(from_fixed(desk.from_divide[local])),
                .index_m = static_cast<float>(from_fixed(desk.sheet_index[local])),
                .slope = slope,
                .steepness_m = static_cast<float>(length / static_cast<double>(std::sqrt(slope))),
                .celerity = is_ponded ? static_cast<float>(in_metres_per_second(wave_celerity(metres(depth)))) : 0.0F};
    }

    [[nodiscard]] std::size_t sort_of_step(const TileDesk& desk, Local local, GroundKind kind) const {
        const double depth = ponded_m(desk, local);
        const PondRules& pond = travel_.rules().pond;
        if (depth > in_metres(pond.depth)) {
            const Speed celerity = wave_celerity(metres(depth));
            const double wave_s = from_fixed(desk.length[local]) / in_metres_per_second(std::min(celerity, pond.speed));
            const bool is_wave = std::abs(desk.step[local].fixed - to_fixed(wave_s)) <= 1;
            if (is_wave) return static_cast<std::size_t>(celerity > pond.speed ? StepSort::capped_wave : StepSort::free_wave);
        }
        switch (kind) {
            case GroundKind::overland: return sort_of(travel_.ground().surface.index[desk.flow.cell(local)]);
            case GroundKind::channel: return static_cast<std::size_t>(StepSort::channel);
            case GroundKind::water: return static_cast<std::size_t>(StepSort::water);
        }
        return 0;
    }

    /// How many cells each subarea has, as far as they lie in the tile.
    void count_cells(const TileDesk& desk) {
        std::unordered_map<std::uint32_t, std::int64_t> cells;
        for (Local local = 0; local < desk.flow.size(); ++local) ++cells[desk.owner[local]];
        const std::lock_guard lock(mutex_);
        for (const auto& [owner, count] : cells) cells_of_[owner] += count;
    }

    /// Lists the cells that nothing drains to, each in a block of its subarea.
    void list_heads(SortedDesk& at) const {
        std::map<HeadBlock, std::uint32_t> place;
        at.heads.clear();
        at.blocks.clear();
        const std::int64_t columns = travel_.ground().forest.codes().columns();
        for (Local local = 0; local < at.desk.flow.size(); ++local) {
            const std::uint32_t owner = at.desk.owner[local];
            if (owner == 0 || at.desk.from_divide[local] > 0) continue;
            const std::int64_t side = block_side(cells_of_.at(owner));
            const Cell cell = at.desk.flow.cell(local);
            const HeadBlock block{owner, cell / columns / side * columns + cell % columns / side};
            const auto [found, is_new] = place.emplace(block, static_cast<std::uint32_t>(place.size()));
            if (is_new) at.blocks.push_back(block);
            at.heads.push_back({local, found->second});
        }
    }

    /// The last head of each block of each subarea under each setting of a group, as far as they lie in the tile.
    void keep_last(const SettingGroup& group, const SortedDesk& at) {
        const std::size_t lanes = std::min(up::Lanes::count, settings_.size() - group.first);
        std::vector<BlockLast> last(at.blocks.size() * lanes);
        for (const HeadCell& head : at.heads) {
            const up::Lanes& time = at.time[head.cell];
            for (std::size_t lane = 0; lane < lanes; ++lane) {
                BlockLast& kept = last[head.block * lanes + lane];
                if (time.total[lane] > kept.time) kept = {time.total[lane], at.desk.flow.cell(head.cell), at.blocks[head.block].number};
            }
        }
        const std::lock_guard lock(mutex_);
        for (std::size_t block = 0; block < at.blocks.size(); ++block) {
            std::vector<LatestBlocks>& latest = latest_[at.blocks[block].subarea];
            latest.resize(settings_.size());
            for (std::size_t lane = 0; lane < lanes; ++lane) latest[group.first + lane].add(last[block * lanes + lane]);
        }
    }

    [[nodiscard]] std::vector<Cell> cells() const {
        std::vector<Cell> cells;
        for (const auto& [owner, latest] : latest_) take_heads(latest, cells);
        std::sort(cells.begin(), cells.end());
        return cells;
    }

    const TiledTravel& travel_;
    const TiledOwners& owners_;
    std::span<const TravelSetting> settings_;
    SheetTable table_;
    double greatest_limit_ = 0.0;   ///< m
    std::vector<SettingFactors> factors_;
    std::vector<SettingGroup> groups_;
    std::vector<UpBorders<up::Lanes>> borders_;   ///< by group
    Workspaces<SortedDesk> desks_;
    std::mutex mutex_;
    std::unordered_map<std::uint32_t, std::int64_t> cells_of_;     ///< of each subarea
    std::map<std::uint32_t, std::vector<LatestBlocks>> latest_;   ///< by subarea, then by setting
};

}  // namespace

std::vector<Cell> candidate_heads(const TiledTravel& travel, const TiledOwners& owners, std::span<const TravelSetting> settings) {
    return Candidates(travel, owners, settings).find();
}

}  // namespace rillclock
