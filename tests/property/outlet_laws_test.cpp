#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>

#include "reference/drawings.hpp"
#include "reference/worked_outlets.hpp"
#include "rillclock/hydraulics/open_water.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"

namespace rillclock {
namespace {

using worked::Given;
using worked::Worked;

double seconds_of(const Worked& w, Cell cell, double storm_factor) {
    return in_seconds(w.land.field.time_to_root(cell).under(storm_factor));
}

TEST_CASE("rain times 4 halves the time of a point that is reached by sheet flow alone") {
    std::mt19937 random(1);
    Given given{.elevations = worked::rough_slope(random, 12, 12), .rules = worked::bare_rules()};
    given.surface = worked::random_surface(random, given.elevations, false);
    given.rules.sheet.storm_factor = nrcs_storm_factor(inches(1.5));
    const Worked light(given);
    given.rules.sheet.storm_factor = nrcs_storm_factor(inches(6));
    const Worked heavy(given);
    INFO("seed 1");
    REQUIRE(light.outlets.size() == heavy.outlets.size());
    for (std::size_t i = 0; i < light.outlets.size(); ++i) {
        // P2^-0.5 of four times the rain is half, but for the last bit.
        CHECK(heavy.outlets[i].greatest_s == Approx(light.outlets[i].greatest_s / 2).epsilon(1e-14));
    }
}

TEST_CASE("times are finite and never fall on the way up, and roots share out the area of the data") {
    for (unsigned seed = 0; seed < 200; ++seed) {
        std::mt19937 random(seed);
        const Worked w(worked::random_given(random, seed));
        INFO("seed " << seed);
        FixedArea at_roots = 0;
        for (const Cell cell : w.land.forest.order()) {
            const StepTime time = w.land.field.time_to_root(cell);
            const Cell below = w.land.forest.downstream(cell);
            if (below == no_cell) {
                at_roots += w.land.field.contributing_area[cell];
                REQUIRE(time == StepTime{});
                continue;
            }
            REQUIRE(time.fixed >= w.land.field.fixed_part[below]);
            REQUIRE(time.storm >= w.land.field.storm_part[below]);
            REQUIRE(std::isfinite(in_seconds(time.under(w.storm_factor))));
        }
        CHECK(at_roots == static_cast<FixedArea>(w.land.forest.order().size()) * to_fixed_area(12));
    }
}

TEST_CASE("slopes lie between the floor and the whole relief over one cell") {
    for (unsigned seed = 0; seed < 100; ++seed) {
        std::mt19937 random(seed);
        const Worked w(worked::random_given(random, seed));
        INFO("seed " << seed);
        for (const Cell cell : w.land.forest.order()) {
            const bool overland = w.land.field.kind[cell] == GroundKind::overland;
            REQUIRE(w.land.field.slope[cell] >= (overland ? 0.001F : 0.0001F));
            REQUIRE(w.land.field.slope[cell] <= 200.0F / 3.0F);
        }
    }
}

TEST_CASE("the front's last arrival is the greatest time over all cells, under any storm") {
    for (unsigned seed = 0; seed < 200; ++seed) {
        std::mt19937 random(seed);
        const Worked w(worked::random_given(random, seed));
        const std::vector<Arrivals> subareas = reference::arrivals_by_subarea(w.land.inputs, w.land.field, w.tree, w.storm_factor);
        std::uniform_real_distribution<double> storm(0.0, 30.0);
        INFO("seed " << seed);
        for (int i = 0; i < 50; ++i) {
            const double s = storm(random);
            std::vector<double> greatest(subareas.size(), 0.0);
            for (const Cell cell : w.land.forest.order()) {
                double& most = greatest[w.tree.owner[cell] - 1];
                most = std::max(most, seconds_of(w, cell, s));
            }
            for (std::size_t k = 0; k < subareas.size(); ++k) {
                REQUIRE(in_seconds(subareas[k].front.last_to_arrive(s).time.under(s)) == greatest[k]);
            }
        }
    }
}

/// Times to a point of all cells that drain through it, ascending.
std::vector<double> arrival_times(const Worked& w, const Outlet& outlet) {
    const auto [through] =
        sweep_up(w.land.forest, up::Max{[&](Cell cell) { return cell == outlet.point.cell ? 1.0 : 0.0; }});
    std::vector<double> times;
    for (const Cell cell : w.land.forest.order()) {
        if (through[cell] == 0.0) continue;
        const StepTime time = w.land.field.time_to_root(cell) - w.land.field.time_to_root(outlet.point.cell);
        times.push_back(in_seconds(time.under(w.storm_factor)));
    }
    std::sort(times.begin(), times.end());
    return times;
}

TEST_CASE("shares of a point's area arrive as a sorted list of its cells says, within a second") {
    for (unsigned seed = 0; seed < 300; ++seed) {
        std::mt19937 random(seed);
        const Given given = worked::random_given(random, seed);
        const Worked w(given, {.points = worked::random_cells(random, given, 6)});
        INFO("seed " << seed);
        for (const Outlet& outlet : w.outlets) {
            const std::vector<double> times = arrival_times(w, outlet);
            REQUIRE(outlet.area == static_cast<FixedArea>(times.size()) * to_fixed_area(12));
            // Root times and their difference are rounded to doubles apart: a nanosecond.
            REQUIRE(outlet.greatest_s == Approx(times.back()).margin(1e-9));
            for (std::size_t k = 0; k < told_shares.size(); ++k) {
                const double cells = told_shares[k] * static_cast<double>(times.size());
                const auto last = static_cast<std::size_t>(std::max(std::ceil(cells - 1e-9), 1.0)) - 1;
                REQUIRE(outlet.arrival_s[k] >= times[last] - 1e-9);
                REQUIRE(outlet.arrival_s[k] < times[last] + 1.0);
            }
        }
    }
}

TEST_CASE("a new inner point changes no bit of what is known of the points below it, nor of any other") {
    for (unsigned seed = 0; seed < 400; ++seed) {
        std::mt19937 random(seed);
        const Given given = worked::random_given(random, seed);
        std::vector<Cell> cells = worked::random_cells(random, given, 7);
        if (cells.size() < 2) continue;
        const Worked with(given, {.points = cells});
        cells.pop_back();
        const Worked without(given, {.points = cells});
        INFO("seed " << seed);
        for (std::size_t i = 0; i < cells.size(); ++i) {
            const Outlet& a = without.outlets[i];
            const Outlet& b = with.outlets[i];
            REQUIRE(a.number == b.number);
            REQUIRE(a.area == b.area);
            REQUIRE(a.border_cells == b.border_cells);
            REQUIRE(a.arrival_s == b.arrival_s);
            REQUIRE(a.greatest_s == b.greatest_s);
            REQUIRE(a.governing.cells == b.governing.cells);
            REQUIRE(a.longest.cells == b.longest.cells);
            REQUIRE(a.governing.summary.time == b.governing.summary.time);
        }
    }
}

/// The time of a row's unponded part, in seconds at the storm of the study, from what the row prints.
double recomputed_s(const Worked& w, const Segment& row) {
    const TravelRules& rules = w.land.given.rules;
    const auto surface = [&] { return w.land.given.surface.classes.at(row.surface.value()); };
    switch (row.regime) {
        case Regime::sheet: {
            const Length u0 = metres(row.index_from_m);
            const Length u1 = u0 + metres(surface().sheet_n * row.length_m / std::sqrt(row.slope_equivalent));
            return rules.sheet.storm_factor * in_seconds(rules.sheet.formula.at_unit_storm(u0, u1));
        }
        case Regime::shallow:
            return row.length_m / (in_metres_per_second(surface().shallow_k) * std::sqrt(row.slope_equivalent));
        case Regime::channel:
            return rules.channel.n * row.length_m /
                   (std::pow(row.radius_equivalent_m, 2.0 / 3.0) * std::sqrt(row.slope_equivalent));
        case Regime::water:
            return row.length_m / std::sqrt(standard_gravity * in_metres(*surface().water_depth));
        case Regime::none:
            break;
    }
    return std::numeric_limits<double>::quiet_NaN();
}

void require_sound(const Worked& w, const PointPath& path) {
    StepTime sum;
    double length_m = 0.0;
    double fall_m = 0.0;
    for (const Segment& row : path.segments) {
        sum += row.time;
        length_m += row.whole_length_m();
        fall_m += row.fall_m;
        if (!(row.length_m > 0)) continue;
        const double formula_s = in_seconds((row.time - row.pond_time).under(w.storm_factor));
        // A row's pieces are each rounded to 2⁻²⁰ s: 1 ms for all of them, under a storm factor up to 5.
        REQUIRE(recomputed_s(w, row) == Approx(formula_s).epsilon(1e-4).margin(1e-3));
        if (row.regime == Regime::water) continue;
        REQUIRE(row.slope_equivalent >= row.slope_least);
        REQUIRE(row.slope_equivalent <= row.slope_greatest);
    }
    REQUIRE(sum == path.summary.time);
    REQUIRE(length_m == Approx(from_fixed(path.summary.length)).margin(1e-6));
    REQUIRE(fall_m == Approx(path.summary.fall_m).margin(1e-9));
}

TEST_CASE("rows add up to the point's time to the last unit, and each can be recomputed from itself") {
    for (unsigned seed = 0; seed < 1000; ++seed) {
        std::mt19937 random(seed);
        const Given given = worked::random_given(random, seed);
        worked::Asked asked{.points = worked::random_cells(random, given, 5)};
        asked.rules.segments = {.shortest = metres(20)};
        const Worked w(given, asked);
        INFO("seed " << seed);
        for (const Outlet& outlet : w.outlets) {
            require_sound(w, outlet.governing);
            require_sound(w, outlet.longest);
            REQUIRE(outlet.governing.seconds == outlet.greatest_s);
        }
    }
}

void require_same(const Worked& a, const Worked& b) {
    REQUIRE(a.land.forest.codes() == b.land.forest.codes());
    REQUIRE(a.land.field.slope == b.land.field.slope);
    REQUIRE(a.land.field.storm_part == b.land.field.storm_part);
    REQUIRE(a.land.field.fixed_part == b.land.field.fixed_part);
    for (std::size_t i = 0; i < a.outlets.size(); ++i) {
        const PointPath& pa = a.outlets[i].governing;
        const PointPath& pb = b.outlets[i].governing;
        REQUIRE(a.outlets[i].arrival_s == b.outlets[i].arrival_s);
        REQUIRE(pa.seconds == pb.seconds);
        REQUIRE(pa.end_to_end_s == pb.end_to_end_s);
        REQUIRE(pa.summary.fall_m == pb.summary.fall_m);
        REQUIRE(pa.summary.ponded_length_m == pb.summary.ponded_length_m);
        REQUIRE(pa.segments.size() == pb.segments.size());
    }
}

TEST_CASE("a constant added to exactly representable elevations changes no bit of the answer") {
    for (unsigned seed = 0; seed < 60; ++seed) {
        std::mt19937 random(seed);
        Given given = worked::random_given(random, seed);
        for (double& z : given.elevations.values()) z /= 16;
        const Worked low(given);
        for (double& z : given.elevations.values()) z += 4096;
        INFO("seed " << seed);
        require_same(low, Worked(given));
    }
}

TEST_CASE("elevations in another unit change no bit of the answer where the factor is a power of two") {
    for (unsigned seed = 0; seed < 60; ++seed) {
        for (const double factor : {1024.0, 0.125}) {
            std::mt19937 random(seed);
            Given given = worked::random_given(random, seed);
            const Worked metric(given);
            for (double& z : given.elevations.values()) z *= factor;
            given.metres_per_elevation_unit = 1 / factor;
            INFO("seed " << seed << ", factor " << factor);
            require_same(metric, Worked(given));
        }
    }
}

}  // namespace
}  // namespace rillclock
