#include "rillclock/catchment/restated_path.hpp"

#include <catch2/catch.hpp>

#include "reference/worked_outlets.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"

namespace rillclock {
namespace {

using worked::Worked;

/// 40 m that fall by 1 in 50 over n = 0.24 and k = 2 m/s: 30 m of sheet flow, then shallow flow.
Worked strip() {
    worked::Given given{.elevations = worked::even_strip(41, 0.02), .codes = worked::eastward(41), .rules = worked::bare_rules()};
    given.surface = worked::one_surface(given.elevations, 0.24, 2.0);
    given.rules.sheet.limit = metres(30);
    given.rules.sheet.storm_factor = nrcs_storm_factor(inches(3.5));
    return Worked(std::move(given));
}

double seconds_of(const Worked& w, const StatedOverland& stated) {
    const PathGround ground{.classes = w.land.given.surface.classes, .rules = w.land.given.rules, .storm_factor = w.storm_factor};
    return in_seconds(restated_time(ground, w.pieces(w.outlets.front().governing.cells), stated).under(w.storm_factor));
}

double by_hand(double sheet_m, double n) {
    const Duration sheet = nrcs_sheet_time({.n = n, .length = metres(sheet_m), .slope = 0.02}, inches(3.5));
    return in_seconds(sheet) + in_seconds(metres(40 - sheet_m) / shallow_velocity(metres_per_second(2), 0.02));
}

TEST_CASE("with nothing else stated than what is computed the time is that of the path") {
    const Worked w = strip();
    // Pieces are rounded to 2^-20 s, and the handbook's formula in feet to its constant.
    CHECK(seconds_of(w, {.sheet_length = metres(30)}) == Approx(w.outlets.front().governing.seconds).margin(1e-4));
    CHECK(seconds_of(w, {.n = 0.24}) == Approx(w.outlets.front().governing.seconds).margin(1e-4));
    CHECK(w.outlets.front().governing.seconds == Approx(by_hand(30, 0.24)).epsilon(1e-4));
}

TEST_CASE("a stated length of sheet flow leaves the rest to shallow flow, and takes from it") {
    const Worked w = strip();
    for (const double length : {0.0, 12.5, 30.0, 36.0, 40.0, 100.0}) {
        INFO("length " << length);
        const double used = std::min(length, 40.0);
        const double expected = used > 0 ? by_hand(used, 0.24) : in_seconds(metres(40) / shallow_velocity(metres_per_second(2), 0.02));
        CHECK(seconds_of(w, {.sheet_length = metres(length)}) == Approx(expected).epsilon(1e-4));
    }
}

TEST_CASE("a stated roughness acts on sheet flow alone") {
    const Worked w = strip();
    CHECK(seconds_of(w, {.n = 0.011}) == Approx(by_hand(30, 0.011)).epsilon(1e-4));
    CHECK(seconds_of(w, {.sheet_length = metres(10), .n = 0.4}) == Approx(by_hand(10, 0.4)).epsilon(1e-4));
}

}  // namespace
}  // namespace rillclock
