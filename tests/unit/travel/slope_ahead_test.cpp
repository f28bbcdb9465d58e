#include "reference/plain/slope_ahead.hpp"

#include <catch2/catch.hpp>

#include <random>

#include "reference/worked_terrain.hpp"

namespace rillclock {
namespace {

constexpr GroundKind overland = GroundKind::overland;
constexpr GroundKind channel = GroundKind::channel;
constexpr GroundKind water = GroundKind::water;

/// Slopes are kept in single precision: a relative error of 2⁻²⁴.
constexpr double single_precision = 6e-8;

/// A row of cells 10 m apart that drains eastward to its last.
struct Row {
    std::vector<double> levels;
    std::vector<GroundKind> kinds = {};
    double metres_per_unit = 1.0;
};

SlopeAhead ahead(const Row& row, const SlopeRules& rules) {
    const Elevations z = worked::strip(row.levels);
    const FlowForest forest(worked::eastward(z.columns()));
    Raster<FixedLength> distance(1, z.columns());
    Raster<GroundKind> kind(1, z.columns(), overland);
    for (std::int64_t i = 0; i < z.columns(); ++i) {
        distance(0, i) = to_fixed(10.0 * static_cast<double>(z.columns() - 1 - i));
        if (!row.kinds.empty()) kind(0, i) = row.kinds[static_cast<std::size_t>(i)];
    }
    return slope_ahead({.forest = forest,
                        .flow_distance = distance,
                        .spill = spill_elevations(forest, z),
                        .metres_per_elevation_unit = row.metres_per_unit,
                        .kind = kind},
                       rules);
}

std::vector<double> slopes(const Row& row, const SlopeRules& rules) {
    const SlopeAhead found = ahead(row, rules);
    return {found.slope.values().begin(), found.slope.values().end()};
}

/// Without floors; a fall is believed from `step_m` on.
SlopeRules seeing(double window_m, double step_m) {
    return {.window = metres(window_m), .vertical_step = metres(step_m), .overland_floor = 0, .channel_floor = 0};
}

Approx exactly(double slope) {
    return Approx(slope).epsilon(single_precision);
}

TEST_CASE("a plane has its own slope in every cell but the root, whatever the window and the step") {
    std::vector<double> plane;
    for (int i = 0; i <= 40; ++i) plane.push_back(0.3 * (40 - i));
    for (const double window : {0.1, 20.0, 33.0, 1e6}) {
        for (const double step : {1e-3, 0.2, 5.0, 100.0}) {
            INFO("window " << window << " m, step " << step << " m");
            const auto found = slopes({plane}, seeing(window, step));
            for (std::size_t i = 0; i < 40; ++i) REQUIRE(found[i] == exactly(0.03));
        }
    }
}

TEST_CASE("a kilometre of flat before a drop of 10 m has the step's slope over its length, not the drop's") {
    std::vector<double> levels(101, 10.0);
    levels.push_back(0.0);
    const auto found = slopes({levels}, seeing(20, 0.2));
    // The step of 0.2 m is reached 0.2 m beyond the edge of the flat, since 10 m of fall lie within 10 m.
    CHECK(found[0] == exactly(0.2 / 1000.2));
    CHECK(found[50] == exactly(0.2 / 500.2));
    CHECK(found[97] == exactly(0.2 / 30.2));
}

TEST_CASE("a drop counts for the flat before it only within the window") {
    std::vector<double> levels(101, 10.0);
    levels.push_back(0.0);
    const auto found = slopes({levels}, seeing(20, 0.2));
    CHECK(found[98] == exactly(0.2 / 20.2));
    CHECK(found[99] == exactly(10.0 / 20.0));
}

TEST_CASE("the window ends between two cells where it does") {
    // 15 m ahead the path is half-way from 10 to 4.
    CHECK(slopes({{10, 10, 4, 0}}, seeing(15, 0.2))[0] == exactly((10.0 - 7.0) / 15.0));
}

TEST_CASE("the step is reached between two cells where it is") {
    // The fall of 3 is reached half-way from 10 to 4.
    CHECK(slopes({{10, 10, 4, 0}}, seeing(5, 3))[0] == exactly(3.0 / 15.0));
}

TEST_CASE("a fall just as large as the step is believed") {
    // The fall of 4 is reached after 10 m; believed over the window, it is spread over its 15 m.
    CHECK(slopes({{8, 4, 4, 0}}, seeing(15, 4))[0] == exactly(4.0 / 15.0));
}

TEST_CASE("the window ends at the root") {
    CHECK(slopes({{3, 2, 0}}, seeing(1000, 0.2))[0] == exactly(3.0 / 20.0));
}

TEST_CASE("a path that falls less than the step has its whole fall over its whole length") {
    CHECK(slopes({{0.0625, 0.0625, 0}}, seeing(10, 0.2))[0] == exactly(0.0625 / 20.0));
}

TEST_CASE("a root has the floor of its kind") {
    const SlopeRules rules{.overland_floor = 0.001, .channel_floor = 0.0001};
    CHECK(slopes({{9, 5}, {overland, overland}}, rules)[1] == exactly(0.001));
    CHECK(slopes({{9, 5}, {overland, channel}}, rules)[1] == exactly(0.0001));
}

TEST_CASE("the window of an overland cell ends where its path turns to channel or water") {
    const GroundKind kind = GENERATE(channel, water);
    const auto found = slopes({{10, 9, 8, 0}, {overland, overland, kind, kind}}, seeing(1000, 0.2));
    CHECK(found[0] == exactly(2.0 / 20.0));
    CHECK(found[1] == exactly(1.0 / 10.0));
}

TEST_CASE("the window of a channel cell reaches on through channel, water and overland") {
    CHECK(slopes({{10, 9, 8, 0}, {channel, water, overland, overland}}, seeing(1000, 0.2))[0] == exactly(10.0 / 30.0));
}

TEST_CASE("the search for the step goes on beyond where the path turns to channel") {
    // Level until the channel, which falls 1 m in 10 m: the step of 0.5 m is reached after 15 m.
    CHECK(slopes({{2, 2, 1, 0}, {overland, channel, channel, channel}}, seeing(20, 0.5))[0] == exactly(0.5 / 15.0));
}

TEST_CASE("no slope is under the floor of its kind") {
    SlopeRules rules = seeing(20, 1e-4);
    rules.overland_floor = 0.001;
    rules.channel_floor = 0.0001;
    const std::vector<double> gentle{0.0015, 0.001, 0.0005, 0.0};  // falls 0.00005 a metre
    CHECK(slopes({gentle}, rules)[0] == exactly(0.001));
    CHECK(slopes({gentle, {channel, channel, channel, channel}}, rules)[0] == exactly(0.0001));
}

TEST_CASE("a slope above the floor is untouched by it") {
    SlopeRules rules = seeing(20, 1e-4);
    rules.overland_floor = 0.001;
    CHECK(slopes({{0.033, 0.022, 0.011, 0.0}}, rules)[0] == exactly(0.0011));
}

TEST_CASE("with the floors off a level path has the least slope any rule works with") {
    CHECK(slopes({{5, 5, 5}}, seeing(20, 0.2))[0] == exactly(least_slope));
}

TEST_CASE("a pit of one cell is crossed on its spill level") {
    // Spill levels 10, 8, 8, 6.
    const auto found = slopes({{10, 3, 8, 6}}, seeing(10, 0.2));
    CHECK(found[0] == exactly(0.2));
    // Level for 10 m, then 2 m in 10 m: the step of 0.2 m is reached after 11 m.
    CHECK(found[1] == exactly(0.2 / 11.0));
}

TEST_CASE("an added constant changes no bit of any slope") {
    std::mt19937 random(7);
    std::uniform_int_distribution<int> fall(0, 300);
    std::vector<double> levels(200);
    std::vector<double> raised(200);
    double level = 0;
    for (std::size_t i = 200; i-- > 0;) {
        levels[i] = level / 64;
        raised[i] = levels[i] + 4096;
        level += fall(random);
    }
    INFO("seed 7");
    CHECK(slopes({levels}, seeing(33, 0.7)) == slopes({raised}, seeing(33, 0.7)));
}

TEST_CASE("elevations in half metres with a factor of a half have the slopes of the metres") {
    CHECK(slopes({{10, 8, 4, 0}, {}, 0.5}, seeing(15, 0.2)) == slopes({{5, 4, 2, 0}}, seeing(15, 0.2)));
}

TEST_CASE("a path that falls just the step within the window does not fall within it, and a little more does") {
    CHECK(ahead({{4, 2, 0}}, seeing(20, 4)).falls_within(0, 0) == 0);
    CHECK(ahead({{4.0625, 2, 0}}, seeing(20, 4)).falls_within(0, 0) == 1);
}

TEST_CASE("tributaries of one cell are measured each along its own way") {
    // Two heads, 10 m and √2 · 10 m from one root.
    Raster<FlowCode> codes(2, 2, flow_void);
    codes(0, 0) = flow_code(Direction::south_east);
    codes(1, 0) = flow_code(Direction::east);
    codes(1, 1) = flow_root;
    Elevations z(2, 2, std::numeric_limits<double>::quiet_NaN());
    z(0, 0) = 4;
    z(1, 0) = 3;
    z(1, 1) = 0;
    const worked::Land w({.elevations = z,
                          .ground = Ground::planar(metres(10), metres(10)),
                          .codes = codes,
                          .surface = worked::one_surface(z, 0.1, 5),
                          .rules = worked::bare_rules()});
    CHECK(w.field.slope(0, 0) == exactly(4.0 / std::hypot(10.0, 10.0)));
    CHECK(w.field.slope(1, 0) == exactly(3.0 / 10.0));
    CHECK(w.field.slope(0, 1) == 0.0F);
}

}  // namespace
}  // namespace rillclock
