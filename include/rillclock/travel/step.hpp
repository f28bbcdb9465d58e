#pragma once

#include <cstdint>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/travel/channel_reach.hpp"
#include "rillclock/travel/regime.hpp"
#include "rillclock/travel/slope_ahead.hpp"
#include "rillclock/travel/surface_table.hpp"

namespace rillclock {

/// The time of a step as {fixed part, storm coefficient}: its time under a storm factor s is storm · s + fixed.
struct StepTime {
    FixedTime fixed = 0;
    FixedTime storm = 0;

    StepTime& operator+=(const StepTime& other) {
        fixed += other.fixed;
        storm += other.storm;
        return *this;
    }
    bool operator==(const StepTime&) const = default;
    /// The time under a storm factor.
    [[nodiscard]] Duration under(double storm_factor) const {
        return seconds((static_cast<double>(storm) * storm_factor + static_cast<double>(fixed)) / fixed_units_per_one);
    }
};
[[nodiscard]] inline StepTime operator+(StepTime a, const StepTime& b) { return a += b; }
[[nodiscard]] inline StepTime operator-(const StepTime& a, const StepTime& b) {
    return {a.fixed - b.fixed, a.storm - b.storm};
}

/// A cell's own view of the step out of it: all that the hydraulics may know.
struct StepView {
    FixedLength length = 0;                       ///< of the step; 0 at a root
    double slope = 0.0;                           ///< slope ahead
    const SurfaceHydraulics* surface = nullptr;
    GroundKind kind = GroundKind::overland;       ///< `water` only where it is not a river
    double ponded_m = 0.0;                        ///< depth of spill elevation above the ground
    FixedArea area = 0;                           ///< contributing area
    FixedLength from_divide = 0;                  ///< distance from the divide at the cell
    FixedLength sheet_index = 0;                  ///< sheet index u at the cell
    const ChannelReach* reach = nullptr;          ///< of a channel that has one of its own
};

/// One homogeneous part of a step. A step has one, or two where sheet flow ends within it.
struct StepPart {
    Regime regime = Regime::none;
    bool ponded = false;              ///< carried by wave celerity, whatever the regime
    double length_m = 0.0;
    double slope = 0.0;
    double index_from_m = 0.0;        ///< sheet only: sheet index at both ends, or distance from the divide, by SheetBasis
    double index_to_m = 0.0;
    double radius_m = 0.0;            ///< hydraulic radius; channel only
    double speed_m_per_s = 0.0;       ///< of all but unponded sheet flow
    StepTime time;
};

/// The parts of one step, in the order of the flow.
struct StepParts {
    StepPart first;
    StepPart second;   ///< regime none where there is no second part
    [[nodiscard]] StepTime time() const { return first.time + second.time; }
};

/// A sheet index that no sheet flow reaches: what a step through channel or water adds, so that sheet flow never comes back below it.
inline constexpr Length sheet_is_over = metres(1e6);

/// Manning's n of a channel step: that of its reach where there is one, else that of the rules.
[[nodiscard]] double channel_n(const StepView& step, const ChannelRules& rules);
/// Hydraulic radius of a channel step: that of its reach where it has one, else by contributing area.
[[nodiscard]] Length channel_radius(const StepView& step, const ChannelRules& rules);

/// Velocity of shallow flow on a slope: of the chart where there is one, else k·√S.
[[nodiscard]] Speed shallow_speed(const SurfaceHydraulics& surface, double slope);

/// What the step adds to the sheet index: n·d/√S overland, in fixed point of metres; `sheet_is_over` in channels and water.
[[nodiscard]] FixedLength sheet_index_step(const StepView& step);

/// Cuts a step by regime and gives each part its time. Precedence: channel and water by `kind`, then sheet flow as far as both limits
/// reach, then shallow flow. A sheet part takes T(u₁) − T(u₀), so that steps add up to the handbook's number, or the time of the
/// characteristic, by SheetBasis. Ponded ground carries
/// water at √(g·depth), at most at the stated speed, where that is faster than its regime.
[[nodiscard]] StepParts step_parts(const StepView& step, const TravelRules& rules);

/// What most of the work on a step wants of it.
struct StepOutcome {
    StepTime time;
    Regime regime = Regime::none;   ///< that in which it begins; at a root that which its cell would have
};
/// The time and regime of step_parts, at a fraction of its cost.
[[nodiscard]] StepOutcome step_outcome(const StepView& step, const TravelRules& rules);

/// What is known of a step's sheet flow before the step is timed: what it adds to the sheet index, and times T(u) at the indices of cells. Each of
/// these is computed once: a cell asks for its own, and so do those that drain to it, of which one arrives with just that index.
class SharedSheet {
public:
    static constexpr FixedTime unknown = -1;   ///< times are not negative

    /// `index_step` as of `sheet_index_step`. `here` and `below`, of the cell and of the one that it drains to, are places in an array that
    /// began as `unknown`.
    SharedSheet(FixedLength index_step, FixedTime& here, FixedTime& below, FixedLength index_below)
        : index_step_(index_step), here_(here), below_(below), index_below_(index_below) {}

    /// What the step adds to the sheet index.
    [[nodiscard]] FixedLength index_step(const StepView&) const { return index_step_; }
    /// T at the cell itself.
    [[nodiscard]] FixedTime time_at_begin(const SheetRules& sheet, FixedLength index) const;
    /// T where the step ends.
    [[nodiscard]] FixedTime time_at_end(const SheetRules& sheet, FixedLength index) const;

private:
    FixedLength index_step_;
    FixedTime& here_;
    FixedTime& below_;
    FixedLength index_below_;
};
/// The same bits with what other steps found, or left for them to find.
[[nodiscard]] StepOutcome step_outcome(const StepView& step, const TravelRules& rules, const SharedSheet& shared);

/// The regime of a cell as the raster shows it: that in which its step begins.
[[nodiscard]] Regime first_regime(const StepView& step, const TravelRules& rules);

}  // namespace rillclock
