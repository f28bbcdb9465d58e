#include "rillclock/study/catchment_runoff.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

constexpr FixedTime bin = to_fixed(5);

CoverClass with_c(int code, const std::string& name, double c) {
    CoverClass made{.code = code, .name = name, .n_typical = 0.2};
    made.runoff_coefficient = c;
    return made;
}

CoverBook runoff_book() {
    CoverClass pasture{.code = 4, .name = "Pasture", .n_typical = 0.2};
    pasture.land_use = "pasture";
    return {"test", {with_c(1, "Paved", 0.90), with_c(2, "Lawn", 0.15), with_c(3, "Unimproved", 0.25), pasture, with_c(5, "Grass", 0.22)}};
}

PeakStudy with_factors(FrequencyFactors factors) {
    PeakStudy rules;
    rules.frequency_factors = factors;
    return rules;
}

LandAreas hectares_of(const std::vector<std::pair<std::uint8_t, double>>& parts) {
    LandAreas areas;
    for (const auto& [cover, ha] : parts) areas[{.cover = cover, .soil = CellSoil::b}] += to_fixed_area(in_square_metres(hectares(ha)));
    return areas;
}

TEST_CASE("a composite coefficient is the mean by area") {
    // FHWA, HEC-22, 3rd ed., 2009, example 3-1, existing and proposed (values from memory); printed to three digits.
    const CoverBook the_book = runoff_book();
    Coefficients c(the_book, with_factors(FrequencyFactors::none), {10});
    CHECK(composite_of(hectares_of({{2, 8.95}, {4, 8.60}}), c, 0).value == Approx(0.235).margin(0.0005));
    const CompositeCoefficient proposed = composite_of(hectares_of({{0, 2.20}, {1, 0.66}, {2, 7.52}, {4, 7.17}}), c, 0);
    CHECK(proposed.value == Approx(0.315).margin(0.0006));
    CHECK(from_fixed_area(proposed.runoff) == Approx(proposed.value * 17.55e4));
}

TEST_CASE("the smaller of 1 and Cf C counts, class by class, before the mean") {
    const CoverBook the_book = runoff_book();
    Coefficients c(the_book, with_factors(FrequencyFactors::wright_mclaughlin), {10, 100});
    const LandAreas land = hectares_of({{0, 1}, {1, 1}});
    CHECK(composite_of(land, c, 0).value == Approx((0.90 + 0.15) / 2));
    const CompositeCoefficient rare = composite_of(land, c, 1);
    CHECK(rare.frequency_factor == 1.25);
    CHECK(rare.value == Approx((1.0 + 0.1875) / 2));      // 1.25 · 0.90 = 1.125 is cut
    CHECK(rare.uncapped == Approx((1.125 + 0.1875) / 2));  // and shown
    CHECK(rare.greatest == Approx(1.125));
    CHECK(rare.plain == Approx((0.90 + 0.15) / 2));
}

TEST_CASE("no frequency factor acts on a coefficient that depends on the return period already") {
    const CoverBook the_book = runoff_book();
    Coefficients c(the_book, with_factors(FrequencyFactors::wright_mclaughlin), {10, 100});
    const LandAreas land = hectares_of({{3, 1}});
    CHECK(composite_of(land, c, 0).value == 0.18);  // pasture, group B, to 2 %
    CHECK(composite_of(land, c, 1).value == 0.23);
    CHECK(composite_of(land, c, 1).frequency_factor == 1.0);
}

TEST_CASE("what is lacking is said of the first kind of land that lacks it") {
    CoverClass bare{.code = 1, .name = "Scrub", .n_typical = 0.2};
    const CoverBook lacking{"test", {bare}};
    Coefficients c(lacking, with_factors(FrequencyFactors::none), {10});
    CHECK(lacking_coefficient(hectares_of({{0, 1}}), c, 0) == "the cover book has no c or land_use for Scrub");
    const CoverBook whole = runoff_book();
    Coefficients d(whole, with_factors(FrequencyFactors::none), {10});
    CHECK(lacking_coefficient(hectares_of({{0, 1}, {1, 2}}), d, 0).empty());
}

HistogramEntry entry(std::int32_t storm_bin, std::int32_t fixed_bin, std::uint8_t cover, double m2) {
    return {.storm_bin = storm_bin, .fixed_bin = fixed_bin, .kind = {.cover = cover}, .area = to_fixed_area(m2)};
}

TEST_CASE("under one storm land stays in its bins, with C by kind") {
    const CoverBook the_book = runoff_book();
    Coefficients c(the_book, with_factors(FrequencyFactors::none), {10});
    const ArrivalHistogram histogram({entry(0, 7, 0, 100), entry(0, 7, 1, 200), entry(0, 9, 0, 10)});
    const ArrivalCurve curve = BinnedLand(histogram, BinPlacing({.bin = bin}, 1.0)).curve(c, 0);
    CHECK(curve.first_bin == 7);
    CHECK(curve.runoff == std::vector<FixedArea>{to_fixed_area(90 + 30), 0, to_fixed_area(9)});
    CHECK(curve.by_earliest.empty());
    CHECK(curve.by_latest.empty());
}

std::vector<std::pair<std::int64_t, FixedArea>> shares(const BinPlacing& placing, const HistogramEntry& e) {
    std::vector<std::pair<std::int64_t, FixedArea>> made;
    placing.share_out(e, [&](std::int64_t at, FixedArea area) { made.emplace_back(at, area); });
    return made;
}

TEST_CASE("a point's own storm stretches the storm part of its bins") {
    const HistogramRules rules{.bin = bin, .storm_factor = 2.0, .storms = Storms::by_point};
    const BinPlacing placing(rules, 3.0);
    const BinRange even = placing.bins(entry(4, 10, 0, 1));  // storm part 20 to 25 s, which becomes 30 to 37.5 s; with the fixed one 80 to 92.5 s
    CHECK(even.first == 15);                                 // half a unit before 80 s, since both times are rounded
    CHECK(even.last == 18);
    const BinRange odd = placing.bins(entry(3, 10, 0, 1));   // 72.5 to 85 s
    CHECK(odd.first == 14);
    CHECK(odd.last == 16);
}

TEST_CASE("a stated way moves bins by its time, and bins below 0 are rounded down") {
    const BinPlacing placing({.bin = bin}, 1.0);
    HistogramEntry moved = entry(0, 10, 0, 1);
    moved.shift = {.fixed = to_fixed(12)};
    CHECK(shares(placing, moved) == std::vector<std::pair<std::int64_t, FixedArea>>{{12, to_fixed_area(0.6)}, {13, to_fixed_area(0.4)}});
    moved.shift = {.fixed = -to_fixed(51)};
    CHECK(shares(placing, moved) == std::vector<std::pair<std::int64_t, FixedArea>>{{-1, to_fixed_area(0.2)}, {0, to_fixed_area(0.8)}});
    moved.shift = {.fixed = to_fixed(15)};
    CHECK(shares(placing, moved) == std::vector<std::pair<std::int64_t, FixedArea>>{{13, to_fixed_area(1)}});
}

TEST_CASE("land that lies across bins is bounded by the first and the last of them") {
    const CoverBook the_book = runoff_book();
    Coefficients c(the_book, with_factors(FrequencyFactors::none), {10});
    HistogramEntry moved = entry(0, 7, 0, 100);
    moved.shift = {.fixed = to_fixed(1)};
    const ArrivalCurve curve = BinnedLand(ArrivalHistogram({moved}), BinPlacing({.bin = bin}, 1.0)).curve(c, 0);
    CHECK(curve.runoff == std::vector<FixedArea>{to_fixed_area(72), to_fixed_area(18)});
    CHECK(curve.by_earliest == std::vector<FixedArea>{to_fixed_area(90), 0});
    CHECK(curve.by_latest == std::vector<FixedArea>{0, to_fixed_area(90)});
}

TEST_CASE("land that is stretched to a stated time leaves no gaps between its bins") {
    // Three bins of 5 s after the point; the last cell at 15 s less a unit, stated as 60 s: each bin takes 20 s.
    const CoverBook the_book = runoff_book();
    Outlet outlet;
    outlet.own_front.add({.cell = 1, .time = {.fixed = 3 * bin}});
    const PointOverride time{.point = "P", .time = seconds(60), .place = "overrides.csv"};
    const ArrivalHistogram own({entry(0, 0, 0, 8), entry(0, 1, 0, 8), entry(0, 2, 0, 8)});
    const HistogramRules rules{.bin = bin};
    const ArrivalHistogram edited = edited_histogram(own, {.stated = &time}, outlet, rules, the_book, {});
    std::vector<FixedArea> areas(12, 0);
    for (const HistogramEntry& e : edited.entries()) {
        for (const auto& [at, area] : shares(BinPlacing(rules, 1.0), e)) {
            if (at >= 0 && at < 12) areas[static_cast<std::size_t>(at)] += area;
        }
    }
    for (const FixedArea area : areas) CHECK(static_cast<double>(area) == Approx(static_cast<double>(to_fixed_area(2))).epsilon(1e-5));
}

TEST_CASE("histograms that are put together hold what one of all the land holds") {
    ArrivalHistogram a({entry(0, 3, 0, 5), entry(0, 1, 1, 2), entry(0, 3, 0, 1)});
    const ArrivalHistogram b({entry(0, 3, 0, 4), entry(0, 2, 1, 7)});
    a.add(b);
    REQUIRE(a.entries().size() == 3);
    CHECK(a.entries()[0].fixed_bin == 1);
    CHECK(a.entries()[1].fixed_bin == 2);
    CHECK(a.entries()[2].area == to_fixed_area(10));
    CHECK(a.area() == to_fixed_area(19));
}

}  // namespace
}  // namespace rillclock
