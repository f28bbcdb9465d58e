#include <catch2/catch.hpp>

#include <cmath>

#include "reference/drawings.hpp"
#include "reference/plain_slope.hpp"
#include "reference/worked_terrain.hpp"

// Floors are off in these laws: a floor is a slope that does not scale. The vertical step is a micrometre where only
// the elevations are scaled, since the distance at which a path has fallen by a fixed step does not scale with them;
// the window then always falls by more, and the slope is the window's. Where all lengths are scaled the step and the
// window are lengths among them.

namespace rillclock {
namespace {

using worked::Given;
using worked::Land;

/// Slopes are kept in single precision (2⁻²⁴), times and sheet indices rounded to 2⁻²⁰ a step, over fewer than 100
/// steps.
Approx nearly(double value) {
    return Approx(value).epsilon(1e-6).margin(1e-3);
}

void require_parts(const Land& found, const Land& base, double storm_factor, double fixed_factor) {
    for (const Cell cell : base.forest.order()) {
        REQUIRE(from_fixed(found.field.storm_part[cell]) ==
                nearly(storm_factor * from_fixed(base.field.storm_part[cell])));
        REQUIRE(from_fixed(found.field.fixed_part[cell]) ==
                nearly(fixed_factor * from_fixed(base.field.fixed_part[cell])));
    }
}

/// Thirty by thirty cells of 5 m that fall everywhere, with sheet flow for 12 m, shallow flow, and channels from 20
/// cells on.
Given three_regimes(unsigned seed) {
    std::mt19937 random(seed);
    Given given{.elevations = worked::rough_slope(random, 30, 30), .ground = Ground::planar(metres(5), metres(5))};
    given.surface = worked::random_surface(random, given.elevations, false);
    given.rules = worked::bare_rules();
    given.rules.sheet.limit = metres(12);
    given.rules.channel.from_area = square_metres(1);
    return given;
}

bool has(const Land& land, Regime regime) {
    const auto values = land.field.regime.values();
    return std::find(values.begin(), values.end(), regime) != values.end();
}

TEST_CASE("elevations times 4 halve shallow and channel times and divide NRCS sheet times by 4^0.4") {
    for (unsigned seed = 0; seed < 10; ++seed) {
        INFO("seed " << seed);
        const Given low = three_regimes(seed);
        Given high = low;
        for (double& z : high.elevations.values()) z *= 4;
        const Land base(low);
        REQUIRE(has(base, Regime::sheet));
        REQUIRE(has(base, Regime::shallow));
        REQUIRE(has(base, Regime::channel));
        require_parts(Land(high), base, std::pow(4.0, -0.4), 0.5);
    }
}

TEST_CASE("the sheet index limit is reached at twice the distance on four times the slope, at the same time") {
    for (const double factor : {1.0, 4.0}) {
        Elevations z = worked::even_strip(40, 0.05 * factor);
        Given given{.elevations = z, .ground = Ground::planar(metres(5), metres(5)), .rules = worked::bare_rules()};
        given.surface = worked::one_surface(z, 0.2, 5);
        given.rules.sheet.index_limit = feet(100);
        const Land land(given);
        // u = n·L/√S, so L = u·√S/n.
        const double sheet_m = 30.48 * std::sqrt(0.01 * factor) / 0.2;
        const double speed = 5 * std::sqrt(0.01 * factor);
        CHECK(from_fixed(land.field.fixed_part[0]) == nearly((39 * 5 - sheet_m) / speed));
        CHECK(from_fixed(land.field.storm_part[0]) ==
              nearly(in_seconds(nrcs_sheet_formula().at_unit_storm(feet(100)))));
    }
}

TEST_CASE("roughness times 2 multiplies NRCS sheet times by 2^0.8 and changes no other") {
    for (unsigned seed = 0; seed < 10; ++seed) {
        INFO("seed " << seed);
        const Given smooth = three_regimes(seed);
        Given rough = smooth;
        for (SurfaceHydraulics& surface : rough.surface.classes) surface.sheet_n *= 2;
        const Land base(smooth);
        const Land found(rough);
        require_parts(found, base, std::pow(2.0, 0.8), 1.0);
        CHECK(found.field.fixed_part == base.field.fixed_part);
    }
}

TEST_CASE("all lengths times λ multiply shallow and channel times by λ and NRCS sheet times by λ^0.8") {
    for (const double scale : {0.5, 3.0, 10.0}) {
        for (unsigned seed = 0; seed < 5; ++seed) {
            INFO("λ " << scale << ", seed " << seed);
            Given small = three_regimes(seed);
            small.rules.slope.vertical_step = metres(1.3);
            small.rules.sheet.index_limit = metres(20);
            small.rules.channel.from_area = square_metres(700);
            small.rules.channel.hydraulic_radius = metres(0.4);  // kept: Manning's time is λ for length alone
            Given large = small;
            large.ground = Ground::planar(metres(5 * scale), metres(5 * scale));
            for (double& z : large.elevations.values()) z *= scale;
            large.rules.slope.window = scale * small.rules.slope.window;
            large.rules.slope.vertical_step = scale * small.rules.slope.vertical_step;
            large.rules.sheet.limit = scale * small.rules.sheet.limit;
            large.rules.sheet.index_limit = scale * small.rules.sheet.index_limit;
            large.rules.channel.from_area = scale * scale * *small.rules.channel.from_area;
            require_parts(Land(large), Land(small), std::pow(scale, 0.8), scale);
        }
    }
}

/// A plane of slope 0.01, 300 m from the head (cell 0) to the root, flowing east or down the diagonal.
Given plane(double cell_m, bool diagonal) {
    const auto steps = static_cast<std::int64_t>(std::lround(300.0 / cell_m));
    Elevations z(diagonal ? steps + 1 : 3, steps + 1);
    const double fall = diagonal ? 0.01 * cell_m * std::sqrt(0.5) : 0.01 * cell_m;
    for (std::int64_t row = 0; row < z.rows(); ++row) {
        for (std::int64_t column = 0; column < z.columns(); ++column) {
            z(row, column) = fall * static_cast<double>(diagonal ? 2 * steps - row - column : steps - column);
        }
    }
    Given given{.elevations = z, .ground = Ground::planar(metres(cell_m), metres(cell_m)), .rules = TravelRules{}};
    given.surface = worked::one_surface(z, 0.41, 5);
    given.rules.channel.from_area.reset();
    return given;
}

TEST_CASE("a plane has one sheet total at any cell size, along the rows and turned by 45°") {
    constexpr double none = std::numeric_limits<double>::infinity();
    const auto sheet_s = [](double u) { return in_seconds(nrcs_sheet_formula().at_unit_storm(metres(u))); };
    for (const double cell : {1.0, 2.0, 5.0, 10.0, 30.0}) {
        for (const bool diagonal : {false, true}) {
            INFO("cells of " << cell << " m, " << (diagonal ? "diagonal" : "along the rows"));
            Given given = plane(cell, diagonal);
            const double length = cell * std::round(300.0 / cell) * (diagonal ? std::sqrt(2.0) : 1.0);
            // Limits of 100 ft of index (7.43 m here, inside the first cell of 10 and of 30 m), of 100 ft, and of 3 m.
            for (const auto& [limit_m, index_m] : {std::pair{none, 30.48}, {30.48, none}, {3.0, none}}) {
                given.rules.sheet.limit = metres(limit_m);
                given.rules.sheet.index_limit = metres(index_m);
                const Land land(given);
                const double sheet_m = std::min(limit_m, index_m * 0.1 / 0.41);
                REQUIRE(from_fixed(land.field.storm_part[0]) == nearly(sheet_s(0.41 * sheet_m / 0.1)));
                REQUIRE(from_fixed(land.field.fixed_part[0]) == nearly((length - sheet_m) / 0.5));
            }
        }
    }
}

/// Where a cell goes when a terrain is mirrored and turned: `way` has a bit each for rows reversed, columns reversed,
/// transposed.
template <class T>
Raster<T> turned(const Raster<T>& raster, unsigned way) {
    const bool transposed = (way & 4U) != 0;
    Raster<T> result(transposed ? raster.columns() : raster.rows(), transposed ? raster.rows() : raster.columns());
    for (std::int64_t row = 0; row < raster.rows(); ++row) {
        for (std::int64_t column = 0; column < raster.columns(); ++column) {
            const std::int64_t r = (way & 1U) != 0 ? raster.rows() - 1 - row : row;
            const std::int64_t c = (way & 2U) != 0 ? raster.columns() - 1 - column : column;
            result(transposed ? c : r, transposed ? r : c) = raster(row, column);
        }
    }
    return result;
}

bool same_or_both_void(const Elevations& a, const Elevations& b) {
    return std::equal(a.values().begin(), a.values().end(), b.values().begin(), b.values().end(),
                      [](double x, double y) { return x == y || (std::isnan(x) && std::isnan(y)); });
}

TEST_CASE("mirrored, transposed and turned terrain gives the turned answer to the last bit") {
    for (unsigned seed = 0; seed < 12; ++seed) {
        std::mt19937 random(seed);
        Given given{.elevations = worked::uneven_terrain(random, 23, 31, 9.0),
                    .ground = Ground::planar(metres(3), metres(5))};
        given.surface = worked::random_surface(random, given.elevations, true);
        for (const Cell hole : {200U, 201U, 400U}) given.elevations[hole] = std::numeric_limits<double>::quiet_NaN();
        const Land base(given);
        for (unsigned way = 1; way < 8; ++way) {
            INFO("seed " << seed << ", way " << way);
            Given moved = given;
            moved.elevations = turned(given.elevations, way);
            moved.surface.index = turned(given.surface.index, way);
            if ((way & 4U) != 0) moved.ground = Ground::planar(metres(5), metres(3));
            const Land land(moved);
            REQUIRE(same_or_both_void(land.field.spill, turned(base.field.spill, way)));
            REQUIRE(land.field.contributing_area == turned(base.field.contributing_area, way));
            REQUIRE(land.field.storm_part == turned(base.field.storm_part, way));
            REQUIRE(land.field.fixed_part == turned(base.field.fixed_part, way));
        }
    }
}

/// Rows that are each a little wider and taller than the one above, as on a geographic grid towards the equator.
std::vector<GroundRow> widening_rows(std::int64_t count) {
    std::vector<GroundRow> rows;
    for (std::int64_t i = 0; i < count; ++i) {
        const double wide = 3.0 + 0.02 * static_cast<double>(i);
        const double tall = 5.0 + 0.003 * static_cast<double>(i);
        rows.push_back({.east_west = to_fixed(wide),
                        .south = to_fixed(tall),
                        .diagonal = to_fixed(std::hypot(wide, tall)),
                        .area = to_fixed_area(wide * tall)});
    }
    return rows;
}

/// The same ground seen from the other hemisphere: a step south out of a row was the step north into it.
std::vector<GroundRow> mirrored(const std::vector<GroundRow>& rows) {
    std::vector<GroundRow> result(rows.rbegin(), rows.rend());
    for (std::size_t i = 0; i + 1 < rows.size(); ++i) {
        const GroundRow& above = rows[rows.size() - 2 - i];
        result[i].south = above.south;
        result[i].diagonal = above.diagonal;
    }
    result.back().south = result[result.size() - 2].south;
    result.back().diagonal = result[result.size() - 2].diagonal;
    return result;
}

TEST_CASE("ground with lengths row by row, mirrored east to west or north to south, gives the mirrored answer") {
    for (unsigned seed = 0; seed < 12; ++seed) {
        std::mt19937 random(seed);
        const std::vector<GroundRow> rows = widening_rows(25);
        Given given{.elevations = worked::uneven_terrain(random, 25, 19, 9.0), .ground = Ground::by_row(rows)};
        given.surface = worked::random_surface(random, given.elevations, true);
        const Land base(given);
        for (const unsigned way : {1U, 2U}) {
            INFO("seed " << seed << ", way " << way);
            Given moved = given;
            moved.elevations = turned(given.elevations, way);
            moved.surface.index = turned(given.surface.index, way);
            if (way == 1U) moved.ground = Ground::by_row(mirrored(rows));
            const Land land(moved);
            REQUIRE(land.field.contributing_area == turned(base.field.contributing_area, way));
            REQUIRE(land.field.flow_distance == turned(base.field.flow_distance, way));
            REQUIRE(land.field.storm_part == turned(base.field.storm_part, way));
            REQUIRE(land.field.fixed_part == turned(base.field.fixed_part, way));
        }
    }
}

TEST_CASE("the slope ahead is that of walking down the path cell by cell") {
    for (unsigned seed = 0; seed < 60; ++seed) {
        std::mt19937 random(seed);
        Given given{.elevations = drawings::random_terrain(random, seed % 2 == 0 ? 4 : 1000, 0.03),
                    .ground = Ground::planar(metres(2), metres(3))};
        given.surface = worked::random_surface(random, given.elevations, true);
        given.rules.channel.from_area = square_metres(180);
        std::uniform_real_distribution<double> window(1.0, 60.0);
        given.rules.slope = {.window = metres(window(random)), .vertical_step = metres(window(random) / 17)};
        const Land land(given);
        INFO("seed " << seed);
        // Kinds as the slopes were made with: before water that falls was taken for a river.
        Raster<GroundKind> kind = land.field.kind;
        for (const Cell cell : land.forest.order()) {
            if (given.surface.at(cell).water_depth) kind[cell] = GroundKind::water;
        }
        const SlopeInputs in{land.forest, land.field.flow_distance, land.field.spill, 1.0, kind};
        for (const Cell cell : land.forest.order()) {
            REQUIRE(land.field.slope[cell] ==
                    Approx(reference::plain_slope(in, given.rules.slope, cell)).epsilon(1e-6));
        }
    }
}

TEST_CASE("raising the cap on ponded speed raises no cell's time") {
    for (unsigned seed = 0; seed < 20; ++seed) {
        std::mt19937 random(seed);
        Given given{.elevations = drawings::random_terrain(random, 6, 0.02),
                    .ground = Ground::planar(metres(2), metres(2))};
        given.surface = worked::random_surface(random, given.elevations, true);
        INFO("seed " << seed);
        Raster<double> before(given.elevations.rows(), given.elevations.columns(),
                              std::numeric_limits<double>::infinity());
        for (const double cap : {0.01, 0.5, 1.0, 2.0, 8.0, std::numeric_limits<double>::infinity()}) {
            given.rules.pond.speed = metres_per_second(cap);
            const Land land(given);
            for (const Cell cell : land.forest.order()) {
                const double time = in_seconds(land.field.time_to_root(cell).under(given.rules.sheet.storm_factor));
                REQUIRE(time <= before[cell]);
                before[cell] = time;
            }
        }
    }
}

}  // namespace
}  // namespace rillclock
