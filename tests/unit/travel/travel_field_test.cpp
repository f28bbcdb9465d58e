#include "reference/plain/travel_field.hpp"

#include <catch2/catch.hpp>

#include <cmath>

#include "reference/drawings.hpp"
#include "reference/worked_terrain.hpp"

namespace rillclock {
namespace {

using worked::bare_rules;
using worked::Given;
using worked::Land;

/// Sums of a few values rounded to 2⁻²⁰.
Approx within_rounding(double value) {
    return Approx(value).epsilon(0).margin(1e-5);
}

/// A row of cells of 10 m that falls 0.4 m a cell: shallow flow at 1 m/s, half a metre of sheet index a metre.
Given slope_of(std::int64_t cells, const TravelRules& rules) {
    const Elevations z = worked::even_strip(cells, 0.4);
    return {.elevations = z,
            .ground = Ground::planar(metres(10), metres(10)),
            .surface = worked::one_surface(z, 0.1, 5),
            .rules = rules};
}

TEST_CASE("times, lengths and the sheet index add up along a slope") {
    TravelRules rules = bare_rules();
    rules.sheet.limit = metres(25);
    const Land w(slope_of(6, rules));
    CHECK(from_fixed(w.field.flow_distance(0, 0)) == 50.0);
    CHECK(from_fixed(w.field.from_divide(0, 4)) == 40.0);
    CHECK(from_fixed(w.field.sheet_index(0, 4)) == within_rounding(20));
    CHECK(from_fixed_area(w.field.contributing_area(0, 4)) == 500.0);
    CHECK(from_fixed(w.field.fixed_part(0, 0)) == within_rounding(25));
    CHECK(from_fixed(w.field.storm_part(0, 0)) ==
          within_rounding(in_seconds(nrcs_sheet_formula().at_unit_storm(metres(12.5)))));
    CHECK(w.field.time_to_root(5) == StepTime{});
}

TEST_CASE("the regimes of a slope follow one another: sheet, shallow, channel") {
    TravelRules rules = bare_rules();
    rules.sheet.limit = metres(25);
    rules.channel.from_area = square_metres(2200);
    const Land w(slope_of(25, rules));
    CHECK(w.field.regime(0, 2) == Regime::sheet);  // until 25 m, the middle of its step
    CHECK(w.field.regime(0, 3) == Regime::shallow);
    CHECK(w.field.regime(0, 20) == Regime::shallow);
    CHECK(w.field.regime(0, 21) == Regime::channel);
}

TEST_CASE("a channel begins with no fewer than 20 cells, however small the stated area") {
    TravelRules rules = bare_rules();
    rules.channel.from_area = square_metres(1);
    const Land w(slope_of(25, rules));
    CHECK(w.field.kind(0, 18) == GroundKind::overland);
    CHECK(w.field.kind(0, 19) == GroundKind::channel);
}

TEST_CASE("where only mapped channels count, no area makes one") {
    const Land w(slope_of(60, bare_rules()));
    CHECK(w.field.kind(0, 59) == GroundKind::overland);
}

TEST_CASE("open water stays water where its area would make a channel") {
    TravelRules rules = bare_rules();
    rules.channel.from_area = square_metres(1);
    worked::Given given = slope_of(25, rules);
    given.rules.slope.vertical_step = metres(100);  // no fall makes a river of it
    given.surface.classes.push_back({.sheet_n = 0.1, .shallow_k = metres_per_second(5), .water_depth = metres(2)});
    given.surface.index(0, 22) = 1;
    const Land w(given);
    CHECK(w.field.regime(0, 21) == Regime::channel);
    CHECK(w.field.regime(0, 22) == Regime::water);
    CHECK(w.field.regime(0, 23) == Regime::channel);
}

TEST_CASE("where branches meet the greater sheet index and distance go on") {
    // A head beside the junction, and a branch of three steps and a diagonal that comes in from below.
    constexpr double nothing = std::numeric_limits<double>::quiet_NaN();
    Elevations z(2, 6, nothing);
    Raster<FlowCode> codes(2, 6, flow_void);
    for (const std::int64_t column : {0, 1, 2, 3}) {
        z(1, column) = 20.0 - static_cast<double>(column);
        codes(1, column) = flow_code(column < 3 ? Direction::east : Direction::north_east);
    }
    z(0, 3) = 17;
    z(0, 4) = 16;
    z(0, 5) = 15;
    codes(0, 3) = codes(0, 4) = flow_code(Direction::east);
    codes(0, 5) = flow_root;
    const Land w({.elevations = z,
                  .ground = Ground::planar(metres(10), metres(10)),
                  .codes = codes,
                  .surface = worked::one_surface(z, 0.1, 5),
                  .rules = bare_rules()});
    const Cell junction = 4;
    CHECK(from_fixed(w.field.from_divide[junction]) == within_rounding(30 + std::hypot(10, 10)));
    CHECK(w.field.sheet_index[junction] > w.field.sheet_index[9]);
    CHECK(from_fixed_area(w.field.contributing_area[junction]) == 600.0);
}

TEST_CASE("open water that falls more than the step within the window is a river, and still water is not") {
    for (const double fall : {0.05, 0.15}) {
        const Elevations z = worked::even_strip(4, fall);
        SurfaceTable surface = worked::one_surface(z, 0.1, 5);
        surface.classes[0].water_depth = metres(2);
        TravelRules rules = bare_rules();
        rules.slope.vertical_step = metres(0.2);
        const Land w(
            {.elevations = z, .ground = Ground::planar(metres(10), metres(10)), .surface = surface, .rules = rules});
        INFO("fall of " << fall << " m a cell");
        CHECK(w.field.regime(0, 0) == (fall > 0.1 ? Regime::channel : Regime::water));
    }
}

TEST_CASE("ponded depth is what spill elevation stands above the ground, in metres") {
    const Elevations z = worked::strip({12, 4, 8, 6});
    const Land w({.elevations = z,
                  .codes = worked::eastward(4),
                  .surface = worked::one_surface(z, 0.1, 5),
                  .rules = bare_rules(),
                  .metres_per_elevation_unit = 0.5});
    CHECK(step_view(w.inputs, w.field, 1).ponded_m == 2.0);
    CHECK(step_view(w.inputs, w.field, 0).ponded_m == 0.0);
}

TEST_CASE("a step's length is that of its own row and direction, and a root has none") {
    const Elevations z = drawings::terrain(R"(
        999
        953
        991
    )");
    const Land w({.elevations = z,
                  .ground = Ground::planar(metres(3), metres(4)),
                  .surface = worked::one_surface(z, 0.1, 5),
                  .rules = bare_rules()});
    CHECK(from_fixed(step_length(w.forest, w.given.ground, 4)) == 5.0);
    CHECK(step_length(w.forest, w.given.ground, 8) == 0);
}

TEST_CASE("a void has no time, no area and no regime") {
    const Elevations z = drawings::terrain(R"(
        321
        2#1
        321
    )");
    const Land w({.elevations = z, .surface = worked::one_surface(z, 0.1, 5)});
    CHECK(w.field.time_to_root(4) == StepTime{});
    CHECK(w.field.contributing_area[4] == 0);
    CHECK(w.field.regime[4] == Regime::none);
}

}  // namespace
}  // namespace rillclock
