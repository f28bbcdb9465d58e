#include "scaled_steps.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "channel_factor.hpp"
#include "rillclock/hydraulics/open_water.hpp"

namespace rillclock {
namespace {

constexpr float never = std::numeric_limits<float>::infinity();

float in_units(double seconds) { return static_cast<float>(seconds) * lane_units_per_second; }

double floor_factor(double base, double floor) { return std::sqrt(std::max(base, least_slope) / std::max(floor, least_slope)); }

/// How many times rougher a class is under a setting.
double roughness(const SurfaceHydraulics& changed, const SurfaceHydraulics& base) {
    return base.sheet_n > 0 ? changed.sheet_n / base.sheet_n : 1.0;
}

}  // namespace

ScaledSteps::ScaledSteps(const TiledTravel& travel, std::span<const TravelSetting> settings)
    : travel_(travel), sorts_(travel.ground().surface.classes.size()), least_limit_(never),
      least_index_room_(travel.ground().surface.classes.size(), never) {
    for (std::size_t first = 0; first < settings.size(); first += up::Lanes::count) add_group(settings.subspan(first));
    for (std::size_t i = 0; i < groups_.size(); ++i) groups_[i].first = i * up::Lanes::count;
}

void ScaledSteps::add_group(std::span<const TravelSetting> settings) {
    const std::size_t surfaces = least_index_room_.size();
    SettingGroup group{.factor = std::vector<LaneFigures>(sorts_.count()), .index_room = std::vector<LaneFigures>(surfaces)};
    for (std::size_t lane = 0; lane < up::Lanes::count; ++lane) {
        const TravelSetting& setting = settings[std::min(lane, settings.size() - 1)];
        const std::vector<float> factors = factors_of(setting);
        for (std::size_t sort = 0; sort < factors.size(); ++sort) group.factor[sort][lane] = factors[sort];
        for (std::size_t i = 0; i < surfaces; ++i) {
            const double rougher = roughness(setting.classes[i], travel_.ground().surface.classes[i]);
            group.index_room[i][lane] = static_cast<float>(in_metres(setting.rules.sheet.index_limit) / rougher);
            least_index_room_[i] = std::min(least_index_room_[i], group.index_room[i][lane]);
        }
        group.limit[lane] = static_cast<float>(in_metres(setting.rules.sheet.limit));
        group.least_wave[lane] = in_units(1.0 / in_metres_per_second(setting.rules.pond.speed));
        least_limit_ = std::min(least_limit_, group.limit[lane]);
        greatest_limit_ = std::max(greatest_limit_, group.limit[lane]);
    }
    groups_.push_back(std::move(group));
}

std::vector<float> ScaledSteps::factors_of(const TravelSetting& setting) const {
    const TravelRules& base = travel_.rules();
    const TravelRules& rules = setting.rules;
    const std::vector<SurfaceHydraulics>& classes = travel_.ground().surface.classes;
    std::vector<float> factors(sorts_.count(), 1.0F);
    const auto set = [&](std::uint32_t sort, double factor) { factors[sort] = static_cast<float>(factor); };
    const double channel = channel_factor(rules.channel, base.channel);
    set(StepSorts::channel, channel);
    set(sorts_.on_floor(StepSorts::channel), channel * floor_factor(base.slope.channel_floor, rules.slope.channel_floor));
    set(StepSorts::capped_wave, std::isfinite(in_metres_per_second(rules.pond.speed)) ? base.pond.speed / rules.pond.speed : 0.5);
    for (std::uint32_t i = 0; i < classes.size(); ++i) {
        if (!(classes[i].sheet_n > 0)) continue;  // open water
        const double shallow = classes[i].shallow_k / setting.classes[i].shallow_k;
        set(sorts_.shallow(i), shallow);
        set(sorts_.on_floor(sorts_.shallow(i)), shallow * floor_factor(base.slope.overland_floor, rules.slope.overland_floor));
        // T(u) is a power of u, so a rougher way takes as many times longer wherever on it a step lies.
        set(sorts_.sheet(i), std::pow(roughness(setting.classes[i], classes[i]), base.sheet.formula.exponent) *
                                 setting.classes[i].sheet_factor / classes[i].sheet_factor * rules.sheet.storm_factor /
                                 base.sheet.storm_factor);
    }
    return factors;
}

void ScaledSteps::sort(const TileDesk& desk, ScaledTile& tile) const {
    const auto overland_floor = static_cast<float>(std::max(travel_.rules().slope.overland_floor, least_slope));
    const auto channel_floor = static_cast<float>(std::max(travel_.rules().slope.channel_floor, least_slope));
    tile.step.assign(desk.flow.size(), {});
    tile.sheet.clear();
    for (const Local local : desk.flow.order()) {
        if (desk.length[local] == 0) continue;
        const Cell cell = desk.flow.cell(local);
        const GroundKind kind = travel_.kind(cell);
        const bool is_overland = kind == GroundKind::overland;
        if (is_overland && static_cast<float>(from_fixed(desk.from_divide[local])) < greatest_limit_) {
            SheetStep step = sheet_step(desk, local);
            if (travel_.slope(cell) <= overland_floor) step.shallow_sort = sorts_.on_floor(step.shallow_sort);
            if (is_always_sheet(step)) {
                tile.step[local] = {step.sheet, step.sheet_sort};
                continue;
            }
            tile.step[local].sort = sorts_.count() + static_cast<std::uint32_t>(tile.sheet.size());
            tile.sheet.push_back(step);
            continue;
        }
        const std::uint32_t sort = sort_of(desk, local, kind);
        const bool is_on_floor = travel_.slope(cell) <= (is_overland ? overland_floor : channel_floor);
        const bool has_floor = sort == StepSorts::channel || sort >= sorts_.shallow(0);
        tile.step[local] = {in_units(from_fixed(desk.step[local].fixed)), is_on_floor && has_floor ? sorts_.on_floor(sort) : sort};
    }
}

bool ScaledSteps::is_always_sheet(const SheetStep& step) const {
    return step.wave == never && step.from_divide + step.length <= least_limit_ &&
           (least_index_room_[step.surface] - step.index) * step.per_index_step >= 1.0F;
}

SheetStep ScaledSteps::sheet_step(const TileDesk& desk, Local local) const {
    const Cell cell = desk.flow.cell(local);
    const std::uint32_t surface = travel_.ground().surface.index[cell];
    const SurfaceHydraulics& hydraulics = travel_.ground().surface.classes[surface];
    const SheetRules& rules = travel_.rules().sheet;
    const double length = from_fixed(desk.length[local]);
    const auto slope = static_cast<double>(travel_.slope(cell));
    const double index = from_fixed(desk.sheet_index[local]);
    const double index_step = hydraulics.sheet_n * length / std::sqrt(slope);
    const double depth = ponded_m(desk, local);
    const bool is_ponded = depth > in_metres(travel_.rules().pond.depth);
    const Duration sheet = rules.formula.at_unit_storm(metres(index), metres(index + index_step));
    return {.sheet_sort = sorts_.sheet(surface), .shallow_sort = sorts_.shallow(surface), .surface = surface,
            .sheet = in_units(hydraulics.sheet_factor * rules.storm_factor * in_seconds(sheet)),
            .shallow = in_units(length / in_metres_per_second(shallow_speed(hydraulics, slope))),
            .wave = is_ponded ? in_units(length / in_metres_per_second(wave_celerity(metres(depth)))) : never,
            .length = static_cast<float>(length), .from_divide = static_cast<float>(from_fixed(desk.from_divide[local])),
            .index = static_cast<float>(index), .per_index_step = static_cast<float>(1.0 / std::max(index_step, 1e-30))};
}

up::Lanes ScaledSteps::sheet_times(const SettingGroup& group, const SheetStep& step) {
    const LaneFigures& sheet_factor = group.factor[step.sheet_sort];
    const LaneFigures& shallow_factor = group.factor[step.shallow_sort];
    const LaneFigures& index_room = group.index_room[step.surface];
    const float per_length = 1.0F / step.length;
    up::Lanes times;
    for (std::size_t lane = 0; lane < up::Lanes::count; ++lane) {
        const float by_length = (group.limit[lane] - step.from_divide) * per_length;
        const float by_index = (index_room[lane] - step.index) * step.per_index_step;
        float share = by_length < by_index ? by_length : by_index;
        share = share < 1.0F ? share : 1.0F;
        share = share > 0.0F ? share : 0.0F;
        const float own = share * step.sheet * sheet_factor[lane] + (1.0F - share) * step.shallow * shallow_factor[lane];
        const float capped = group.least_wave[lane] * step.length;
        const float wave = capped > step.wave ? capped : step.wave;
        times.total[lane] = in_lane(own < wave ? own : wave);
    }
    return times;
}

double ScaledSteps::ponded_m(const TileDesk& desk, Local local) const {
    return (desk.spill[local] - desk.elevation[local]) * travel_.ground().metres_per_elevation_unit;
}

std::uint32_t ScaledSteps::sort_of(const TileDesk& desk, Local local, GroundKind kind) const {
    const double depth = ponded_m(desk, local);
    const PondRules& pond = travel_.rules().pond;
    if (depth > in_metres(pond.depth)) {
        const Speed celerity = wave_celerity(metres(depth));
        const double wave_s = from_fixed(desk.length[local]) / in_metres_per_second(std::min(celerity, pond.speed));
        const bool is_wave = std::abs(desk.step[local].fixed - to_fixed(wave_s)) <= 1;
        if (is_wave) return celerity > pond.speed ? StepSorts::capped_wave : StepSorts::free_wave;
    }
    switch (kind) {
        case GroundKind::overland: return sorts_.shallow(travel_.ground().surface.index[desk.flow.cell(local)]);
        case GroundKind::channel: return StepSorts::channel;
        case GroundKind::water: return StepSorts::water;
    }
    return StepSorts::water;
}

}  // namespace rillclock
