#include "rillclock/study/handbook_cases.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <numeric>

#include "rillclock/study/time_area_rows.hpp"

namespace rillclock {
namespace {

/// Chicago, 10 years. Chow, Maidment and Mays, 1988, table 14.2.3 (values from memory).
std::optional<Intensity> chicago(Duration d) {
    return inches_per_hour(94.9 / (std::pow(in_minutes(d), 0.88) + 9.04));
}

FixedArea runoff(double acres_of_land, double c) { return to_fixed_area(in_square_metres(acres(acres_of_land)) * c); }

double cfs(Discharge flow) { return in_cubic_feet_per_second(flow); }

/// 2 ac of C 0.9 that arrive within 5 min at the outlet, and 8 ac of C 0.2 within 40 min.
std::vector<LumpSubarea> two() { return {{minutes(5), runoff(2, 0.9)}, {minutes(40), runoff(8, 0.2)}}; }

TEST_CASE("a paved part at the outlet makes more than the whole, and with its share of the rest still more") {
    // Computed by hand: i(5) = 7.21, 1.8 acres 13.0 ft3/s, with 8 · 5 / 40 = 1 ac at 0.2 beside 14.4.
    const HandbookCases cases = handbook_cases(two(), chicago, minutes(5), RationalConversion::rounded);
    CHECK(cfs(cases.part_alone) == Approx(13.0).margin(0.05));
    CHECK(cfs(cases.part_and_share) == Approx(14.4).margin(0.05));
    CHECK(cases.time_of_part == minutes(5));
    const Discharge whole = rational_peak(square_metres(from_fixed_area(runoff(2, 0.9) + runoff(8, 0.2))), *chicago(minutes(40)),
                                          RationalConversion::rounded);
    CHECK(cfs(whole) == Approx(9.3).margin(0.05));
}

TEST_CASE("arrivals that spread evenly give the partial-area search what the second case gives") {
    ArrivalCurve curve{.runoff = std::vector<FixedArea>(480)};
    for (std::size_t bin = 0; bin < 480; ++bin) curve.runoff[bin] = runoff(8, 0.2) / 480 + (bin < 60 ? runoff(2, 0.9) / 60 : 0);
    const IntensityOfDuration rain = chicago;
    const auto peak = partial_peak(curve, {.rain = rain, .least_time = minutes(5), .whole_time = minutes(40)});
    REQUIRE(peak);
    CHECK(in_minutes(peak->best.duration) == 5);
    const auto flow = [](double product) {
        return cfs(rational_peak(square_metres(product), Intensity::from_si(1), RationalConversion::rounded));
    };
    CHECK(flow(peak->best.product) == Approx(14.4).margin(0.05));
    CHECK(flow(peak->whole.product) == Approx(9.3).margin(0.05));
}

TEST_CASE("one subarea leaves the whole area's peak, and the least time lengthens the rain") {
    const HandbookCases one = handbook_cases({{minutes(3), runoff(2, 0.9)}}, chicago, minutes(5), RationalConversion::exact);
    CHECK(one.part_alone == rational_peak(square_metres(from_fixed_area(runoff(2, 0.9))), *chicago(minutes(5)), RationalConversion::exact));
    CHECK(one.part_alone == one.part_and_share);
    CHECK(one.time_of_part == minutes(5));
}

TEST_CASE("subareas that arrive together, or all below the least time, count together") {
    const HandbookCases cases = handbook_cases({{minutes(2), runoff(1, 1)}, {minutes(4), runoff(2, 1)}, {minutes(9), runoff(3, 1)}}, chicago,
                                               minutes(5), RationalConversion::exact);
    const Discharge at_nine = rational_peak(square_metres(from_fixed_area(runoff(6, 1))), *chicago(minutes(9)), RationalConversion::exact);
    CHECK(cfs(cases.part_alone) == Approx(cfs(at_nine)));
    const Discharge at_five = rational_peak(square_metres(from_fixed_area(runoff(3, 1) + runoff(3, 1) * 5 / 9)), *chicago(minutes(5)),
                                            RationalConversion::exact);
    CHECK(cfs(cases.part_and_share) == Approx(std::max(cfs(at_five), cfs(at_nine))));
}

TEST_CASE("the printed search of four isochrones keeps their areas, so that rain translated through its rows keeps its volume") {
    // Isochrone areas of 10, 30, 20, 40 km2 an hour apart, 0.5 cm/h over 2 h: 5, 20, 25, 30, 20, 0 km2 cm/h (computed by hand).
    ArrivalCurve curve{.runoff = {}, .bin = hours(1)};
    for (const double km2 : {10.0, 30.0, 20.0, 40.0}) curve.runoff.push_back(to_fixed_area(in_square_metres(square_kilometres(km2))));
    const IntensityOfDuration rain = [](Duration) { return std::optional(millimetres_per_hour(5)); };
    const PartialAreaSearch search{.rain = rain, .least_time = hours(1), .whole_time = hours(4)};
    const std::vector<TimeAreaRow> rows = time_area_rows(curve, search, hours(4), 0, RationalConversion::exact);
    REQUIRE(rows.size() == 4);
    std::vector<double> flows(6, 0.0);
    for (std::size_t hour = 0; hour < rows.size(); ++hour) {
        CHECK(in_hours(rows[hour].duration) == static_cast<double>(hour + 1));
        const double band = in_square_kilometres(square_metres(from_fixed_area(rows[hour].in_band)));
        for (const std::size_t block : {hour, hour + 1}) flows[block] += 0.5 * band;
    }
    CHECK(flows == std::vector<double>{5, 20, 25, 30, 20, 0});
    CHECK(std::accumulate(flows.begin(), flows.end(), 0.0) == 100.0);  // 1 cm on 100 km2
    // The greatest of the six is the flow of the row for as long a rain.
    CHECK(in_cubic_metres_per_second(rows[1].flow) == Approx(83.33).margin(0.005));
}

}  // namespace
}  // namespace rillclock
