#include "rillclock/travel/step.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <memory>
#include <random>

#include "rillclock/hydraulics/open_water.hpp"

namespace rillclock {
namespace {

constexpr double none = std::numeric_limits<double>::infinity();

/// On the slope of the steps below: index n·d/√S of half a metre a metre, and shallow flow at 1 m/s.
const SurfaceHydraulics grass{.sheet_n = 0.1, .shallow_k = metres_per_second(5)};
const SurfaceHydraulics lake{.sheet_n = 0.1, .shallow_k = metres_per_second(5), .water_depth = metres(1)};

/// 10 m at a slope of 0.04, on grass, at a divide.
StepView ten_metres() {
    StepView step;
    step.length = to_fixed(10);
    step.slope = 0.04;
    step.surface = &grass;
    step.area = to_fixed_area(100);
    return step;
}

/// Channel flow at 4 m/s on a slope of 0.04; no limit of sheet flow; a storm factor of 1.
TravelRules plain_rules() {
    TravelRules rules;
    rules.sheet.limit = metres(none);
    rules.sheet.index_limit = metres(none);
    rules.channel.n = 0.05;
    rules.channel.hydraulic_radius = metres(1);
    return rules;
}

TravelRules limited_to(double limit_m, double index_limit_m) {
    TravelRules rules = plain_rules();
    rules.sheet.limit = metres(limit_m);
    rules.sheet.index_limit = metres(index_limit_m);
    return rules;
}

double nrcs(double u) {
    return in_seconds(nrcs_sheet_formula().at_unit_storm(metres(u)));
}

/// Times are rounded to 2⁻²⁰ s, lengths to 2⁻²⁰ m; two such roundings are allowed.
Approx rounded(double value) {
    return Approx(value).epsilon(0).margin(2e-6);
}

double fixed_s(const StepPart& part) {
    return from_fixed(part.time.fixed);
}
double storm_s(const StepPart& part) {
    return from_fixed(part.time.storm);
}

TEST_CASE("a step within both limits is sheet flow and takes T(u1) - T(u0), all of it the storm's") {
    StepView step = ten_metres();
    step.sheet_index = to_fixed(3);
    const StepParts parts = step_parts(step, plain_rules());
    CHECK(parts.first.regime == Regime::sheet);
    CHECK(parts.first.index_from_m == 3.0);
    CHECK(parts.first.index_to_m == 8.0);
    CHECK(storm_s(parts.first) == rounded(nrcs(8) - nrcs(3)));
    CHECK(parts.first.time.fixed == 0);
    CHECK(parts.second.regime == Regime::none);
}

TEST_CASE("a step overland takes n·d/√S of sheet index") {
    CHECK(from_fixed(sheet_index_step(ten_metres())) == 5.0);
}

TEST_CASE("sheet flow does not come back below channel or open water, even where only its length is limited") {
    for (const GroundKind kind : {GroundKind::channel, GroundKind::water}) {
        StepView above = ten_metres();
        above.kind = kind;
        StepView below = ten_metres();
        below.sheet_index = sheet_index_step(above);
        CHECK(step_parts(below, limited_to(100, none)).first.regime == Regime::shallow);
    }
}

TEST_CASE("the step in which the stated length runs out is split there") {
    StepView step = ten_metres();
    step.from_divide = to_fixed(26);
    step.sheet_index = to_fixed(13);
    const StepParts parts = step_parts(step, limited_to(30, none));
    CHECK(parts.first.regime == Regime::sheet);
    CHECK(parts.first.length_m == rounded(4));
    CHECK(parts.first.index_to_m == rounded(15));
    CHECK(storm_s(parts.first) == rounded(nrcs(15) - nrcs(13)));
    CHECK(parts.second.regime == Regime::shallow);
    CHECK(parts.second.length_m == rounded(6));
    CHECK(fixed_s(parts.second) == rounded(6));
}

TEST_CASE("the step in which the sheet index runs out is split there") {
    StepView step = ten_metres();
    step.from_divide = to_fixed(26);
    step.sheet_index = to_fixed(13);
    const StepParts parts = step_parts(step, limited_to(none, 16));
    CHECK(parts.first.length_m == rounded(6));
    CHECK(parts.first.index_to_m == rounded(16));
    CHECK(parts.second.length_m == rounded(4));
    CHECK(fixed_s(parts.second) == rounded(4));
}

TEST_CASE("of two limits within one step the first to come ends sheet flow") {
    StepView step = ten_metres();
    CHECK(step_parts(step, limited_to(2, 4)).first.length_m == rounded(2));
    CHECK(step_parts(step, limited_to(9, 1)).first.length_m == rounded(2));
}

TEST_CASE("sheet flow may end inside the first step from the divide") {
    const StepParts parts = step_parts(ten_metres(), limited_to(0.5, none));
    CHECK(parts.first.length_m == rounded(0.5));
    CHECK(parts.first.index_to_m == rounded(0.25));
    CHECK(parts.second.length_m == rounded(9.5));
}

TEST_CASE("a step that begins at a limit is shallow flow throughout") {
    StepView step = ten_metres();
    step.from_divide = to_fixed(30);
    step.sheet_index = to_fixed(15);
    for (const TravelRules& rules : {limited_to(30, none), limited_to(none, 15), limited_to(20, 10)}) {
        const StepParts parts = step_parts(step, rules);
        CHECK(parts.first.regime == Regime::shallow);
        CHECK(fixed_s(parts.first) == rounded(10));
        CHECK(parts.first.time.storm == 0);
        CHECK(parts.second.regime == Regime::none);
    }
}

TEST_CASE("a step that ends at a limit is sheet flow throughout") {
    const StepParts parts = step_parts(ten_metres(), limited_to(10, 5));
    CHECK(parts.first.length_m == 10.0);
    CHECK(parts.second.regime == Regime::none);
}

TEST_CASE("a channel goes before sheet flow, by Manning's formula") {
    StepView step = ten_metres();
    step.kind = GroundKind::channel;
    const StepParts parts = step_parts(step, plain_rules());
    CHECK(parts.first.regime == Regime::channel);
    CHECK(parts.first.speed_m_per_s == Approx(4.0));
    CHECK(parts.first.radius_m == 1.0);
    CHECK(fixed_s(parts.first) == rounded(2.5));
    CHECK(parts.second.regime == Regime::none);
}

TEST_CASE("the hydraulic radius of a channel by its area is W·D / (W + 2D)") {
    TravelRules rules = plain_rules();
    rules.channel.hydraulic_radius.reset();
    rules.channel.width = {.coefficient = metres(4), .unit = square_kilometres(1), .exponent = 0.5};
    rules.channel.depth = {.coefficient = metres(1), .unit = square_kilometres(1), .exponent = 0.5};
    StepView step = ten_metres();
    step.kind = GroundKind::channel;
    step.area = to_fixed_area(4e6);  // width 8 m, depth 2 m
    CHECK(step_parts(step, rules).first.radius_m == Approx(8.0 * 2.0 / 12.0));
}

TEST_CASE("open water goes before sheet flow, at the celerity of its mean depth") {
    StepView step = ten_metres();
    step.kind = GroundKind::water;
    step.surface = &lake;
    const StepParts parts = step_parts(step, plain_rules());
    CHECK(parts.first.regime == Regime::water);
    CHECK(parts.first.speed_m_per_s == Approx(std::sqrt(standard_gravity)));
    CHECK(fixed_s(parts.first) == rounded(10 / std::sqrt(standard_gravity)));
}

TEST_CASE("water that is a river flows as a channel") {
    StepView step = ten_metres();
    step.kind = GroundKind::channel;
    step.surface = &lake;
    CHECK(step_parts(step, plain_rules()).first.regime == Regime::channel);
}

TEST_CASE("ground ponded deeper than the stated depth passes water on at the wave's speed") {
    StepView step = ten_metres();
    step.ponded_m = 0.3;
    CHECK_FALSE(step_parts(step, limited_to(0, 0)).first.ponded);
    step.ponded_m = 0.31;
    const StepPart part = step_parts(step, limited_to(0, 0)).first;
    CHECK(part.ponded);
    CHECK(part.regime == Regime::shallow);
    CHECK(fixed_s(part) == rounded(10 / std::sqrt(standard_gravity * 0.31)));
}

TEST_CASE("the wave is no faster than the stated speed") {
    StepView step = ten_metres();
    step.ponded_m = 5;  // √(g·5) is 7 m/s
    CHECK(fixed_s(step_parts(step, limited_to(0, 0)).first) == rounded(10 / 2.0));
}

TEST_CASE("ponded ground keeps its regime's time where that is the shorter") {
    StepView step = ten_metres();
    step.kind = GroundKind::channel;
    step.ponded_m = 5;
    const StepPart part = step_parts(step, plain_rules()).first;
    CHECK_FALSE(part.ponded);
    CHECK(fixed_s(part) == rounded(2.5));
}

TEST_CASE("a ponded sheet step takes the wave's time in every storm") {
    StepView step = ten_metres();
    step.ponded_m = 5;
    const StepPart part = step_parts(step, plain_rules()).first;
    CHECK(part.regime == Regime::sheet);
    CHECK(part.ponded);
    CHECK(part.time == StepTime{.fixed = to_fixed(5), .storm = 0});
}

TEST_CASE("whether the wave beats sheet flow is judged under the study's storm") {
    StepView step = ten_metres();
    step.ponded_m = 5;
    TravelRules rules = plain_rules();
    rules.sheet.storm_factor = 0.9 * 5 / nrcs(5);
    CHECK_FALSE(step_parts(step, rules).first.ponded);
    rules.sheet.storm_factor = 1.1 * 5 / nrcs(5);
    CHECK(step_parts(step, rules).first.ponded);
}

TEST_CASE("each part of a split step on ponded ground is hastened on its own") {
    StepView step = ten_metres();
    step.ponded_m = 5;
    TravelRules rules = limited_to(4, none);
    rules.pond.speed = metres_per_second(0.9);  // slower than shallow flow's 1 m/s
    const StepParts parts = step_parts(step, rules);
    CHECK(parts.first.ponded);
    CHECK_FALSE(parts.second.ponded);
    rules.pond.speed = metres_per_second(3);
    CHECK(step_parts(step, rules).second.ponded);
    CHECK(fixed_s(step_parts(step, rules).second) == rounded(6 / 3.0));
}

TEST_CASE("raising the cap on ponded speed raises no step's time") {
    for (const GroundKind kind : {GroundKind::overland, GroundKind::channel, GroundKind::water}) {
        for (const double depth : {0.2, 0.4, 3.0}) {
            StepView step = ten_metres();
            step.kind = kind;
            step.surface = &lake;
            step.ponded_m = depth;
            TravelRules rules = limited_to(4, none);
            double before = none;
            for (const double cap : {0.1, 0.5, 1.0, 2.0, 5.0, 20.0, none}) {
                rules.pond.speed = metres_per_second(cap);
                const double time = in_seconds(step_parts(step, rules).time().under(rules.sheet.storm_factor));
                INFO("depth " << depth << " m, cap " << cap << " m/s");
                CHECK(time <= before);
                before = time;
            }
        }
    }
}

TEST_CASE("a root has no step and takes no time") {
    StepView step = ten_metres();
    step.length = 0;
    const StepParts parts = step_parts(step, plain_rules());
    CHECK(parts.first.regime == Regime::none);
    CHECK(parts.time() == StepTime{});
    CHECK(sheet_index_step(step) == 0);
}

TEST_CASE("the parts of a split step have the step's length and time between them") {
    const StepParts parts = step_parts(ten_metres(), limited_to(3.7, none));
    CHECK(parts.first.length_m + parts.second.length_m == Approx(10.0).epsilon(1e-15));
    CHECK(parts.time() == parts.first.time + parts.second.time);
    CHECK(parts.second.time.fixed == to_fixed(6.3));
}

TEST_CASE("a cell shows the regime in which its step begins") {
    CHECK(first_regime(ten_metres(), limited_to(0.01, none)) == Regime::sheet);
    CHECK(first_regime(ten_metres(), limited_to(0, none)) == Regime::shallow);
    StepView step = ten_metres();
    step.kind = GroundKind::channel;
    CHECK(first_regime(step, plain_rules()) == Regime::channel);
    step.kind = GroundKind::water;
    CHECK(first_regime(step, plain_rules()) == Regime::water);
}

TEST_CASE("a time under a storm is storm · s + fixed") {
    CHECK(in_seconds(StepTime{.fixed = to_fixed(3), .storm = to_fixed(8)}.under(0.25)) == 5.0);
}

TEST_CASE("kinematic sheet flow goes by the distance from the divide and the step's own ground") {
    // n/√S = 0.5; from 5 m to 15 m below the divide.
    TravelRules rules = plain_rules();
    rules.sheet.formula = {.coefficient = 2.0, .exponent = 0.6};
    rules.sheet.basis = SheetBasis::characteristic;
    StepView step = ten_metres();
    step.from_divide = to_fixed(5);
    step.sheet_index = to_fixed(99);  // of other ground above: without effect
    const StepPart part = step_parts(step, rules).first;
    CHECK(storm_s(part) == rounded(2.0 * std::pow(0.5, 0.6) * (std::pow(15.0, 0.6) - std::pow(5.0, 0.6))));
    CHECK(part.index_from_m == 5.0);
    CHECK(part.index_to_m == 15.0);
}

TEST_CASE("a chart times shallow flow in place of k") {
    TravelRules rules = limited_to(0, none);
    const VelocityLine line{.surface = "grass", .points = {{0.01, metres_per_second(0.2)}, {0.04, metres_per_second(0.8)}}};
    const SurfaceHydraulics charted{.sheet_n = 0.1, .shallow_k = metres_per_second(5), .shallow_line = std::make_shared<const VelocityLine>(line)};
    StepView step = ten_metres();
    step.surface = &charted;
    CHECK(fixed_s(step_parts(step, rules).first) == rounded(10 / 0.8));
}

TEST_CASE("the outcome of a step is the time and the first regime of its parts") {
    std::mt19937 random(7);
    const auto between = [&](double low, double high) { return std::uniform_real_distribution<double>(low, high)(random); };
    const SurfaceHydraulics ground{.sheet_n = 0.24, .shallow_k = metres_per_second(2.1), .water_depth = metres(1)};
    int split = 0;
    for (int i = 0; i < 10000; ++i) {
        const StepView step{.length = i % 50 == 0 ? 0 : to_fixed(between(0.5, 40)),
                            .slope = between(0.001, 0.3),
                            .surface = &ground,
                            .kind = static_cast<GroundKind>(i % 3),
                            .ponded_m = i % 5 == 0 ? between(0, 3) : 0.0,
                            .area = to_fixed_area(between(1, 1e6)),
                            .from_divide = to_fixed(between(0, 60)),
                            .sheet_index = to_fixed(between(0, 60))};
        const StepParts parts = step_parts(step, TravelRules{});
        const StepOutcome outcome = step_outcome(step, TravelRules{});
        split += parts.second.regime != Regime::none ? 1 : 0;
        REQUIRE(outcome.time == parts.time());
        REQUIRE(outcome.regime == (step.length == 0 ? first_regime(step, TravelRules{}) : parts.first.regime));
    }
    CHECK(split > 100);
}

TEST_CASE("steps that share times at sheet indices take and leave them, and have the same outcome") {
    StepView step = ten_metres();
    step.sheet_index = to_fixed(2);
    const FixedLength index_below = to_fixed(7);   // half a metre a metre more
    FixedTime here = SharedSheet::unknown;
    FixedTime below = SharedSheet::unknown;
    const StepOutcome alone = step_outcome(step, plain_rules());
    CHECK(step_outcome(step, plain_rules(), {to_fixed(5), here, below, index_below}).time == alone.time);
    CHECK(from_fixed(here) == rounded(nrcs(2)));
    CHECK(from_fixed(below) == rounded(nrcs(7)));

    here += 5;
    below += 7;   // what is there is taken
    CHECK(step_outcome(step, plain_rules(), {to_fixed(5), here, below, index_below}).time.storm == alone.time.storm + 2);
    // Another water arrives later at the cell below: its time is none of this step's.
    CHECK(step_outcome(step, plain_rules(), {to_fixed(5), here, below, index_below + 1}).time.storm == alone.time.storm - 5);
}

}  // namespace
}  // namespace rillclock
