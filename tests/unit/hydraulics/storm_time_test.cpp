#include "rillclock/hydraulics/storm_time.hpp"

#include <boost/math/tools/roots.hpp>
#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <limits>
#include <random>
#include <vector>

#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

/// The ten-year rain of Chicago: i = 94.9 / (t^0.88 + 9.04), in/h and min.
/// Source: Chow, Maidment and Mays, Applied Hydrology, 1988, table 14.2.3 (value from memory).
std::optional<Intensity> chicago(Duration duration) {
    return inches_per_hour(94.9 / (std::pow(in_minutes(duration), 0.88) + 9.04));
}

TimeOfIntensity sheet(double n, double length_ft, double slope) {
    const Length u = sheet_index({.n = n, .length = feet(length_ft), .slope = slope});
    const Duration at_unit = kinematic_sheet_formula(kinematic_constant_hec22).at_unit_storm(u);
    return [=](Intensity intensity) { return at_unit * kinematic_storm_factor(intensity); };
}

std::vector<double> minutes_computed(const StormTime& solution) {
    std::vector<double> list;
    for (const StormIteration& row : solution.rows) list.push_back(in_minutes(row.computed));
    return list;
}

// The traces by hand have three decimals of a minute; their last number is the one that no longer changes.
TEST_CASE("the asphalt plot under Chicago's rain goes by the trace made by hand") {
    const StormTime solution =
        solve_storm_time(sheet(0.011, 300, 0.02), chicago, {.start = minutes(5), .tolerance = seconds(0.01)});
    const std::vector<double> by_hand{2.802, 2.656, 2.646, 2.645};
    CHECK(solution.end == StormEnd::settled);
    auto computed = minutes_computed(solution);
    CHECK(computed.back() == Approx(2.645).margin(0.0006));
    CHECK(in_inches_per_hour(solution.intensity()) == Approx(8.33).margin(0.005));
    REQUIRE(computed.size() >= by_hand.size());
    computed.resize(by_hand.size());
    CHECK_THAT(computed, Catch::Approx(by_hand).margin(0.0006));
}

TEST_CASE("the grass plot under Chicago's rain goes by the trace made by hand") {
    const StormTime solution =
        solve_storm_time(sheet(0.24, 100, 0.01), chicago, {.start = minutes(20), .tolerance = seconds(0.01)});
    const std::vector<double> by_hand{14.184, 13.239, 13.071, 13.041};
    CHECK(solution.end == StormEnd::settled);
    auto computed = minutes_computed(solution);
    CHECK(computed.back() == Approx(13.034).margin(0.0006));
    CHECK(in_inches_per_hour(solution.intensity()) == Approx(5.10).margin(0.005));
    REQUIRE(computed.size() >= by_hand.size());
    computed.resize(by_hand.size());
    CHECK_THAT(computed, Catch::Approx(by_hand).margin(0.0006));
}

TEST_CASE("each row assumes what the one before computed and reads the rain there") {
    const TimeOfIntensity time = sheet(0.24, 100, 0.01);
    const StormTime solution = solve_storm_time(time, chicago, {.start = minutes(20)});
    REQUIRE(solution.rows.size() > 3);
    CHECK(solution.rows.front().assumed == minutes(20));
    for (std::size_t i = 0; i < solution.rows.size(); ++i) {
        const StormIteration& row = solution.rows[i];
        if (i > 0) CHECK(row.assumed == solution.rows[i - 1].computed);
        CHECK(row.intensity == *chicago(row.assumed));
        CHECK(row.computed == time(row.intensity));
    }
}

TEST_CASE("the rounds close in from one side") {
    const StormTime from_above = solve_storm_time(sheet(0.24, 100, 0.01), chicago, {.start = hours(2)});
    const StormTime from_below = solve_storm_time(sheet(0.24, 100, 0.01), chicago, {.start = seconds(1)});
    const auto falling = minutes_computed(from_above);
    const auto rising = minutes_computed(from_below);
    CHECK(std::is_sorted(falling.rbegin(), falling.rend()));
    CHECK(std::is_sorted(rising.begin(), rising.end()));
    CHECK(falling.back() >= rising.back());
}

/// A line of rain that is straight between knots on log-log paper and goes on beyond them.
struct KnottedRain {
    std::vector<double> log_seconds;
    std::vector<double> log_intensity;

    std::optional<Intensity> operator()(Duration duration) const {
        const double x = std::log(duration.si());
        const auto after = std::upper_bound(log_seconds.begin() + 1, log_seconds.end() - 1, x);
        const auto i = static_cast<std::size_t>(after - log_seconds.begin());
        const double share = (x - log_seconds[i - 1]) / (log_seconds[i] - log_seconds[i - 1]);
        return Intensity::from_si(std::exp(log_intensity[i - 1] + share * (log_intensity[i] - log_intensity[i - 1])));
    }
};

/// The greatest of A·i^-0.4 + B over some cells: a front.
struct RandomFront {
    std::vector<double> storm_part;
    std::vector<double> constant_part;

    Duration operator()(Intensity intensity) const {
        double greatest = 0;
        for (std::size_t k = 0; k < storm_part.size(); ++k)
            greatest = std::max(greatest, storm_part[k] * kinematic_storm_factor(intensity) + constant_part[k]);
        return seconds(greatest);
    }
};

class RandomStorms {
public:
    explicit RandomStorms(std::uint64_t seed) : random_(seed) {}

    KnottedRain rain() {
        KnottedRain rain{{0.0}, {std::log(1e-4)}};
        for (int knot = 0; knot < 12; ++knot) {
            const double step = 0.3 + 1.5 * share_(random_);
            rain.log_seconds.push_back(rain.log_seconds.back() + step);
            rain.log_intensity.push_back(rain.log_intensity.back() - share_(random_) * step);
        }
        return rain;
    }
    RandomFront front() {
        RandomFront front;
        for (int k = 0; k < 5; ++k) {
            front.storm_part.push_back(20 * share_(random_));
            front.constant_part.push_back(3600 * share_(random_));
        }
        return front;
    }
    double share() { return share_(random_); }

private:
    std::mt19937_64 random_;
    std::uniform_real_distribution<double> share_{0.0, 1.0};
};

/// The same time by bisection between bounds.
double bracketed_seconds(const TimeOfIntensity& time, const IntensityOfDuration& rain) {
    const auto surplus = [&](double t) { return t - time(*rain(seconds(t))).si(); };
    const auto [low, high] =
        boost::math::tools::bisect(surplus, 1e-3, 1e9, boost::math::tools::eps_tolerance<double>(50));
    return (low + high) / 2;
}

TEST_CASE("the settled time of 2000 random fronts and rains is the root between bounds") {
    RandomStorms random(20240607);
    for (int draw = 0; draw < 2000; ++draw) {
        const KnottedRain rain = random.rain();
        const RandomFront front = random.front();
        const StormTime solution = solve_storm_time(front, rain);
        REQUIRE(solution.end == StormEnd::settled);
        // Within 0.4/0.6 of the tolerance of 0.1 s.
        REQUIRE(std::fabs(solution.time().si() - bracketed_seconds(front, rain)) <= 0.067);
    }
}

TEST_CASE("with a finer tolerance the settled time comes as near as one likes") {
    RandomStorms random(20240607);
    for (int draw = 0; draw < 200; ++draw) {
        const KnottedRain rain = random.rain();
        const RandomFront front = random.front();
        const StormTime solution = solve_storm_time(front, rain, {.tolerance = seconds(1e-6)});
        REQUIRE(solution.end == StormEnd::settled);
        REQUIRE(std::fabs(solution.time().si() - bracketed_seconds(front, rain)) <= 1e-6);
    }
}

TEST_CASE("a kink of the rain at the solution changes nothing") {
    RandomStorms random(20240607);
    for (int draw = 0; draw < 500; ++draw) {
        const KnottedRain rain = random.rain();
        const std::size_t knot = 1 + static_cast<std::size_t>(random.share() * 10);
        const double at_kink = std::exp(rain.log_seconds[knot]);
        const double factor = at_kink / kinematic_storm_factor(*rain(seconds(at_kink)));
        const RandomFront front{{factor}, {0.0}};
        const StormTime solution = solve_storm_time(front, rain, {.start = seconds(at_kink * (0.1 + random.share()))});
        REQUIRE(solution.end == StormEnd::settled);
        REQUIRE(std::fabs(solution.time().si() - at_kink) <= 0.067 + 1e-12 * at_kink);
    }
}

TEST_CASE("rain that ends before the solution is said so, with the rows up to there") {
    const IntensityOfDuration ten_minutes = [](Duration duration) {
        return duration <= minutes(10) ? chicago(duration) : std::nullopt;
    };
    const StormTime solution = solve_storm_time(sheet(0.24, 100, 0.01), ten_minutes);
    CHECK(solution.end == StormEnd::beyond_the_rain);
    REQUIRE(solution.rows.size() == 1);
    CHECK(solution.time() > minutes(10));
}

TEST_CASE("rain that ends just after the solution is long enough from below") {
    const double settled = 13.033;
    const IntensityOfDuration to_the_solution = [&](Duration duration) {
        return duration <= minutes(settled) ? chicago(duration) : std::nullopt;
    };
    CHECK(solve_storm_time(sheet(0.24, 100, 0.01), to_the_solution).end == StormEnd::settled);
}

TEST_CASE("a swing between two times is stopped and not taken for an answer") {
    const IntensityOfDuration rising = [](Duration d) { return Intensity::from_si(std::pow(d.si() / 100, 2.5)); };
    const TimeOfIntensity time = [](Intensity i) { return seconds(100 * kinematic_storm_factor(i)); };
    const StormTime solution = solve_storm_time(time, rising, {.start = seconds(200), .most_rows = 30});
    CHECK(solution.end == StormEnd::not_settling);
    CHECK(solution.rows.size() == 30);
    CHECK(in_seconds(solution.rows[0].computed) == Approx(50));
    CHECK(in_seconds(solution.rows[1].computed) == Approx(200));
}

TEST_CASE("a time that is no number or has no bound ends the iteration at once") {
    const TimeOfIntensity none = [](Intensity) { return seconds(std::nan("")); };
    const TimeOfIntensity endless = [](Intensity) { return seconds(std::numeric_limits<double>::infinity()); };
    for (const TimeOfIntensity& time : {none, endless}) {
        const StormTime solution = solve_storm_time(time, chicago);
        CHECK(solution.end == StormEnd::not_settling);
        CHECK(solution.rows.size() == 1);
    }
}

TEST_CASE("an iteration without rows has no time") {
    const IntensityOfDuration none = [](Duration) { return std::nullopt; };
    const StormTime solution = solve_storm_time(sheet(0.24, 100, 0.01), none);
    CHECK(solution.end == StormEnd::beyond_the_rain);
    CHECK(std::isnan(solution.time().si()));
    CHECK(std::isnan(solution.intensity().si()));
}

TEST_CASE("a start or tolerance not above zero is refused") {
    for (const double bad : {0.0, -1.0, std::nan("")}) {
        CHECK_THROWS_WITH(solve_storm_time(sheet(0.24, 100, 0.01), chicago, {.start = seconds(bad)}),
                          Catch::Contains("above zero"));
        CHECK_THROWS_WITH(solve_storm_time(sheet(0.24, 100, 0.01), chicago, {.tolerance = seconds(bad)}),
                          Catch::Contains("above zero"));
    }
}

}  // namespace
}  // namespace rillclock
