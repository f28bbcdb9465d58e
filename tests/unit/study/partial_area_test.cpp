#include "rillclock/study/partial_area.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <random>

namespace rillclock {
namespace {

constexpr std::int64_t five_seconds = 5;

/// i = a / (b + d)^c, d in minutes.
IntensityOfDuration power_rain(double a, double b, double c) {
    return [=](Duration d) { return std::optional(millimetres_per_hour(a / std::pow(b + in_minutes(d), c))); };
}

/// C·A that arrives evenly over a time, in bins of 5 s.
ArrivalCurve even_curve(Duration whole) {
    return {.first_bin = 100, .runoff = std::vector<FixedArea>(static_cast<std::size_t>(in_seconds(whole) / five_seconds), to_fixed_area(50))};
}

/// The definition, tried out: every whole number of bins between the least and the whole time, every window.
double by_brute_force(const ArrivalCurve& curve, const PartialAreaSearch& search) {
    FixedArea all = 0;
    for (const FixedArea runoff : curve.runoff) all += runoff;
    const Duration longest = std::max(search.whole_time, search.least_time);
    double best = from_fixed_area(all) * search.rain(longest)->si();
    if (search.least_time >= search.whole_time) return best;
    const auto try_duration = [&](Duration d, std::size_t bins) {
        for (std::size_t first = 0; first < curve.runoff.size(); ++first) {
            FixedArea within = 0;
            for (std::size_t i = first; i < std::min(curve.runoff.size(), first + bins); ++i) within += curve.runoff[i];
            best = std::max(best, from_fixed_area(within) * search.rain(d)->si());
        }
    };
    const auto least = static_cast<std::size_t>(std::floor(search.least_time / curve.bin));
    try_duration(search.least_time, std::max<std::size_t>(1, least));
    for (std::size_t bins = least + 1; curve.bin * static_cast<double>(bins) < search.whole_time; ++bins) {
        try_duration(curve.bin * static_cast<double>(bins), bins);
    }
    return best;
}

/// The same of arrivals that are not binned: durations between any two of them, and the least time.
double without_bins(const std::vector<std::pair<double, FixedArea>>& arrivals, const PartialAreaSearch& search) {
    const auto most_within = [&](double d) {
        FixedArea most = 0;
        for (const auto& [from, unused] : arrivals) {
            FixedArea within = 0;
            for (const auto& [time, runoff] : arrivals) within += time >= from && time <= from + d ? runoff : 0;
            most = std::max(most, within);
        }
        return from_fixed_area(most);
    };
    const double least = in_seconds(search.least_time);
    const double whole = std::max(least, in_seconds(search.whole_time));
    double best = most_within(whole) * search.rain(seconds(whole))->si();
    if (least < whole) best = std::max(best, most_within(least) * search.rain(search.least_time)->si());
    for (const auto& [from, unused] : arrivals) {
        for (const auto& [to, also_unused] : arrivals) {
            const double d = to - from;
            if (d > least && d < whole) best = std::max(best, most_within(d) * search.rain(seconds(d))->si());
        }
    }
    return best;
}

TEST_CASE("with a linear time-area curve and c > 1 the peak is that of rain of b / (c - 1)") {
    // Campos et al., 2020, Water 12(10), 2730: b = 15 min, c = 1.5 make 30 min.
    const IntensityOfDuration rain = power_rain(1000, 15, 1.5);
    const auto peak = partial_peak(even_curve(minutes(120)), {.rain = rain, .least_time = minutes(5), .whole_time = minutes(120)});
    REQUIRE(peak);
    CHECK(in_minutes(peak->best.duration) == Approx(30).margin(1.0 / 12));  // one bin
    CHECK(peak->best.product > peak->whole.product);
}

TEST_CASE("with a linear time-area curve and c at most 1 the whole area makes the peak") {
    for (const double c : {0.6, 0.9, 1.0}) {
        const IntensityOfDuration rain = power_rain(1000, 10, c);
        const auto peak = partial_peak(even_curve(minutes(120)), {.rain = rain, .least_time = minutes(5), .whole_time = minutes(120)});
        REQUIRE(peak);
        INFO("c " << c);
        CHECK(in_minutes(peak->best.duration) == 120);
        CHECK(peak->best.product == peak->whole.product);
    }
}

TEST_CASE("below the least time all of the area makes the peak") {
    const IntensityOfDuration rain = power_rain(1000, 15, 1.5);
    const auto peak = partial_peak(even_curve(minutes(3)), {.rain = rain, .least_time = minutes(5), .whole_time = minutes(3)});
    REQUIRE(peak);
    CHECK(in_minutes(peak->best.duration) == 5);
    CHECK(peak->best.product == peak->whole.product);
    CHECK(peak->best.runoff == 36 * to_fixed_area(50));
}

TEST_CASE("rain that ends before the whole time gives no peak") {
    const IntensityOfDuration short_rain = [](Duration d) {
        return d <= minutes(60) ? std::optional(millimetres_per_hour(50)) : std::nullopt;
    };
    CHECK_FALSE(partial_peak(even_curve(minutes(120)), {.rain = short_rain, .least_time = minutes(5), .whole_time = minutes(120)}));
}

struct RandomCase {
    std::vector<std::pair<double, FixedArea>> arrivals;  ///< seconds, C·A
    ArrivalCurve curve;
    Duration whole;
    IntensityOfDuration rain;
};

RandomCase random_case(unsigned seed) {
    std::mt19937 random(seed);
    std::uniform_real_distribution<double> share(0.0, 1.0);
    const double whole_s = 20 + 1500 * share(random);
    RandomCase made{.arrivals = {}, .curve = {}, .whole = seconds(whole_s),
                    .rain = power_rain(2000, 2 + 20 * share(random), 0.5 + 1.2 * share(random))};
    made.curve.runoff.assign(static_cast<std::size_t>(whole_s / five_seconds) + 1, 0);
    const int count = 3 + static_cast<int>(40 * share(random));
    for (int i = 0; i < count; ++i) {
        const double time = i == 0 ? whole_s : whole_s * std::pow(share(random), 1 + seed % 3);
        const FixedArea runoff = to_fixed_area(10 + 1000 * share(random));
        made.arrivals.emplace_back(time, runoff);
        made.curve.runoff[static_cast<std::size_t>(time / five_seconds)] += runoff;
    }
    return made;
}

TEST_CASE("the search finds what trying every duration and window finds") {
    for (unsigned seed = 0; seed < 150; ++seed) {
        const RandomCase c = random_case(seed);
        const PartialAreaSearch search{.rain = c.rain, .least_time = seconds(seed % 4 * 60.0), .whole_time = c.whole};
        const auto peak = partial_peak(c.curve, search);
        INFO("seed " << seed);
        REQUIRE(peak);
        CHECK(peak->best.product == by_brute_force(c.curve, search));
        CHECK(peak->best.product >= peak->whole.product);
    }
}

TEST_CASE("a search without bins stays within the stated bounds") {
    double widest = 0.0;
    for (unsigned seed = 0; seed < 150; ++seed) {
        const RandomCase c = random_case(seed);
        const PartialAreaSearch search{.rain = c.rain, .least_time = seconds(seed % 4 * 60.0), .whole_time = c.whole};
        const auto peak = partial_peak(c.curve, search);
        const double exact = without_bins(c.arrivals, search);
        INFO("seed " << seed);
        REQUIRE(peak);
        CHECK(peak->least_product <= exact * (1 + 1e-12));
        CHECK(peak->greatest_product >= exact * (1 - 1e-12));
        widest = std::max(widest, peak->greatest_product / peak->least_product);
    }
    CHECK(widest > 1.0);
}

TEST_CASE("the peak never falls when the rain rises") {
    for (unsigned seed = 0; seed < 60; ++seed) {
        const RandomCase c = random_case(seed);
        std::mt19937 random(seed);
        std::uniform_real_distribution<double> more(1.0, 2.0);
        const double rise = more(random);
        const double tilt = more(random) - 1.0;
        const IntensityOfDuration heavier = [&](Duration d) {
            return std::optional((rise + tilt / (1 + in_minutes(d))) * *c.rain(d));
        };
        const auto before = partial_peak(c.curve, {.rain = c.rain, .least_time = minutes(1), .whole_time = c.whole});
        const auto after = partial_peak(c.curve, {.rain = heavier, .least_time = minutes(1), .whole_time = c.whole});
        INFO("seed " << seed);
        REQUIRE(before);
        REQUIRE(after);
        CHECK(after->best.product >= before->best.product);
        CHECK(after->whole.product >= before->whole.product);
    }
}

}  // namespace
}  // namespace rillclock
