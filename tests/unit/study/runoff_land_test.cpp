#include "rillclock/study/runoff_land.hpp"

#include <catch2/catch.hpp>

#include <algorithm>

namespace rillclock {
namespace {

/// Paved ground of any soil; a lawn with a coefficient on soil A and one for the others; pasture by soil and slope.
CoverBook three_ways_book() {
    CoverClass paved{.code = 1, .name = "Paved", .n_typical = 0.01};
    paved.runoff_coefficient = 0.9;
    CoverClass lawn{.code = 2, .name = "Lawn", .n_typical = 0.2};
    lawn.runoff_coefficient = 0.3;
    lawn.runoff_coefficients[0] = 0.1;
    CoverClass pasture{.code = 3, .name = "Pasture", .n_typical = 0.2};
    pasture.land_use = "pasture";
    return {"test", {paved, lawn, pasture}};
}

/// Every class on every soil and slope, of different areas.
LandAreas every_kind() {
    LandAreas land;
    FixedArea area = 1'000'000;
    for (const std::uint8_t cover : {std::uint8_t{0}, std::uint8_t{1}, std::uint8_t{2}}) {
        for (const CellSoil soil : {CellSoil::a, CellSoil::b, CellSoil::d}) {
            for (const SlopeBand slope : {SlopeBand::to_2, SlopeBand::to_10}) land[{.cover = cover, .soil = soil, .slope = slope}] = area += 12'345;
        }
    }
    return land;
}

/// Sums over rows, against the composite of the same land.
void check_sums(const std::vector<RunoffLand>& rows, const CompositeCoefficient& composite, std::size_t period) {
    double area = 0.0;
    double plain = 0.0;
    double used = 0.0;
    double uncut = 0.0;
    for (const RunoffLand& row : rows) {
        const double m2 = from_fixed_area(row.area);
        area += m2;
        plain += m2 * row.periods[period].plain;
        used += m2 * row.periods[period].used;
        uncut += m2 * row.periods[period].uncut;
    }
    CHECK(plain / area == Approx(composite.plain).epsilon(1e-12));
    CHECK(used / area == Approx(composite.value).epsilon(1e-12));
    CHECK(uncut / area == Approx(composite.uncapped).epsilon(1e-12));
    CHECK(used == Approx(from_fixed_area(composite.runoff)).epsilon(0).margin(5.01e-5));  // which is rounded to a square centimetre
}

TEST_CASE("land is told apart only by what its coefficient depends on, the greatest area first") {
    const CoverBook book = three_ways_book();
    Coefficients c(book, {}, {10, 100});
    const std::vector<RunoffLand> rows = runoff_land(every_kind(), c, 2);
    REQUIRE(rows.size() == 1 + 2 + 6);  // paved; lawn on A and elsewhere; pasture on three soils of two slopes
    CHECK(std::is_sorted(rows.begin(), rows.end(), [](const RunoffLand& a, const RunoffLand& b) { return a.area > b.area; }));
    CHECK(rows[0].kind.cover == 0);
    CHECK_FALSE((rows[0].by_soil || rows[0].by_slope));
    CHECK(rows[0].periods[1].factor == 1.25);
    CHECK(rows[0].periods[1].uncut == Approx(1.125));
    CHECK(rows[0].periods[1].used == 1.0);
    for (const RunoffLand& row : rows) {
        if (row.kind.cover == 2) CHECK((row.by_soil && row.by_slope && row.periods[1].factor == 1.0));
    }
}

TEST_CASE("rows of land add up to the composite, with the rest in one row too") {
    const CoverBook book = three_ways_book();
    Coefficients c(book, {}, {10, 100});
    for (const std::size_t most : {std::size_t{25}, std::size_t{9}, std::size_t{8}, std::size_t{2}, std::size_t{1}}) {
        const std::vector<RunoffLand> rows = runoff_land(every_kind(), c, 2, most);
        CHECK(rows.size() == std::min<std::size_t>(most, 9));
        CHECK(rows.back().is_rest() == (most < 9));
        if (most < 9) CHECK(rows.back().rows == 9 - most + 1);
        for (const std::size_t period : {std::size_t{0}, std::size_t{1}}) check_sums(rows, composite_of(every_kind(), c, period), period);
    }
}

}  // namespace
}  // namespace rillclock
