#include <catch2/catch.hpp>

#include <cmath>

#include "rillclock/hydraulics/channel_size.hpp"
#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/open_water.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"
#include "rounding.hpp"

namespace rillclock {
namespace {

TEST_CASE("shallow flow on a slope of one runs at k, on a quarter at half of it") {
    CHECK(shallow_velocity(tr55_paved_k, 1.0) == feet_per_second(20.3282));
    CHECK(in_feet_per_second(shallow_velocity(tr55_unpaved_k, 0.25)) == rounding(16.1345 / 2));
}

TEST_CASE("shallow flow on no slope stands still and a slope against it is no number") {
    CHECK(shallow_velocity(tr55_paved_k, 0.0) == metres_per_second(0));
    CHECK(std::isnan(shallow_velocity(tr55_paved_k, -0.1).si()));
}

TEST_CASE("types of ground are found by their short name, and come from fast to slow") {
    REQUIRE(shallow_types().size() == 7);
    for (const ShallowType& type : shallow_types()) CHECK(find_shallow_type(type.name) == &type);
    for (std::size_t i = 1; i < 7; ++i) CHECK(shallow_types()[i].k() < shallow_types()[i - 1].k());
    CHECK(find_shallow_type("moon dust") == nullptr);
}

const ManningReach brook{.n = 0.05, .hydraulic_radius = feet(0.957), .slope = 0.005};

TEST_CASE("Manning in metres and Manning in feet with the exact factor agree") {
    CHECK(in_metres_per_second(manning_velocity(brook)) ==
          Approx(in_metres_per_second(manning_velocity_us(brook, manning_factor_us_exact))).epsilon(1e-7));
}

TEST_CASE("the exact factor is the cube root of the feet in a metre") {
    CHECK(manning_factor_us_exact == Approx(std::cbrt(1 / 0.3048)).epsilon(1e-7));
}

TEST_CASE("a smooth channel one metre in radius on a slope of one per cent runs at 0.1 / n") {
    CHECK(in_metres_per_second(manning_velocity({.n = 0.02, .hydraulic_radius = metres(1), .slope = 0.01})) ==
          rounding(5));
    CHECK(in_seconds(manning_time(metres(100), {.n = 0.02, .hydraulic_radius = metres(1), .slope = 0.01})) ==
          rounding(20));
}

TEST_CASE("the conveyance form of shallow flow is k, by either printed factor") {
    CHECK(in_feet_per_second(shallow_conveyance(0.05, feet(0.4), manning_factor_us_neh)) ==
          Approx(16.1345).margin(0.00005));
    CHECK(shallow_conveyance(0.05, feet(0.4), 1.49) / shallow_conveyance(0.05, feet(0.4), 1.486) ==
          rounding(1.49 / 1.486));
    CHECK_FALSE(std::isfinite(shallow_conveyance(0, feet(0.4), 1.49).si()));
}

TEST_CASE("Manning the other way round gives the slope and the n of a velocity") {
    CHECK(manning_slope_of(manning_velocity(brook), brook) == rounding(brook.slope));
    CHECK(manning_n_of(manning_velocity(brook), brook) == rounding(brook.n));
    CHECK_FALSE(std::isfinite(manning_n_of(metres_per_second(0), brook)));
    CHECK_FALSE(std::isfinite(manning_slope_of(metres_per_second(1), {.n = 0.03, .hydraulic_radius = metres(0)})));
}

TEST_CASE("a channel on no slope takes for ever") {
    CHECK(std::isinf(in_seconds(manning_time(metres(1), {.n = 0.02, .hydraulic_radius = metres(1), .slope = 0}))));
}

TEST_CASE("the radius from width and depth is that of the rectangle") {
    CHECK(in_metres(hydraulic_radius_of(metres(4), metres(1))) == rounding(4.0 / 6.0));
    CHECK(hydraulic_radius_of(metres(4), metres(1)) == hydraulic_radius(square_metres(4), metres(6)));
}

TEST_CASE("the channel size of the whole country is the default the study names") {
    CHECK(channel_sizes().front().width(square_kilometres(1)) == metres(2.70));
    CHECK(in_metres(channel_sizes().front().depth(square_kilometres(100))) == rounding(0.30 * std::pow(100.0, 0.213)));
}

TEST_CASE("a wave crosses a metre of water at √g") {
    CHECK(in_metres_per_second(wave_celerity(metres(1))) == rounding(std::sqrt(9.80665)));
    CHECK(std::isnan(wave_celerity(metres(-1)).si()));
}

}  // namespace
}  // namespace rillclock
