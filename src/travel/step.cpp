#include "rillclock/travel/step.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/hydraulics/open_water.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"

namespace rillclock {
namespace {

/// How far sheet flow still runs along a step.
struct SheetReach {
    double share = 0.0;           ///< of the step, from its upper end
    FixedLength index_step = 0;   ///< of the whole step; made only where there is a share
};

FixedTime storm_time(const SheetRules& sheet, FixedLength index) {
    if (index == 0) return 0;  // at a divide, where a third of all cells lie; the power would be asked in vain
    return to_fixed(in_seconds(sheet.formula.at_unit_storm(metres(from_fixed(index)))));
}

/// Where nothing is shared with other steps.
struct OwnSheet {
    static FixedLength index_step(const StepView& step) { return sheet_index_step(step); }
    static FixedTime time_at_begin(const SheetRules& sheet, FixedLength index) { return storm_time(sheet, index); }
    static FixedTime time_at_end(const SheetRules& sheet, FixedLength index) { return storm_time(sheet, index); }
};

template <class Shared>
SheetReach sheet_reach(const StepView& step, const SheetRules& sheet, const Shared& shared) {
    if (step.kind != GroundKind::overland) return {};
    const double length_left = in_metres(sheet.limit) - from_fixed(step.from_divide);
    const double index_left = in_metres(std::min(sheet.index_limit, sheet_is_over)) - from_fixed(step.sheet_index);
    if (!(length_left > 0 && index_left > 0)) return {};
    const double length = from_fixed(step.length);
    const FixedLength index_step = shared.index_step(step);
    const double index = from_fixed(index_step);
    const double by_length = length > length_left ? length_left / length : 1.0;
    const double by_index = index > index_left ? index_left / index : 1.0;
    return {std::min(by_length, by_index), index_step};
}

StepPart characteristic_part(const StepView& step, const SheetRules& sheet, double share) {
    StepPart part;
    part.regime = Regime::sheet;
    part.length_m = share * from_fixed(step.length);
    part.slope = step.slope;
    part.index_from_m = from_fixed(step.from_divide);
    part.index_to_m = part.index_from_m + part.length_m;
    const SheetStretch stretch{.n = step.surface->sheet_n, .length = metres(part.length_m), .slope = step.slope};
    const Duration time = sheet.formula.along_characteristic(stretch, metres(part.index_from_m));
    part.time.storm = to_fixed(step.surface->sheet_factor * in_seconds(time));
    return part;
}

template <class Shared>
StepPart index_part(const StepView& step, const SheetRules& sheet, const SheetReach& reach, const Shared& shared) {
    const FixedLength index_to = step.sheet_index + nearest_whole(reach.share * static_cast<double>(reach.index_step));
    StepPart part;
    part.regime = Regime::sheet;
    part.length_m = reach.share * from_fixed(step.length);
    part.slope = step.slope;
    part.index_from_m = from_fixed(step.sheet_index);
    part.index_to_m = from_fixed(index_to);
    // Both ends are rounded alike in the cell before and after, so that times telescope along a path.
    part.time.storm = shared.time_at_end(sheet, index_to) - shared.time_at_begin(sheet, step.sheet_index);
    return part;
}

template <class Shared>
StepPart sheet_part(const StepView& step, const SheetRules& sheet, const SheetReach& reach, const Shared& shared) {
    switch (sheet.basis) {
        case SheetBasis::index: return index_part(step, sheet, reach, shared);
        case SheetBasis::characteristic: return characteristic_part(step, sheet, reach.share);
    }
    return {};
}

StepPart moving_part(const StepView& step, Regime regime, double length_m, Speed speed) {
    StepPart part;
    part.regime = regime;
    part.length_m = length_m;
    part.slope = step.slope;
    part.speed_m_per_s = in_metres_per_second(speed);
    part.time.fixed = to_fixed(length_m / part.speed_m_per_s);
    return part;
}

StepPart shallow_part(const StepView& step, double length_m) {
    return moving_part(step, Regime::shallow, length_m, shallow_speed(*step.surface, step.slope));
}

StepPart channel_part(const StepView& step, const ChannelRules& channel) {
    const Length radius = channel_radius(step, channel);
    const Speed speed = manning_velocity({.n = channel_n(step, channel), .hydraulic_radius = radius, .slope = step.slope});
    StepPart part = moving_part(step, Regime::channel, from_fixed(step.length), speed);
    part.radius_m = in_metres(radius);
    return part;
}

StepPart water_part(const StepView& step) {
    return moving_part(step, Regime::water, from_fixed(step.length), wave_celerity(step.surface->water_depth.value()));
}

/// Gives a part on ponded ground the wave's time where that is the shorter one.
void hasten_over_pond(const StepView& step, const TravelRules& rules, StepPart& part) {
    if (!(step.ponded_m > in_metres(rules.pond.depth)) || part.regime == Regime::none) return;
    const Speed speed = std::min(wave_celerity(metres(step.ponded_m)), rules.pond.speed);
    const double wave_s = part.length_m / in_metres_per_second(speed);
    if (!(wave_s < in_seconds(part.time.under(rules.sheet.storm_factor)))) return;
    part.ponded = true;
    part.speed_m_per_s = in_metres_per_second(speed);
    part.time = {.fixed = to_fixed(wave_s), .storm = 0};
}

template <class Shared, class Take>
void cut_overland(const StepView& step, const TravelRules& rules, const Shared& shared, Take take) {
    const SheetReach reach = sheet_reach(step, rules.sheet, shared);
    if (reach.share <= 0.0) return take(shallow_part(step, from_fixed(step.length)));
    take(sheet_part(step, rules.sheet, reach, shared));
    if (reach.share < 1.0) take(shallow_part(step, (1.0 - reach.share) * from_fixed(step.length)));
}

/// Calls `take(part)` for each part of a step, from its upper end. What a caller does not read of a part is then never made.
template <class Shared, class Take>
void cut_step(const StepView& step, const TravelRules& rules, const Shared& shared, Take take) {
    if (step.length == 0) return;
    const auto hasten_and_take = [&](StepPart part) {
        hasten_over_pond(step, rules, part);
        take(part);
    };
    switch (step.kind) {
        case GroundKind::overland: return cut_overland(step, rules, shared, hasten_and_take);
        case GroundKind::channel: return hasten_and_take(channel_part(step, rules.channel));
        case GroundKind::water: return hasten_and_take(water_part(step));
    }
}

// Flattened, so that the compiler sees what of the parts nobody reads: copying them was most of the cost.
template <class Shared>
[[gnu::flatten]] StepOutcome outcome_of(const StepView& step, const TravelRules& rules, const Shared& shared) {
    StepOutcome outcome;
    cut_step(step, rules, shared, [&](const StepPart& part) {
        outcome.time += part.time;
        if (outcome.regime == Regime::none) outcome.regime = part.regime;
    });
    if (outcome.regime == Regime::none) outcome.regime = first_regime(step, rules);
    return outcome;
}

}  // namespace

double channel_n(const StepView& step, const ChannelRules& rules) { return step.reach ? step.reach->n : rules.n; }

Length channel_radius(const StepView& step, const ChannelRules& rules) {
    if (step.reach && step.reach->radius_m > 0) return metres(step.reach->radius_m);
    return rules.radius_at(square_metres(from_fixed_area(step.area)));
}

Speed shallow_speed(const SurfaceHydraulics& surface, double slope) {
    return surface.shallow_line ? surface.shallow_line->at(slope) : shallow_velocity(surface.shallow_k, slope);
}

FixedLength sheet_index_step(const StepView& step) {
    if (step.length == 0) return 0;
    if (step.kind != GroundKind::overland) return to_fixed(in_metres(sheet_is_over));
    return to_fixed(step.surface->sheet_n * from_fixed(step.length) / std::sqrt(step.slope));
}

StepParts step_parts(const StepView& step, const TravelRules& rules) {
    StepParts parts;
    cut_step(step, rules, OwnSheet{}, [&](const StepPart& part) {
        (parts.first.regime == Regime::none ? parts.first : parts.second) = part;
    });
    return parts;
}

FixedTime SharedSheet::time_at_begin(const SheetRules& sheet, FixedLength index) const {
    if (here_ == unknown) here_ = storm_time(sheet, index);
    return here_;
}

FixedTime SharedSheet::time_at_end(const SheetRules& sheet, FixedLength index) const {
    if (index != index_below_) return storm_time(sheet, index);
    if (below_ == unknown) below_ = storm_time(sheet, index);
    return below_;
}

StepOutcome step_outcome(const StepView& step, const TravelRules& rules) { return outcome_of(step, rules, OwnSheet{}); }
StepOutcome step_outcome(const StepView& step, const TravelRules& rules, const SharedSheet& shared) { return outcome_of(step, rules, shared); }

Regime first_regime(const StepView& step, const TravelRules& rules) {
    if (step.kind == GroundKind::channel) return Regime::channel;
    if (step.kind == GroundKind::water) return Regime::water;
    return sheet_reach(step, rules.sheet, OwnSheet{}).share > 0.0 ? Regime::sheet : Regime::shallow;
}

}  // namespace rillclock
