#include "rillclock/travel/design_flow.hpp"

#include <cmath>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/gutter.hpp"

namespace rillclock {
namespace {

/// The one of two waters that arrives later under the storm factor.
StepTime later(const StepTime& a, const StepTime& b, double storm_factor) {
    return a.under(storm_factor) < b.under(storm_factor) ? b : a;
}

class Passing {
public:
    Passing(std::span<const MappedSection> mapped, const DesignSection& section, const DesignRain& rain, const TravelRules& rules)
        : mapped_(mapped), section_(section), rain_(rain), rules_(rules) {}

    ChannelReaches pass(std::span<const NetworkCell> cells) {
        ChannelReaches reaches;
        std::vector<StepTime> arrival;
        for (const NetworkCell& cell : cells) arrival.push_back(cell.overland);
        for (std::size_t i = 0; i < cells.size(); ++i) {
            StepView step = cells[i].step;
            ChannelReach reach;
            if (step.kind == GroundKind::channel) {
                reach = reach_at(cells[i], arrival[i]);
                step.reach = &reach;
                reaches.emplace(cells[i].cell, reach);
            }
            if (cells[i].next == NetworkCell::no_next) continue;
            StepTime& below = arrival[cells[i].next];
            below = later(below, arrival[i] + step_parts(step, rules_).time(), rules_.sheet.storm_factor);
        }
        return reaches;
    }

private:
    /// When the water arrives and how hard it rains for so long.
    struct Arrival {
        Duration time;
        Intensity intensity;
    };

    [[nodiscard]] Arrival arrival_of(const StepTime& water) const {
        if (!rain_.drives_sheet_flow) {
            const Duration time = water.under(rules_.sheet.storm_factor);
            const std::optional<Intensity> intensity = rain_.intensity(time);
            if (!intensity) throw beyond(time);
            return {time, *intensity};
        }
        const StormTime storm = solve_storm_time([&](Intensity i) { return water.under(kinematic_storm_factor(i)); }, rain_.intensity);
        if (storm.end != StormEnd::settled) throw beyond(storm.rows.empty() ? seconds(0) : storm.time());
        return {storm.time(), storm.intensity()};
    }

    [[nodiscard]] static Error beyond(Duration time) {
        return input_error("channel flow by the design storm needs an intensity for every arrival, and a channel is reached after " +
                           significant(in_minutes(time), 4) + " min, for which the rain has none; give rain for longer durations");
    }

    [[nodiscard]] ChannelReach reach_at(const NetworkCell& cell, const StepTime& water) const {
        const Arrival arrival = arrival_of(water);
        const Discharge flow = Discharge::from_si(arrival.intensity.si() * cell.runoff_area_m2);
        if (!(flow.si() > 0)) throw input_error("channel flow by the design storm needs runoff, and none reaches a channel whose whole catchment has a runoff "
                                                "coefficient of 0; give the cover book another, or begin channels later");
        ChannelReach reach = filled(cell.step, flow);
        reach.flow.arrival_s = in_seconds(arrival.time);
        reach.flow.intensity = arrival.intensity;
        reach.flow.runoff_area_m2 = cell.runoff_area_m2;
        reach.flow.m3_per_s = flow.si();
        reach.flow.slope = cell.step.slope;
        return reach;
    }

    [[nodiscard]] ChannelReach filled(const StepView& step, Discharge flow) const {
        const MappedSection* mapped = step.reach && step.reach->section != no_section ? &mapped_[step.reach->section] : nullptr;
        const double n = mapped != nullptr ? mapped->n : rules_.channel.n;
        MappedSection now = mapped != nullptr ? *mapped : MappedSection{.n = n};
        switch (now.shape) {
            case SectionShape::by_area:
                now.trapezoid = {section_.bottom_width(square_metres(from_fixed_area(step.area))), section_.side_slope};
                break;
            case SectionShape::trapezoid: break;
            case SectionShape::gutter: return filled_gutter(step, now, flow);
        }
        now.shape = SectionShape::trapezoid;
        now.depth = normal_depth(now.trapezoid, flow, {.n = n, .slope = step.slope});
        ChannelReach reach = reach_of(now, step.reach ? step.reach->section : no_section);
        reach.flow.bottom_width_m = in_metres(now.trapezoid.bottom_width);
        reach.flow.side_slope = now.trapezoid.side_slope;
        reach.flow.depth_m = in_metres(now.depth);
        return reach;
    }

    [[nodiscard]] static ChannelReach filled_gutter(const StepView& step, MappedSection now, Discharge flow) {
        now.spread = gutter_spread({.n = now.n, .cross_slope = now.cross_fall, .slope = step.slope}, flow);
        ChannelReach reach = reach_of(now, step.reach->section);
        reach.flow.side_slope = 1.0 / now.cross_fall;
        reach.flow.depth_m = now.cross_fall * in_metres(now.spread);
        return reach;
    }

    std::span<const MappedSection> mapped_;
    const DesignSection& section_;
    const DesignRain& rain_;
    const TravelRules& rules_;
};

}  // namespace

ChannelReaches design_reaches(const ChannelNetwork& network, std::span<const MappedSection> mapped, const DesignSection& section,
                              const DesignRain& rain, const TravelRules& rules) {
    return Passing(mapped, section, rain, rules).pass(network.cells());
}

}  // namespace rillclock
