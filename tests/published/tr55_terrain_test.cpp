// TR-55, "Urban Hydrology for Small Watersheds", USDA SCS, 2nd ed., 1986, example 3-1, rebuilt as terrain: inputs and
// printed answers from memory (they reproduce to the last printed digit; the mark of tr55_example.txt). 100 ft of dense
// grass at a slope of 0.01, 1400 ft of unpaved swale at 0.01, 7300 ft of channel at 0.005; P2 is 3.6 in.

#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>
#include <limits>
#include <map>

#include "reference/worked_outlets.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"

namespace rillclock {
namespace {

constexpr double sheet_m = 100 * metres_per_foot;
constexpr double channel_begins_m = 1500 * metres_per_foot;
constexpr double whole_m = 8800 * metres_per_foot;

/// The example on a strip of square cells, one wide. The channel begins at the cell nearest to 1500 ft from the divide,
/// and the strip ends at the cell nearest to 8800 ft, each off by up to half a cell; sheet flow ends at 100 ft exactly,
/// for the step is split there. Grass reaches to the cell in which it ends.
struct Example {
    double cell_m;
    Length vertical_step;

    [[nodiscard]] std::int64_t channel_cell() const { return std::llround(channel_begins_m / cell_m); }
    [[nodiscard]] std::int64_t last_cell() const { return std::llround(whole_m / cell_m); }
    [[nodiscard]] double shallow_m() const { return static_cast<double>(channel_cell()) * cell_m - sheet_m; }
    [[nodiscard]] double channel_m() const { return static_cast<double>(last_cell() - channel_cell()) * cell_m; }

    [[nodiscard]] worked::Given terrain() const {
        Elevations z(1, last_cell() + 1);
        for (std::int64_t i = 0; i <= last_cell(); ++i) {
            const double above_channel = static_cast<double>(std::max<std::int64_t>(channel_cell() - i, 0));
            const double in_channel = static_cast<double>(last_cell() - std::max(i, channel_cell()));
            z(0, i) = cell_m * (0.01 * above_channel + 0.005 * in_channel);
        }
        worked::Given given{.elevations = z, .ground = Ground::planar(metres(cell_m), metres(cell_m))};
        given.surface = {
            .classes = {{.sheet_n = 0.24, .shallow_k = tr55_unpaved_k}, {.sheet_n = 0.05, .shallow_k = tr55_unpaved_k}},
            .index = Raster<std::uint8_t>(1, z.columns(), 1)};
        for (std::int64_t i = 0; static_cast<double>(i) * cell_m < sheet_m; ++i) given.surface.index(0, i) = 0;
        given.rules = rules();
        return given;
    }

private:
    [[nodiscard]] TravelRules rules() const {
        TravelRules rules;
        rules.slope.vertical_step = vertical_step;
        rules.sheet.limit = feet(100);
        rules.sheet.index_limit = metres(std::numeric_limits<double>::infinity());  // the limit is the stated one alone
        rules.sheet.storm_factor = nrcs_storm_factor(inches(3.6));
        rules.channel.n = 0.05;
        rules.channel.hydraulic_radius = feet(0.957);
        rules.channel.from_area = square_metres(static_cast<double>(channel_cell() + 1) * cell_m * cell_m);
        return rules;
    }
};

/// Hours by regime from the rows of the governing path, and in all.
struct Answer {
    double sheet_h = 0.0;
    double shallow_h = 0.0;
    double channel_h = 0.0;
    double whole_h = 0.0;
};

Answer answer_of(const Example& example) {
    const worked::Worked w(example.terrain());
    const Outlet& outlet = w.outlets.at(0);
    REQUIRE(outlet.governing.cells.front() == 0);
    std::map<Regime, double> by_regime;
    for (const Segment& row : outlet.governing.segments) {
        by_regime[row.regime] += in_hours(row.time.under(w.storm_factor));
    }
    REQUIRE(by_regime.size() == 3);
    return {by_regime[Regime::sheet], by_regime[Regime::shallow], by_regime[Regime::channel],
            outlet.time_of_concentration_s() / 3600};
}

/// Half of the last printed digit.
Approx printed(double hours) {
    return Approx(hours).epsilon(0).margin(0.005);
}
Approx within_a_thousandth(double hours) {
    return Approx(hours).epsilon(0.001);
}

TEST_CASE("example 3-1 of TR-55 as terrain has the printed times at cells of 1, 2 and 5 m") {
    for (const double cell : {1.0, 2.0, 5.0}) {
        INFO("cells of " << cell << " m");
        const Answer answer = answer_of({cell, millimetres(1)});
        CHECK(answer.sheet_h == printed(0.30));
        CHECK(answer.shallow_h == printed(0.24));
        CHECK(answer.channel_h == printed(0.99));
        CHECK(answer.whole_h == printed(1.53));
    }
}

TEST_CASE("example 3-1 of TR-55 as terrain holds to the formulas at the lengths that the grid gives") {
    for (const double cell : {1.0, 2.0, 5.0}) {
        INFO("cells of " << cell << " m");
        const Example example{cell, millimetres(1)};
        const Answer answer = answer_of(example);
        const double sheet = in_hours(nrcs_sheet_time({.n = 0.24, .length = feet(100), .slope = 0.01}, inches(3.6)));
        const double shallow = in_hours(metres(example.shallow_m()) / shallow_velocity(tr55_unpaved_k, 0.01));
        const double channel = in_hours(
            manning_time(metres(example.channel_m()), {.n = 0.05, .hydraulic_radius = feet(0.957), .slope = 0.005}));
        CHECK(answer.sheet_h == within_a_thousandth(sheet));
        CHECK(answer.shallow_h == within_a_thousandth(shallow));
        CHECK(answer.channel_h == within_a_thousandth(channel));
        CHECK(answer.whole_h == within_a_thousandth(sheet + shallow + channel));
    }
}

// Within 20 m of the channel the swale falls less than the default step of 0.2 m; the search for that fall goes on into
// the channel, which is half as steep, so the end of the swale is taken for gentler than it is. Nothing else
// changes.
TEST_CASE(
    "by the default vertical step of 0.2 m the swale of example 3-1 takes 7 to 9 s longer, and no other part does") {
    struct Observed {
        double cell_m;
        double shallow_h;
        double whole_h;
    };
    const auto as_observed = [](double hours) {
        return Approx(hours).epsilon(0).margin(0.00005);
    };  // half of its last digit
    for (const Observed& row : {Observed{1.0, 0.2433, 1.5328}, {2.0, 0.2437, 1.5328}, {5.0, 0.2417, 1.5312}}) {
        INFO("cells of " << row.cell_m << " m");
        const Answer exact = answer_of({row.cell_m, millimetres(1)});
        const Answer answer = answer_of({row.cell_m, metres(0.2)});
        CHECK(answer.shallow_h == as_observed(row.shallow_h));
        CHECK(answer.whole_h == as_observed(row.whole_h));
        CHECK((answer.shallow_h - exact.shallow_h) * 3600 == Approx(8.0).margin(1.5));
        CHECK(answer.sheet_h == Approx(exact.sheet_h).epsilon(1e-6));
        CHECK(answer.channel_h == Approx(exact.channel_h).epsilon(1e-6));
    }
}

}  // namespace
}  // namespace rillclock
