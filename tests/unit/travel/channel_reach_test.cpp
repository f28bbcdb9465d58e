#include "rillclock/travel/channel_reach.hpp"

#include <catch2/catch.hpp>

#include <cmath>

#include "rillclock/hydraulics/gutter.hpp"
#include "rillclock/travel/step.hpp"

namespace rillclock {
namespace {

TEST_CASE("a trapezoid has the radius and the mean depth of its wetted part") {
    // 1 m wide, sides 2 to 1, 0.5 m deep: area 1 m², perimeter 1 + √5 m, top 3 m.
    const ChannelReach reach = reach_of({.shape = SectionShape::trapezoid, .n = 0.02, .trapezoid = {metres(1), 2.0}, .depth = metres(0.5)}, 7);
    CHECK(reach.radius_m == Approx(1.0 / (1.0 + std::sqrt(5.0))));
    CHECK(reach.mean_depth_m == Approx(1.0 / 3.0));
    CHECK(reach.n == 0.02);
    CHECK(reach.section == 7);
}

TEST_CASE("with a gutter's radius Manning's formula is that of the gutter") {
    const MappedSection section{.shape = SectionShape::gutter, .n = 0.016, .cross_fall = 0.02, .spread = metres(2.5)};
    const ChannelReach reach = reach_of(section, 0);
    const Speed manning = manning_velocity({.n = reach.n, .hydraulic_radius = metres(reach.radius_m), .slope = 0.01});
    CHECK(manning.si() == Approx(gutter_velocity({.n = 0.016, .cross_slope = 0.02, .slope = 0.01}, metres(2.5)).si()));
    CHECK(reach.mean_depth_m == Approx(0.025));  // half the depth at the curb
}

TEST_CASE("a channel with an n of its own and no section keeps its size by area") {
    const ChannelReach reach = reach_of({.n = 0.06}, 0);
    const ChannelRules rules;
    const StepView step{.kind = GroundKind::channel, .area = to_fixed_area(1e6), .reach = &reach};
    CHECK(channel_n(step, rules) == 0.06);
    CHECK(channel_radius(step, rules) == rules.radius_at(square_metres(1e6)));
}

TEST_CASE("a step along a channel that has a reach of its own takes it in place of the rules by area") {
    const ChannelReach reach = reach_of({.shape = SectionShape::trapezoid, .n = 0.05, .trapezoid = {metres(8), 0.0}, .depth = metres(2)}, 0);
    const StepView step{.length = to_fixed(10), .slope = 0.01, .kind = GroundKind::channel, .area = to_fixed_area(1e6), .reach = &reach};
    // 8 m wide, 2 m deep: R = 16/12 m; V = R^(2/3)·0.1/0.05.
    CHECK(step_parts(step, {}).first.speed_m_per_s == Approx(2.0 * std::pow(16.0 / 12.0, 2.0 / 3.0)));
}

}  // namespace
}  // namespace rillclock
