#include "rillclock/catchment/segments.hpp"

#include <catch2/catch.hpp>

#include <cmath>

#include "reference/worked_outlets.hpp"

namespace rillclock {
namespace {

using worked::cells_from_to;
using worked::Worked;

/// Lengths and times are sums of values rounded to 2⁻²⁰.
Approx rounded(double value) {
    return Approx(value).epsilon(0).margin(1e-4);
}

/// Shallow flow from the divide on, unless a test says otherwise; the window is one cell of 10 m, so slopes change
/// where the ground does.
TravelRules shallow_rules() {
    TravelRules rules = worked::bare_rules();
    rules.slope.window = metres(10);
    rules.sheet.limit = metres(0);
    rules.channel.hydraulic_radius = metres(1);
    return rules;
}

worked::Given row_falling(const std::vector<double>& levels, const TravelRules& rules) {
    const Elevations z = worked::strip(levels);
    return {.elevations = z,
            .ground = Ground::planar(metres(10), metres(10)),
            .codes = worked::eastward(z.columns()),
            .surface = worked::one_surface(z, 0.1, 5),
            .rules = rules};
}

/// Levels from a fall a cell for each step, down to 0.
std::vector<double> levels_of(const std::vector<double>& falls) {
    std::vector<double> levels{0.0};
    for (auto fall = falls.rbegin(); fall != falls.rend(); ++fall)
        levels.insert(levels.begin(), levels.front() + *fall);
    return levels;
}

std::vector<double> runs(const std::vector<std::pair<int, double>>& steps_and_falls) {
    std::vector<double> falls;
    for (const auto& [steps, fall] : steps_and_falls) falls.insert(falls.end(), static_cast<std::size_t>(steps), fall);
    return levels_of(falls);
}

std::vector<Segment> whole_row(const Worked& w) {
    return w.segments(cells_from_to(0, static_cast<Cell>(w.grid.columns - 1)));
}

std::vector<double> lengths(const std::vector<Segment>& segments) {
    std::vector<double> found;
    for (const Segment& segment : segments) found.push_back(segment.whole_length_m());
    return found;
}

TEST_CASE("a path is cut where the regime changes, within the step in which it does") {
    TravelRules rules = shallow_rules();
    rules.sheet.limit = metres(25);
    rules.channel.from_area = square_metres(3000);
    const auto segments = whole_row(Worked(row_falling(runs({{40, 0.4}}), rules)));
    REQUIRE(segments.size() == 3);
    CHECK(segments[0].regime == Regime::sheet);
    CHECK(segments[0].length_m == rounded(25));
    CHECK(segments[0].fall_m == Approx(1.0));
    CHECK(segments[1].regime == Regime::shallow);
    CHECK(segments[1].length_m == rounded(290 - 25));
    CHECK(segments[2].regime == Regime::channel);
    CHECK(segments[2].length_m == rounded(110));
}

TEST_CASE("a path is cut where the surface class changes, but not in a channel") {
    for (const bool is_channel : {false, true}) {
        TravelRules rules = shallow_rules();
        if (is_channel) rules.channel.from_area = square_metres(2000);
        worked::Given given = row_falling(runs({{28, 0.4}}), rules);
        given.surface.classes.push_back({.sheet_n = 0.2, .shallow_k = metres_per_second(2)});
        for (std::int64_t column = 24; column < 29; ++column) given.surface.index(0, column) = 1;
        const Worked w(std::move(given));
        const auto segments = w.segments(cells_from_to(20, 28));
        INFO((is_channel ? "channel" : "shallow"));
        if (is_channel) {
            REQUIRE(segments.size() == 1);
            CHECK_FALSE(segments[0].surface.has_value());
        } else {
            REQUIRE(lengths(segments) == std::vector<double>{40, 40});
            CHECK(segments[0].surface == 0);
            CHECK(segments[1].surface == 1);
        }
    }
}

TEST_CASE("sheet flow is cut where a longer branch joins and u jumps, and not on the longer branch itself") {
    constexpr double nothing = std::numeric_limits<double>::quiet_NaN();
    Elevations z(2, 7, nothing);
    Raster<FlowCode> codes(2, 7, flow_void);
    for (std::int64_t column = 0; column < 4; ++column) {
        z(1, column) = 20 - 0.4 * static_cast<double>(column);
        codes(1, column) = flow_code(column < 3 ? Direction::east : Direction::north_east);
    }
    for (std::int64_t column = 3; column < 7; ++column) {
        z(0, column) = 20 - 0.4 * static_cast<double>(column);
        codes(0, column) = column < 6 ? flow_code(Direction::east) : flow_root;
    }
    TravelRules rules = worked::bare_rules();
    rules.slope.window = metres(10);
    const Worked w({.elevations = z,
                    .ground = Ground::planar(metres(10), metres(10)),
                    .codes = codes,
                    .surface = worked::one_surface(z, 0.1, 5),
                    .rules = rules});
    const auto short_way = w.segments({3, 4, 5, 6});
    REQUIRE(lengths(short_way) == std::vector<double>{10, 20});
    CHECK(short_way[0].index_from_m == 0.0);
    CHECK(short_way[0].index_to_m == rounded(5));
    CHECK(short_way[1].index_from_m > 20);
    CHECK(short_way[1].index_to_m == rounded(short_way[1].index_from_m + 10));
    CHECK(w.segments({7, 8, 9, 10, 4, 5, 6}).size() == 1);
}

TEST_CASE("a channel is cut where its area has grown more than one and a half times") {
    TravelRules rules = shallow_rules();
    rules.channel.from_area = square_metres(2000);
    const Worked w(row_falling(runs({{50, 0.4}}), rules));
    const auto segments = w.segments(cells_from_to(19, 49));
    REQUIRE(segments.size() == 3);
    CHECK(from_fixed_area(segments[0].area_from) == 2000.0);
    CHECK(from_fixed_area(segments[0].area_to) == 3000.0);
    CHECK(from_fixed_area(segments[1].area_from) == 3100.0);
    CHECK(from_fixed_area(segments[1].area_to) == 4600.0);
    CHECK(from_fixed_area(segments[2].area_from) == 4700.0);
}

TEST_CASE("a path is cut where the slope class changes for as long as the shortest segment") {
    // Slopes of 0.03 and 0.3; the shortest segment is 50 m.
    CHECK(lengths(whole_row(Worked(row_falling(runs({{10, 0.3}, {5, 3.0}, {10, 0.3}}), shallow_rules())))) ==
          std::vector<double>{100, 50, 100});
    CHECK(lengths(whole_row(Worked(row_falling(runs({{10, 0.3}, {4, 3.0}, {10, 0.3}}), shallow_rules())))) ==
          std::vector<double>{240});
}

TEST_CASE("a short run of a slope class joins what comes before it, and at the head what comes after") {
    CHECK(lengths(whole_row(Worked(row_falling(runs({{10, 0.3}, {3, 3.0}, {10, 1.0}}), shallow_rules())))) ==
          std::vector<double>{130, 100});
    CHECK(lengths(whole_row(Worked(row_falling(runs({{3, 3.0}, {10, 0.3}}), shallow_rules())))) == std::vector<double>{130});
}

TEST_CASE("slopes within one class do not cut") {
    // 0.021 to 0.049, of the class 0.02 to 0.05.
    CHECK(whole_row(Worked(row_falling(runs({{10, 0.21}, {10, 0.49}}), shallow_rules()))).size() == 1);
}

TEST_CASE("the shortest segment may be a share of the path") {
    worked::Asked asked;
    asked.rules.segments = {.shortest = metres(50), .shortest_share = 0.25};
    // The steep run of 50 m is a fifth of 250 m.
    CHECK(whole_row(Worked(row_falling(runs({{10, 0.3}, {5, 3.0}, {10, 0.3}}), shallow_rules()), asked)).size() == 1);
}

TEST_CASE("sheet flow is not cut by slope") {
    TravelRules rules = shallow_rules();
    rules.sheet.limit = metres(1e9);
    const auto segments = whole_row(Worked(row_falling(runs({{10, 0.3}, {10, 3.0}}), rules)));
    REQUIRE(segments.size() == 1);
    CHECK(segments[0].slope_least == Approx(0.03));
    CHECK(segments[0].slope_greatest == Approx(0.3));
    // Σ d/√S over L, which n does not enter.
    CHECK(segments[0].slope_equivalent == Approx(std::pow(200 / (100 / std::sqrt(0.03) + 100 / std::sqrt(0.3)), 2)));
}

/// Falls of 4 m a cell, a hollow of `cells` cells 3 m deep behind a pass, falls of 4 m a cell.
std::vector<double> hollow(int cells) {
    std::vector<double> levels;
    for (int i = 0; i <= 10; ++i) levels.push_back(100 - 4.0 * i);
    for (int i = 0; i < cells; ++i) levels.push_back(53);
    for (int i = 0; i <= 10; ++i) levels.push_back(56 - 4.0 * i);
    return levels;
}

TEST_CASE("ponded cells do not cut a path: their length and time stand apart") {
    TravelRules rules = shallow_rules();
    rules.pond.depth = metres(0.3);
    for (const int cells : {3, 20}) {
        const Worked w(row_falling(hollow(cells), rules));
        const auto segments = whole_row(w);
        INFO(cells << " ponded cells");
        REQUIRE(segments.size() == 1);
        CHECK(segments[0].pond_length_m == 10.0 * cells);
        // √(g·3) is 5.4 m/s, and the cap 2 m/s.
        CHECK(from_fixed(segments[0].pond_time.fixed) == rounded(10.0 * cells / 2.0));
        CHECK(segments[0].length_m == 10.0 * static_cast<double>(w.grid.columns - 1 - cells));
    }
}

TEST_CASE("the slopes of a segment are those of the ground that is not ponded") {
    TravelRules rules = shallow_rules();
    rules.pond.depth = metres(0.3);
    const auto segments = whole_row(Worked(row_falling(hollow(20), rules)));
    // The step onto the pass itself has a window of 10 m on level spill: only its own cell is that slow.
    CHECK(segments.at(0).slope_greatest == Approx(0.4));
    CHECK(segments.at(0).slope_least > 1e-4);
}

TEST_CASE("a path that is ponded throughout has its time in the pond and no slope") {
    TravelRules rules = shallow_rules();
    rules.pond.depth = metres(0.3);
    const Worked w(row_falling(hollow(20), rules));
    const auto segments = w.segments(cells_from_to(12, 20));
    REQUIRE(segments.size() == 1);
    CHECK(segments[0].length_m == 0.0);
    CHECK(segments[0].time == segments[0].pond_time);
    CHECK(segments[0].slope_equivalent == 0.0);
}

TEST_CASE("sheet flow behind a ponded cell begins a row of its own, since u has jumped") {
    TravelRules rules = shallow_rules();
    rules.sheet.limit = metres(1e9);
    rules.pond.depth = metres(0.3);
    const auto segments = whole_row(Worked(row_falling(hollow(3), rules)));
    REQUIRE(segments.size() == 2);
    CHECK(segments[0].pond_length_m == 30.0);
    CHECK(segments[1].index_from_m > segments[0].index_to_m);
}

TEST_CASE("the equivalent slope of shallow flow is that of Taylor and Schwarz") {
    // 40 m at 0.04 and 40 m at 0.01, both too short to stand alone.
    TravelRules rules = shallow_rules();
    rules.slope.window = metres(1);
    const auto segments = whole_row(Worked(row_falling(runs({{4, 0.4}, {4, 0.1}}), rules)));
    REQUIRE(segments.size() == 1);
    CHECK(segments[0].slope_equivalent == Approx(std::pow(80 / (40 / 0.2 + 40 / 0.1), 2)));
    CHECK(from_fixed(segments[0].time.fixed) == rounded(40 / (5 * 0.2) + 40 / (5 * 0.1)));
    CHECK(segments[0].end_to_end_slope() == Approx(0.025));
    CHECK(segments[0].end_to_end_s == Approx(80 / (5 * std::sqrt(0.025))));
}

TEST_CASE("a channel's row prints the radius and the area at both ends") {
    TravelRules rules = shallow_rules();
    rules.channel.hydraulic_radius.reset();
    rules.channel.from_area = square_metres(2000);
    const Worked w(row_falling(runs({{50, 0.4}}), rules));
    const Segment first = w.segments(cells_from_to(19, 49)).at(0);
    CHECK(first.radius_from_m == Approx(in_metres(rules.channel.radius_at(square_metres(2000)))));
    CHECK(first.radius_to_m == Approx(in_metres(rules.channel.radius_at(square_metres(3000)))));
    CHECK(first.radius_equivalent_m > first.radius_from_m);
    CHECK(first.radius_equivalent_m < first.radius_to_m);
}

TEST_CASE("a row across open water has the time of the wave and no slope") {
    worked::Given given = row_falling({1.0, 1.0, 1.0, 0.99}, shallow_rules());
    given.rules.slope.vertical_step = metres(0.2);
    given.surface.classes[0].water_depth = metres(4);
    const auto segments = whole_row(Worked(std::move(given)));
    REQUIRE(segments.size() == 1);
    CHECK(segments[0].regime == Regime::water);
    CHECK(segments[0].slope_equivalent == 0.0);
    CHECK(from_fixed(segments[0].time.fixed) == rounded(30 / std::sqrt(9.80665 * 4)));
    CHECK(segments[0].end_to_end_s == Approx(30 / std::sqrt(9.80665 * 4)));
}

TEST_CASE("a path of one cell has no segments") {
    CHECK(Worked(row_falling(runs({{4, 0.4}}), shallow_rules())).segments({4}).empty());
}

TEST_CASE("an added constant changes no bit of the fall of a segment") {
    // Sheet flow ends within a step, where a level between two cells has to be found.
    TravelRules rules = shallow_rules();
    rules.sheet.limit = metres(3.1);
    std::vector<double> levels = runs({{8, 0.375}});
    const auto low = whole_row(Worked(row_falling(levels, rules)));
    for (double& level : levels) level += 4096;
    const auto high = whole_row(Worked(row_falling(levels, rules)));
    REQUIRE(low.size() == high.size());
    for (std::size_t i = 0; i < low.size(); ++i) {
        CHECK(low[i].fall_m == high[i].fall_m);
        CHECK(low[i].end_to_end_s == high[i].end_to_end_s);
    }
}

}  // namespace
}  // namespace rillclock
