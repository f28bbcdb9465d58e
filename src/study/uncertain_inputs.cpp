#include "rillclock/study/uncertain_inputs.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <memory>
#include <random>
#include <string_view>
#include <utility>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

/// Ranges of ours, as factors on what the study has. The handbooks print no ranges for these but for two: ponded speed, where the
/// range is 1 m/s to no cap, and the low end of sheet flow, 80 ft of 100 (HEC-22, 3rd ed., section 3.2.2, from memory).
constexpr ValueRange own_rain{0.85, 1.15};
constexpr ValueRange own_sheet_limit{0.8, 1.5};
constexpr ValueRange own_shallow_speed{0.75, 1.33};
constexpr ValueRange own_floor{0.5, 2.0};
constexpr ValueRange own_channel_n{0.67, 1.5};
constexpr ValueRange own_channel_radius{0.7, 1.4};
constexpr double own_least_pond_speed = 1.0;  // m/s

constexpr const char* ours = "rillclock's own judgement";

/// A rule of a study with its range.
struct Rule {
    UncertainKind kind;
    std::string_view key;    ///< in the study's [uncertainty]
    std::string_view name;
    std::string_view unit;
    double typical;
    std::optional<ValueRange> stated;
    ValueRange own;
};

ValueRange times(double value, const ValueRange& factors) { return {value * factors.low, value * factors.high}; }

std::vector<Rule> rules_with_ranges(const Study& study) {
    const UncertaintyStudy stated = study.uncertainty.value_or(UncertaintyStudy{});
    const TimingStudy& timing = study.timing;
    const double limit = in_metres(timing.sheet_limit);
    const double pond = in_metres_per_second(study.terrain.pond_speed);
    constexpr double unlimited = std::numeric_limits<double>::infinity();
    return {{UncertainKind::rain, "rain", "rain", "factor", 1.0, stated.rain, own_rain},
            {UncertainKind::sheet_limit, "sheet_limit", "sheet limit", "m", limit, stated.sheet_limit, times(limit, own_sheet_limit)},
            {UncertainKind::shallow_speed, "shallow_speed", "speed of shallow flow", "factor", 1.0, stated.shallow_speed,
             own_shallow_speed},
            {UncertainKind::overland_floor, "slope_floor_overland", "slope floor overland", "slope", timing.slope_floor_overland,
             stated.slope_floor_overland, times(timing.slope_floor_overland, own_floor)},
            {UncertainKind::channel_floor, "slope_floor_channel", "slope floor in channels", "slope", timing.slope_floor_channel,
             stated.slope_floor_channel, times(timing.slope_floor_channel, own_floor)},
            {UncertainKind::channel_n, "channel_n", "n of channels", "", timing.channel.n, stated.channel_n,
             times(timing.channel.n, own_channel_n)},
            {UncertainKind::channel_radius, "channel_radius", "hydraulic radius of channels", "factor", 1.0, stated.channel_radius,
             own_channel_radius},
            {UncertainKind::pond_speed, "pond_speed", "ponded speed", "m/s", pond, stated.pond_speed,
             {std::min(own_least_pond_speed, pond), unlimited}}};
}

UncertainInput roughness_of(const CoverClass& cover, std::uint8_t surface, const std::string& book) {
    return {.kind = UncertainKind::roughness, .surface = surface, .name = "n of " + cover.name, .low = cover.n_low,
            .typical = cover.n_typical, .high = cover.n_high, .source = "cover book " + book};
}

bool faster_when_high(UncertainKind kind) {
    switch (kind) {
        case UncertainKind::roughness:
        case UncertainKind::sheet_limit:
        case UncertainKind::channel_n: return false;
        case UncertainKind::rain:
        case UncertainKind::shallow_speed:
        case UncertainKind::overland_floor:
        case UncertainKind::channel_floor:
        case UncertainKind::channel_radius:
        case UncertainKind::pond_speed: return true;
    }
    return false;
}

/// Where a share of a triangle's area lies to the left.
double triangle(double low, double peak, double high, double share) {
    const double width = high - low;
    if (!(width > 0)) return low;
    const double at_peak = (peak - low) / width;
    if (share < at_peak) return low + std::sqrt(share * width * (peak - low));
    return high - std::sqrt((1.0 - share) * width * (high - peak));
}

/// FNV-1a, 64 bits.
unsigned long long hash_of(std::string_view text) {
    unsigned long long hash = 0xCBF29CE484222325ULL;
    for (const char letter : text) {
        hash ^= static_cast<unsigned char>(letter);
        hash *= 0x100000001B3ULL;
    }
    return hash;
}

/// A class whose shallow flow runs at so many times its speed, by its k or by its chart.
void scale_shallow(const SurfaceHydraulics& base, double factor, SurfaceHydraulics& surface) {
    surface.shallow_k = base.shallow_k * factor;
    if (!base.shallow_line) return;
    VelocityLine line = *base.shallow_line;
    for (VelocityPoint& point : line.points) point.velocity = point.velocity * factor;
    surface.shallow_line = std::make_shared<const VelocityLine>(std::move(line));
}

void scale_radius(ChannelRules& channel, double factor) {
    if (channel.hydraulic_radius) channel.hydraulic_radius = *channel.hydraulic_radius * factor;
    channel.width.coefficient = channel.width.coefficient * factor;
    channel.depth.coefficient = channel.depth.coefficient * factor;
}

}  // namespace

double UncertainInput::fast() const { return faster_when_high(kind) ? high : low; }
double UncertainInput::slow() const { return faster_when_high(kind) ? low : high; }

double UncertainInput::at_share(double share) const {
    if (kind != UncertainKind::pond_speed) return triangle(low, typical, high, share);
    return 1.0 / triangle(1.0 / high, 1.0 / typical, 1.0 / low, 1.0 - share);
}

std::vector<UncertainInput> uncertain_inputs(const Study& study, const CoverBook& book, const std::vector<bool>& is_met) {
    std::vector<UncertainInput> inputs;
    for (std::size_t i = 0; i < book.classes().size(); ++i) {
        const CoverClass& cover = book.classes()[i];
        if (is_met[i] && cover.n_low < cover.n_high) inputs.push_back(roughness_of(cover, static_cast<std::uint8_t>(i), book.name()));
    }
    for (const Rule& rule : rules_with_ranges(study)) {
        const ValueRange range = rule.stated.value_or(rule.own);
        if (!(range.low < range.high)) continue;  // a floor that is off
        inputs.push_back({.kind = rule.kind, .name = std::string(rule.name), .unit = std::string(rule.unit), .low = range.low,
                          .typical = rule.typical, .high = range.high, .source = rule.stated ? "study" : ours});
    }
    return inputs;
}

void put_value(const UncertainInput& input, double value, const TravelSetting& base, TravelSetting& setting) {
    switch (input.kind) {
        case UncertainKind::roughness: setting.classes[input.surface].sheet_n = value; return;
        case UncertainKind::rain:
            // Both formulas' storm factors are powers of the rain; the kinematic one has the exponent 0.6 in u.
            setting.rules.sheet.storm_factor =
                base.rules.sheet.storm_factor *
                (base.rules.sheet.formula.exponent == nrcs_sheet_formula().exponent ? 1.0 / std::sqrt(value) : std::pow(value, -0.4));
            setting.intensity_factor = value;
            return;
        case UncertainKind::sheet_limit: setting.rules.sheet.limit = metres(value); return;
        case UncertainKind::shallow_speed:
            for (std::size_t i = 0; i < base.classes.size(); ++i) scale_shallow(base.classes[i], value, setting.classes[i]);
            return;
        case UncertainKind::overland_floor: setting.rules.slope.overland_floor = value; return;
        case UncertainKind::channel_floor: setting.rules.slope.channel_floor = value; return;
        case UncertainKind::channel_n: setting.rules.channel.n = value; return;
        case UncertainKind::channel_radius:
            setting.rules.channel.hydraulic_radius = base.rules.channel.hydraulic_radius;
            setting.rules.channel.width = base.rules.channel.width;
            setting.rules.channel.depth = base.rules.channel.depth;
            scale_radius(setting.rules.channel, value);
            return;
        case UncertainKind::pond_speed: setting.rules.pond.speed = metres_per_second(value); return;
    }
}

TravelSetting setting_of(const std::vector<UncertainInput>& inputs, const std::vector<double>& values, const TravelSetting& base) {
    TravelSetting setting = base;
    for (std::size_t i = 0; i < inputs.size(); ++i) put_value(inputs[i], values[i], base, setting);
    return setting;
}

SettingBounds bounds_of(const std::vector<UncertainInput>& inputs, const TravelSetting& base) {
    const SlopeRules& slope = base.rules.slope;
    SettingBounds bounds{.greatest_sheet_limit = base.rules.sheet.limit,
                         .least_overland_floor = slope.overland_floor,
                         .least_channel_floor = slope.channel_floor,
                         .greatest_overland_floor = slope.overland_floor,
                         .greatest_channel_floor = slope.channel_floor};
    for (const UncertainInput& input : inputs) {
        if (input.kind == UncertainKind::sheet_limit) bounds.greatest_sheet_limit = metres(input.high);
        if (input.kind == UncertainKind::overland_floor) {
            bounds.least_overland_floor = input.low;
            bounds.greatest_overland_floor = input.high;
        }
        if (input.kind == UncertainKind::channel_floor) {
            bounds.least_channel_floor = input.low;
            bounds.greatest_channel_floor = input.high;
        }
    }
    return bounds;
}

std::vector<std::vector<double>> drawn_values(const std::vector<UncertainInput>& inputs, int draws, int seed) {
    std::vector<std::vector<double>> values(static_cast<std::size_t>(draws), std::vector<double>(inputs.size()));
    for (std::size_t i = 0; i < inputs.size(); ++i) {
        std::mt19937_64 stream(hash_of(inputs[i].name) ^ (static_cast<unsigned long long>(seed) * 0x9E3779B97F4A7C15ULL));
        for (auto& draw : values) draw[i] = inputs[i].at_share(static_cast<double>(stream() >> 11U) * 0x1p-53);
    }
    return values;
}

void check_uncertainty(const Study& study) {
    if (!study.uncertainty) return;
    const std::string name = study.file.empty() ? "the study" : study.file;
    if (study.timing.ignore_tail > 0) {
        throw input_error(name +
                          " asks for uncertainty and for ignore_tail; a draw times only the cells that may arrive last, so it does not know when "
                          "which share of the area has arrived. Remove ignore_tail (tables/outlets.csv tells in any run when 95 and 99 % have "
                          "arrived), or [uncertainty]");
    }
    if (study.timing.channel.design_storm) {
        throw input_error(name +
                          " asks for uncertainty and for channel flow by the design storm; there the velocity of a channel follows from all water "
                          "that arrives above it, which a draw, timing only the cells that may arrive last, does not know. Remove [uncertainty], or "
                          "flow under [timing.channel]; to see what one input does, run the study once with each of its values and compare");
    }
    for (const Rule& rule : rules_with_ranges(study)) {
        if (!rule.stated || (rule.stated->low <= rule.typical && rule.typical <= rule.stated->high)) continue;
        throw input_error(name + " states uncertainty." + std::string(rule.key) + " as " + significant(rule.stated->low) + " to " +
                          significant(rule.stated->high) + (rule.unit.empty() ? "" : " " + std::string(rule.unit)) +
                          ", which does not hold its own value, " + significant(rule.typical) + "; widen the range or change the value");
    }
}

}  // namespace rillclock
