#include "rillclock/catchment/point_storms.hpp"

#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>
#include <random>

#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

constexpr double reference_factor = 75.0;  // about 30 mm/h

/// Rain of 900/(t + 10)^0.8 mm/h, t in minutes, times a factor.
IntensityOfDuration rain_times(double factor) {
    return [factor](Duration t) {
        return std::optional(millimetres_per_hour(factor * 900 / std::pow(in_minutes(t) + 10, 0.8)));
    };
}

/// Cells of three nested points: 3 is the last one down, 1 and 2 drain into it.
struct Nested {
    std::vector<std::vector<Head>> cells;  ///< by subarea
    std::vector<StepTime> points;
    PointTree tree = point_tree({3, 3, 0});

    explicit Nested(unsigned seed) : cells(3) {
        std::mt19937 random(seed);
        std::uniform_real_distribution<double> fixed(0, 4000), storm(0, 12), area(0.5, 2);
        points = {{.fixed = to_fixed(300), .storm = 0}, {.fixed = to_fixed(500), .storm = to_fixed(1)}, {}};
        Cell next = 0;
        for (std::size_t subarea = 0; subarea < 3; ++subarea) {
            for (int i = 0; i < 500; ++i) {
                StepTime time{.fixed = to_fixed(fixed(random)), .storm = to_fixed(storm(random))};
                cells[subarea].push_back({next++, time + points[subarea]});
            }
        }
    }

    [[nodiscard]] std::vector<Arrivals> arrivals() const {
        std::vector<Arrivals> made(3);
        for (std::size_t subarea = 0; subarea < 3; ++subarea) {
            for (const Head& cell : cells[subarea]) {
                made[subarea].add_unbinned({.head = cell, .area = 10000});
                made[subarea].storm_bins.add(cell, 10000, reference_factor);
            }
        }
        return made;
    }

    /// Times of all cells of a point's whole catchment under a storm, sorted.
    [[nodiscard]] std::vector<double> seconds_of(std::size_t point, double factor) const {
        std::vector<double> times;
        for (std::size_t subarea = 0; subarea < 3; ++subarea) {
            if (subarea != point && point != 2) continue;
            for (const Head& cell : cells[subarea])
                times.push_back(in_seconds((cell.time - points[point]).under(factor)));
        }
        std::sort(times.begin(), times.end());
        return times;
    }
};

TEST_CASE("each point's time is the greatest of all its cells under the storm that lasts as long") {
    for (unsigned seed = 0; seed < 20; ++seed) {
        const Nested land(seed);
        const OwnStorms storms{
            .rain = {rain_times(1), rain_times(2.5)}, .raster = 1, .reference_factor = reference_factor};
        const std::vector<PointHeads> heads = heads_of(land.arrivals(), land.tree, land.points, storms);
        for (std::size_t point = 0; point < 3; ++point) {
            for (std::size_t period = 0; period < 2; ++period) {
                INFO("seed " << seed << ", point " << point << ", period " << period);
                const PointStorm& storm = heads[point].storms[period];
                REQUIRE(storm.iteration.end == StormEnd::settled);
                const double greatest = land.seconds_of(point, storm.storm_factor).back();
                CHECK(storm.seconds() == Approx(greatest).epsilon(1e-12));
                const double again = kinematic_storm_factor(*storms.rain[period](seconds(storm.seconds())));
                CHECK(land.seconds_of(point, again).back() == Approx(storm.seconds()).margin(0.1));
            }
            CHECK(heads[point].storm_factor == heads[point].storms[1].storm_factor);
            CHECK(heads[point].governing.cell == heads[point].storms[1].governing.cell);
        }
    }
}

TEST_CASE(
    "the times by which shares of the area arrive are those under the point's own storm, within the width of a bin") {
    const Nested land(7);
    const OwnStorms storms{.rain = {rain_times(1)}, .reference_factor = reference_factor};
    const std::vector<PointHeads> heads = heads_of(land.arrivals(), land.tree, land.points, storms);
    for (std::size_t point = 0; point < 3; ++point) {
        const double factor = heads[point].storm_factor;
        const std::vector<double> times = land.seconds_of(point, factor);
        for (std::size_t i = 0; i < told_shares.size(); ++i) {
            const auto rank =
                static_cast<std::size_t>(std::ceil(told_shares[i] * static_cast<double>(times.size()))) - 1;
            const double told = in_seconds((heads[point].by_share[i].time - land.points[point]).under(factor));
            CHECK(told == Approx(times[rank]).margin(2 + 2 * factor / reference_factor));
        }
    }
}

TEST_CASE("the storm may last as long as the sheet part alone") {
    const Nested land(3);
    const OwnStorms storms{
        .rain = {rain_times(1)}, .duration = StormDuration::sheet_part, .reference_factor = reference_factor};
    for (const PointHeads& heads : heads_of(land.arrivals(), land.tree, land.points, storms)) {
        const PointStorm& storm = heads.storms.front();
        REQUIRE(storm.iteration.end == StormEnd::settled);
        CHECK(in_seconds(storm.iteration.time()) == Approx(storm.sheet_seconds()).margin(1e-6));
        CHECK(storm.seconds() > storm.sheet_seconds());
    }
}

TEST_CASE("with an ignored tail the storm lasts as long as what is left") {
    const Nested land(5);
    OwnStorms storms{.rain = {rain_times(1)}, .reference_factor = reference_factor, .ignore_tail = 0.05};
    const std::vector<PointHeads> cut = heads_of(land.arrivals(), land.tree, land.points, storms);
    storms.ignore_tail = 0;
    const std::vector<PointHeads> whole = heads_of(land.arrivals(), land.tree, land.points, storms);
    for (std::size_t point = 0; point < 3; ++point) {
        REQUIRE(cut[point].storms.front().iteration.end == StormEnd::settled);
        CHECK(cut[point].storms.front().seconds() < whole[point].storms.front().seconds());
        CHECK(cut[point].governing.cell == cut[point].storms.front().governing.cell);
    }
}

TEST_CASE("rain that ends before the time, or makes it swing, leaves the storm unsettled") {
    const Nested land(2);
    const IntensityOfDuration ends = [](Duration t) {
        return t > minutes(30) ? std::nullopt : std::optional(millimetres_per_hour(40));
    };
    const IntensityOfDuration swings = [](Duration t) {
        return std::optional(millimetres_per_hour(t > minutes(110) ? 100 : 1));
    };
    const OwnStorms storms{.rain = {ends, swings}, .reference_factor = reference_factor};
    const PointHeads last = heads_of(land.arrivals(), land.tree, land.points, storms).back();
    CHECK(last.storms[0].iteration.end == StormEnd::beyond_the_rain);
    CHECK(last.storms[1].iteration.end == StormEnd::not_settling);
}

TEST_CASE("where no storm changes the time its intensity is read for a storm as long as the path") {
    std::vector<PointHeads> heads(1);
    heads[0].governing = {.cell = 4, .time = {.fixed = to_fixed(600), .storm = to_fixed(100)}};
    heads[0].storm_factor = 3;
    add_storms(heads, std::vector<StepTime>{{.fixed = to_fixed(60), .storm = 0}}, std::vector{rain_times(1)});
    REQUIRE(heads[0].storms.size() == 1);
    CHECK(heads[0].storms[0].seconds() == Approx(840));
    CHECK(heads[0].storms[0].iteration.intensity() == *rain_times(1)(seconds(840)));
}

TEST_CASE("bins under a storm do not depend on the order in which cells came") {
    const Nested land(11);
    StormBins there;
    StormBins back;
    for (const Head& cell : land.cells[0]) there.add(cell, 10000, reference_factor);
    StormBins half;
    for (std::size_t i = land.cells[0].size(); i-- > 0;)
        (i % 2 == 0 ? back : half).add(land.cells[0][i], 10000, reference_factor);
    back.take(std::move(half), reference_factor);
    for (const double factor : {20.0, 75.0, 200.0}) {
        CHECK(there.under(factor).area() == back.under(factor).area());
        for (const double share : told_shares)
            CHECK(there.under(factor).by_share(share).cell == back.under(factor).by_share(share).cell);
    }
}

}  // namespace
}  // namespace rillclock
