#include "rillclock/hydraulics/channel_flow.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <cstdint>
#include <limits>
#include <numbers>
#include <random>

#include "rillclock/hydraulics/manning.hpp"
#include "rounding.hpp"

namespace rillclock {
namespace {

constexpr double infinite = std::numeric_limits<double>::infinity();

/// Numbers spread evenly over orders of magnitude.
class Spread {
public:
    explicit Spread(std::uint64_t seed) : random_(seed) {}

    double between(double low, double high) { return low * std::pow(high / low, share_(random_)); }

private:
    std::mt19937_64 random_;
    std::uniform_real_distribution<double> share_{0.0, 1.0};
};

TEST_CASE("of a trapezoid area, perimeter and top width are those of its drawing") {
    const WettedSection section = wetted(Trapezoid{.bottom_width = metres(3), .side_slope = 0.75}, metres(2));
    CHECK(in_square_metres(section.flow_area) == rounding(9.0));  // 3·2 + 0.75·2²
    CHECK(in_metres(section.wetted_perimeter) == rounding(8.0));  // 3 + 2·2.5
    CHECK(in_metres(section.top_width) == rounding(6.0));
    CHECK(in_metres(section.hydraulic_radius()) == rounding(9.0 / 8));
}

TEST_CASE("a pipe is a circle when full and half of one when half full") {
    const CircularPipe pipe{metres(2)};
    const WettedSection full = wetted(pipe, metres(2));
    CHECK(in_square_metres(full.flow_area) == rounding(std::numbers::pi));
    CHECK(in_metres(full.wetted_perimeter) == rounding(2 * std::numbers::pi));
    CHECK(in_metres(full.top_width) == Approx(0).margin(1e-15));
    const WettedSection half = wetted(pipe, metres(1));
    CHECK(in_square_metres(half.flow_area) == rounding(std::numbers::pi / 2));
    CHECK(half.top_width == metres(2));
    CHECK(half.hydraulic_radius().si() == rounding(full.hydraulic_radius().si()));
}

TEST_CASE("a shallow segment of a pipe is two thirds of top width times depth") {
    for (const double depth : {1e-3, 1e-6, 1e-9}) {
        const WettedSection section = wetted(CircularPipe{metres(1)}, metres(depth));
        // The next term of the series is a share depth/5 of it.
        CHECK(section.flow_area.si() == Approx(2.0 / 3 * section.top_width.si() * depth).epsilon(depth));
    }
}

TEST_CASE("the normal depth of 10000 random trapezoids carries their flow again") {
    Spread random(4711);
    for (int draw = 0; draw < 10000; ++draw) {
        const Trapezoid channel{.bottom_width = metres(draw % 5 == 0 ? 0.0 : random.between(0.01, 100)),
                                .side_slope = draw % 5 == 1 ? 0.0 : random.between(0.05, 20)};
        const ChannelBed bed{.n = random.between(0.008, 0.2), .slope = random.between(1e-5, 0.5)};
        const double depth = random.between(1e-4, 30);
        const WettedSection section = wetted(channel, metres(depth));
        const Discharge flow = uniform_discharge(section, bed);
        REQUIRE(normal_depth(channel, flow, bed).si() == Approx(depth).epsilon(1e-11));
        const ManningReach reach{.n = bed.n, .hydraulic_radius = section.hydraulic_radius(), .slope = bed.slope};
        const Speed velocity = metres_per_second(flow.si() / section.flow_area.si());
        REQUIRE(manning_n_of(velocity, reach) == rounding(bed.n));
        REQUIRE(manning_slope_of(velocity, reach) == rounding(bed.slope));
    }
}

TEST_CASE("the normal depth of 10000 random pipes carries their flow again") {
    Spread random(4711);
    for (int draw = 0; draw < 10000; ++draw) {
        const CircularPipe pipe{metres(random.between(0.1, 5))};
        const ChannelBed bed{.n = random.between(0.008, 0.03), .slope = random.between(1e-4, 0.2)};
        const double share = random.between(1e-4, 0.8);
        const Discharge flow = uniform_discharge(wetted(pipe, pipe.diameter * share), bed);
        const auto depth = normal_depth(pipe, flow, bed);
        REQUIRE(depth);
        REQUIRE(*depth / pipe.diameter == Approx(share).epsilon(1e-11));
    }
}

const ChannelBed ditch{.n = 0.03, .slope = 0.005};
const ChannelBed sewer{.n = 0.013, .slope = 0.004};

TEST_CASE("dry channels and pipes have no depth") {
    CHECK(normal_depth(Trapezoid{metres(1), 2}, Discharge::from_si(0), ditch) == metres(0));
    CHECK(normal_depth(CircularPipe{metres(1)}, Discharge::from_si(0), sewer) == metres(0));
    CHECK(uniform_discharge(wetted(Trapezoid{metres(0), 2}, metres(0)), ditch).si() == 0);
}

TEST_CASE("in a very wide channel the depth is that of flow per width") {
    const double per_width = 0.5;
    const Length depth = normal_depth(Trapezoid{metres(1e6), 0}, Discharge::from_si(per_width * 1e6), ditch);
    // The sides add a share of twice the depth over the width to the perimeter.
    CHECK(in_metres(depth) == Approx(std::pow(per_width * ditch.n / std::sqrt(ditch.slope), 0.6)).epsilon(1e-5));
}

TEST_CASE("in a triangle the depth grows with the flow to the power 3/8") {
    const Trapezoid triangle{metres(0), 1.5};
    const double once = normal_depth(triangle, Discharge::from_si(0.2), ditch).si();
    CHECK(normal_depth(triangle, Discharge::from_si(0.2 * 256), ditch).si() == Approx(once * 8).epsilon(1e-11));
}

TEST_CASE("a pipe at its full-bore capacity runs 0.82 full, and above it has no depth") {
    const CircularPipe pipe{metres(0.6)};
    const Discharge capacity = full_bore_capacity(pipe, sewer);
    CHECK(*normal_depth(pipe, capacity, sewer) / pipe.diameter == Approx(0.8196).margin(0.00005));
    CHECK_FALSE(normal_depth(pipe, capacity * 1.0001, sewer));
}

TEST_CASE("a pipe carries most at 0.938 of its diameter, 1.076 of its full-bore capacity") {
    const CircularPipe pipe{metres(0.6)};
    const auto at = [&](double share) { return uniform_discharge(wetted(pipe, pipe.diameter * share), sewer); };
    CHECK(at(0.938) / full_bore_capacity(pipe, sewer) == Approx(1.0757).margin(0.00005));
    CHECK(at(0.938) > at(0.93));
    CHECK(at(0.938) > at(0.946));
}

TEST_CASE("half full, a pipe runs at its full-bore velocity") {
    const CircularPipe pipe{metres(0.6)};
    const WettedSection half = wetted(pipe, metres(0.3));
    CHECK(uniform_discharge(half, sewer).si() / half.flow_area.si() == rounding(full_bore_velocity(pipe, sewer).si()));
    CHECK(full_bore_capacity(pipe, sewer).si() ==
          rounding(full_bore_velocity(pipe, sewer).si() * std::numbers::pi * 0.09));
}

TEST_CASE("a steep channel is shallow and supercritical, a gentle one deep and not") {
    const Trapezoid channel{metres(2), 1};
    const Discharge flow = Discharge::from_si(3);
    const auto froude = [&](double slope) {
        const WettedSection section = wetted(channel, normal_depth(channel, flow, {.n = 0.02, .slope = slope}));
        return froude_number(section, metres_per_second(flow.si() / section.flow_area.si()));
    };
    CHECK(froude(0.5) > 1);
    CHECK(froude(0.0005) < 1);
    CHECK(normal_depth(channel, flow, {.n = 0.02, .slope = 0.5}) <
          normal_depth(channel, flow, {.n = 0.02, .slope = 0.0005}));
}

TEST_CASE("a rectangle at √(g·depth) is critical") {
    const WettedSection section = wetted(Trapezoid{metres(4), 0}, metres(1));
    CHECK(froude_number(section, metres_per_second(std::sqrt(9.80665))) == rounding(1));
}

TEST_CASE("every number of a channel has its range") {
    const Discharge flow = Discharge::from_si(1);
    const auto refused = [&](const Trapezoid& channel, double q, const ChannelBed& bed) {
        CHECK_THROWS_WITH(normal_depth(channel, Discharge::from_si(q), bed), Catch::Contains("a channel needs"));
    };
    for (const double bad : {-1.0, std::nan(""), infinite}) {
        refused({metres(bad), 1}, 1, ditch);
        refused({metres(1), bad}, 1, ditch);
        refused({metres(1), 1}, bad, ditch);
    }
    for (const double bad : {0.0, -0.1, std::nan(""), infinite}) {
        refused({metres(1), 1}, 1, {.n = bad, .slope = 0.01});
        refused({metres(1), 1}, 1, {.n = 0.03, .slope = bad});
        CHECK_THROWS_WITH(normal_depth(CircularPipe{metres(bad)}, flow, sewer), Catch::Contains("a diameter"));
        CHECK_THROWS_WITH(normal_depth(CircularPipe{metres(1)}, flow, {.n = bad, .slope = 0.01}),
                          Catch::Contains("Manning's n above zero"));
    }
    refused({metres(0), 0}, 1, ditch);
    CHECK_THROWS_WITH(normal_depth(CircularPipe{metres(1)}, Discharge::from_si(-1), sewer), Catch::Contains("a flow"));
}

}  // namespace
}  // namespace rillclock
