#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>

#include "reference/drawings.hpp"
#include "reference/worked_outlets.hpp"
#include "rillclock/catchment/point_network.hpp"

namespace rillclock {
namespace {

using worked::Given;
using worked::Worked;

/// With other storms, and ponds as they are by default.
Given random_ground(std::mt19937& random, unsigned seed) {
    Given given = worked::random_given(random, seed);
    given.rules.sheet.storm_factor = 0.5 + seed % 5;
    given.rules.pond = {};
    return given;
}

TEST_CASE("on random ground the greatest of own time and way is the point's time, to the unit") {
    for (unsigned seed = 0; seed < 150; ++seed) {
        std::mt19937 random(seed);
        const Given given = random_ground(random, seed);
        const std::vector<Cell> cells = worked::random_cells(random, given, 1 + seed % 12);
        if (cells.empty()) continue;
        const Worked w(given, {.points = cells});
        const DrainageNetwork network = network_of(w.outlets);
        INFO("seed " << seed);
        for (const Outlet& outlet : w.outlets) {
            const PointArrivals at = network.arrivals_at(outlet.number, w.storm_factor);
            const Cell head = outlet.governing.cells.front();
            const FixedTime time = fixed_under(w.land.field.time_to_root(head), w.storm_factor) -
                                   fixed_under(outlet.time_to_root, w.storm_factor);
            REQUIRE(at.time == time);
            // The time on the sheet is the difference rounded once, not the difference of two rounded: a unit apart.
            REQUIRE(from_fixed(at.time) == Approx(outlet.time_of_concentration_s()).margin(1.5 / fixed_units_per_one));
            for (const SubareaArrival& subarea : at.subareas) {
                REQUIRE(subarea.own >= 0);
                REQUIRE(subarea.way >= 0);
                REQUIRE(subarea.slack >= 0);
            }
        }
    }
}

TEST_CASE("a new inner point changes no time, last or lead of the points below but by what it parts off") {
    for (unsigned seed = 0; seed < 100; ++seed) {
        std::mt19937 random(seed);
        const Given given = random_ground(random, seed);
        std::vector<Cell> cells = worked::random_cells(random, given, 2 + seed % 6);
        if (cells.size() < 2) continue;
        const Worked all(given, {.points = cells});
        const Worked one_less(given, {.points = {cells.begin(), cells.end() - 1}});
        const DrainageNetwork with = network_of(all.outlets);
        const DrainageNetwork without = network_of(one_less.outlets);
        INFO("seed " << seed);
        for (PointNumber number = 1; number < cells.size(); ++number) {
            const PointArrivals before = without.arrivals_at(number, all.storm_factor);
            const PointArrivals after = with.arrivals_at(number, all.storm_factor);
            REQUIRE(after.time == before.time);
            if (with.above(number).size() == without.above(number).size()) REQUIRE(after.last == before.last);
        }
    }
}

/// The network of outlets, all cells of one subarea being later by some time.
DrainageNetwork delayed_network(const std::vector<Outlet>& outlets, PointNumber late, FixedTime by) {
    std::vector<NetworkPoint> points;
    for (const Outlet& outlet : outlets) {
        NetworkPoint point{.next = outlet.next, .to_root = outlet.time_to_root, .own = {}, .stated_way = {}};
        const StepTime delay{.fixed = outlet.number == late ? by : 0};
        for (const Head& head : outlet.own_front.heads()) point.own.add({.cell = head.cell, .time = head.time + delay});
        points.push_back(std::move(point));
    }
    return DrainageNetwork(std::move(points));
}

TEST_CASE("on random ground an own time that grows by its slack and a second arrives last, and less a second does not") {
    constexpr FixedTime second = to_fixed(1);
    std::size_t held = 0;
    std::size_t with_sheet_flow = 0;
    for (unsigned seed = 0; seed < 200; ++seed) {
        std::mt19937 random(seed);
        const Given given = random_ground(random, seed);
        const std::vector<Cell> cells = worked::random_cells(random, given, 8 + seed % 16);
        if (cells.empty()) continue;
        const Worked w(given, {.points = cells});
        const DrainageNetwork network = network_of(w.outlets);
        INFO("seed " << seed);
        for (const Outlet& outlet : w.outlets) {
            const PointArrivals before = network.arrivals_at(outlet.number, w.storm_factor);
            for (const SubareaArrival& subarea : before.subareas) {
                if (subarea.subarea == before.last) continue;
                const PointArrivals more = delayed_network(w.outlets, subarea.subarea, subarea.slack + second).arrivals_at(outlet.number, w.storm_factor);
                REQUIRE(more.last == subarea.subarea);
                REQUIRE(more.time == before.time + second);
                const PointArrivals less = delayed_network(w.outlets, subarea.subarea, subarea.slack - second).arrivals_at(outlet.number, w.storm_factor);
                REQUIRE(less.last == before.last);
                REQUIRE(less.time == before.time);
                ++held;
                if (w.outlets[subarea.subarea - 1].own_front.last_to_arrive(w.storm_factor).time.storm > 0) ++with_sheet_flow;
            }
        }
    }
    CHECK(held > 100);
    CHECK(with_sheet_flow > 100);
}

TEST_CASE("ways add up the regimes they run through to their length") {
    for (unsigned seed = 0; seed < 60; ++seed) {
        std::mt19937 random(seed);
        const Given given = random_ground(random, seed);
        const std::vector<Cell> cells = worked::random_cells(random, given, 8);
        if (cells.empty()) continue;
        const Worked w(given, {.points = cells});
        const DrainageNetwork network = network_of(w.outlets);
        INFO("seed " << seed);
        for (const Outlet& outlet : w.outlets) {
            if (outlet.next == 0) {
                REQUIRE(outlet.way.length == 0);
                continue;
            }
            double length = 0.0;
            for (const double part : outlet.way.regime_length_m) length += part;
            REQUIRE(length == Approx(from_fixed(outlet.way.length)).margin(1e-6));
            REQUIRE(network.way_time(outlet.number) == outlet.way.time);
        }
    }
}

}  // namespace
}  // namespace rillclock
