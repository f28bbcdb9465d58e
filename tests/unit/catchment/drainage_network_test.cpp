#include "rillclock/catchment/drainage_network.hpp"

#include <catch2/catch.hpp>

#include <random>

namespace rillclock {
namespace {

constexpr FixedTime one_second = to_fixed(1);

StepTime fixed_minutes(double minutes) { return {.fixed = to_fixed(minutes * 60)}; }

NetworkPoint point(PointNumber next, double to_root_min, double own_min) {
    NetworkPoint made{.next = next, .to_root = fixed_minutes(to_root_min), .own = {}};
    made.own.add({.cell = 0, .time = fixed_minutes(to_root_min + own_min)});
    return made;
}

/// 2 and 3 drain to 1; 4 to 3. Own times 10, 20, 12, 5 min; ways 2 → 1 6 min, 3 → 1 4 min, 4 → 3 9 min.
std::vector<NetworkPoint> four() { return {point(0, 1, 10), point(1, 7, 20), point(1, 5, 12), point(3, 14, 5)}; }

double minutes_of(FixedTime time) { return from_fixed(time) / 60; }

TEST_CASE("the subarea whose own time and way are longest together arrives last") {
    const PointArrivals at = DrainageNetwork(four()).arrivals_at(1, 1.0);
    CHECK(at.last == 2);
    CHECK(minutes_of(at.time) == 26);  // 20 + 6
    REQUIRE(at.lead);
    CHECK(minutes_of(*at.lead) == 8);  // 4 arrives after 5 + 9 + 4 = 18
    REQUIRE(at.subareas.size() == 4);
    CHECK(minutes_of(at.subareas[0].slack) == 16);  // the own subarea, with way 0
    CHECK(at.subareas[0].way == 0);
    CHECK(minutes_of(at.subareas[3].own) == 5);
    CHECK(minutes_of(at.subareas[3].way) == 13);
    CHECK(at.subareas[1].slack == 0);
}

TEST_CASE("at a point between, only what drains through it counts") {
    const PointArrivals at = DrainageNetwork(four()).arrivals_at(3, 1.0);
    CHECK(at.last == 4);
    CHECK(minutes_of(at.time) == 14);
    CHECK(minutes_of(at.lead.value()) == 2);
    CHECK(DrainageNetwork(four()).way(4, 1) == std::vector<PointNumber>{4, 3, 1});
}

TEST_CASE("a point with its own subarea alone has no lead") {
    const PointArrivals at = DrainageNetwork(four()).arrivals_at(2, 1.0);
    CHECK(at.last == 2);
    CHECK_FALSE(at.lead);
}

TEST_CASE("of equal arrivals the smaller number is the last, and the lead is nothing") {
    std::vector<NetworkPoint> points = four();
    points[2] = point(1, 5, 22);
    const PointArrivals at = DrainageNetwork(points).arrivals_at(1, 1.0);
    CHECK(at.last == 2);
    CHECK(at.lead == 0);
}

TEST_CASE("own time that grows by its slack and a second arrives last, and less a second does not") {
    const PointArrivals before = DrainageNetwork(four()).arrivals_at(1, 1.0);
    for (const SubareaArrival& subarea : before.subareas) {
        if (subarea.subarea == before.last) continue;
        for (const FixedTime change : {one_second, -one_second}) {
            std::vector<NetworkPoint> points = four();
            NetworkPoint& grown = points[subarea.subarea - 1];
            grown.own.add({.cell = 1, .time = grown.to_root + StepTime{.fixed = subarea.own + subarea.slack + change}});
            const PointArrivals after = DrainageNetwork(points).arrivals_at(1, 1.0);
            INFO("subarea " << subarea.subarea << ", change " << change);
            CHECK((after.last == subarea.subarea) == (change > 0));
        }
    }
}

TEST_CASE("the storm multiplies its part of own time and way, each alone") {
    std::vector<NetworkPoint> points = four();
    points[1].own.add({.cell = 2, .time = {.fixed = to_fixed(420), .storm = to_fixed(600)}});
    const DrainageNetwork network(points);
    CHECK(minutes_of(network.arrivals_at(1, 3.0).time) == 36);  // 3 · 10 min, and 6 on the way
    CHECK(network.arrivals_at(1, 1.0).last == 2);
    CHECK(minutes_of(network.arrivals_at(1, 1.0).time) == 26);  // the other head is the later one then
}

TEST_CASE("a stated way moves everything above it, and nothing else") {
    std::vector<NetworkPoint> points = four();
    points[2].stated_way = fixed_minutes(30);  // 3 → 1: 4 min over the ground
    const DrainageNetwork network(points);
    const PointArrivals at = network.arrivals_at(1, 1.0);
    CHECK(minutes_of(at.subareas[2].arrival()) == 42);
    CHECK(minutes_of(at.subareas[3].arrival()) == 44);
    CHECK(minutes_of(at.subareas[1].arrival()) == 26);
    CHECK(minutes_of(network.arrivals_at(3, 1.0).time) == 14);
    CHECK(network.way_time(3) == fixed_minutes(30));
}

TEST_CASE("the last and those of least slack are listed, with less slack first") {
    const std::vector<SubareaArrival> listed = least_slacks(DrainageNetwork(four()).arrivals_at(1, 1.0), 2);
    REQUIRE(listed.size() == 3);
    CHECK(listed[0].subarea == 2);
    CHECK(listed[1].subarea == 4);
    CHECK(listed[2].subarea == 3);  // arrives after 16 min: slack 10; the own subarea has 16
}

}  // namespace
}  // namespace rillclock
