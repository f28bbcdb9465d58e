#include "rillclock/catchment/outlet_notices.hpp"

#include <catch2/catch.hpp>

#include <cmath>

namespace rillclock {
namespace {

const Grid notice_grid{.rows = 10, .columns = 10, .left = 100, .top = 200, .cell_width = 2, .cell_height = 2};

/// A point about which there is nothing to say: 1 km and 1000 s, a fall of 10 m, no tail.
Outlet unremarkable() {
    Outlet outlet;
    outlet.number = 1;
    outlet.point.name = "culvert";
    outlet.point.cell = 23;
    outlet.arrival_s = {400, 800, 950, 1000};
    outlet.greatest_s = 1000;
    outlet.governing.seconds = 1000;
    outlet.governing.end_to_end_s = 1000;
    outlet.governing.summary.length = to_fixed(1000);
    outlet.governing.summary.fall_m = 10;
    outlet.governing.summary.slope_length_m = 10;
    return outlet;
}

/// The one notice with that code; a test fails where another one is there, or none.
Notice only(const Outlet& outlet, const std::string& code) {
    const Notices notices = notices_of(outlet, notice_grid);
    REQUIRE(notices.size() == 1);
    CHECK(notices[0].code == code);
    return notices[0];
}

void silent(const Outlet& outlet) {
    CHECK(notices_of(outlet, notice_grid).empty());
}

TEST_CASE("about a clean answer there is no notice") {
    silent(unremarkable());
}

TEST_CASE("a notice names its point and the place of its cell") {
    Outlet outlet = unremarkable();
    outlet.border_cells = 3;
    const Notice notice = only(outlet, "catchment-touches-edge");
    CHECK(notice.point == "culvert");
    CHECK(notice.place->x == 107.0);  // row 2, column 3
    CHECK(notice.place->y == 195.0);
    CHECK(notice.value == 3.0);
    CHECK(notice.effect_s == 1000.0);
}

TEST_CASE("a tenth of the path may be ponded, and no more") {
    Outlet outlet = unremarkable();
    outlet.governing.summary.ponded_length_m = 100;
    silent(outlet);
    outlet.governing.summary.ponded_length_m = 101;
    const Notice notice = only(outlet, "path-ponded");
    CHECK(notice.value == Approx(0.101));
    CHECK(notice.threshold == 0.10);
    CHECK(notice.effect_s == Approx(101.0));
}

TEST_CASE("a quarter of the path may run on the slope floor, and no more") {
    Outlet outlet = unremarkable();
    outlet.governing.summary.floor_length_m = 250;
    silent(outlet);
    outlet.governing.summary.floor_length_m = 251;
    CHECK(only(outlet, "path-on-slope-floor").threshold == 0.25);
}

TEST_CASE("a fall ratio from 0.8 to 1.25 is usual") {
    Outlet outlet = unremarkable();
    for (const double usual : {8.0, 12.5}) {
        outlet.governing.summary.slope_length_m = usual;
        silent(outlet);
    }
    outlet.governing.summary.slope_length_m = 7.9;
    CHECK(only(outlet, "fall-ratio").threshold == 0.8);
    outlet.governing.summary.slope_length_m = 12.6;
    CHECK(only(outlet, "fall-ratio").threshold == 1.25);
}

TEST_CASE("a path without fall has no fall ratio to speak of") {
    Outlet outlet = unremarkable();
    outlet.governing.summary.fall_m = 0;
    silent(outlet);
}

TEST_CASE("the last hundredth of the area may add a quarter to the time, and no more") {
    Outlet outlet = unremarkable();
    outlet.arrival_s.back() = 800;
    silent(outlet);
    outlet.arrival_s.back() = 799;
    const Notice notice = only(outlet, "slow-tail");
    CHECK(notice.value == Approx(1000.0 / 799.0));
    CHECK(notice.effect_s == Approx(201.0));
}

TEST_CASE("end-to-end slopes may give one and a half times the time either way, and no more") {
    Outlet outlet = unremarkable();
    for (const double usual : {1500.0, 667.0}) {
        outlet.governing.end_to_end_s = usual;
        silent(outlet);
    }
    for (const double far : {1501.0, 666.0}) {
        outlet.governing.end_to_end_s = far;
        CHECK(only(outlet, "end-to-end-differs").threshold == 1.5);
    }
}

TEST_CASE("flow beyond what its formulas were made for is told, each kind by its own notice") {
    const Beyond beyond{.length_m = 250, .greatest = 7, .effect_s = 12};
    const auto told = [&](Beyond PathDoubts::*kind, const std::string& code, double threshold) {
        Outlet outlet = unremarkable();
        outlet.governing.doubts.*kind = beyond;
        const Notice notice = only(outlet, code);
        CHECK(notice.value == 7.0);
        CHECK(notice.effect_s == 12.0);
        CHECK(notice.threshold == Approx(threshold));
    };
    told(&PathDoubts::shallow_length, "shallow-flow-long", 304.8);
    told(&PathDoubts::shallow_speed, "shallow-flow-fast", 3.0);
    told(&PathDoubts::channel_speed, "channel-fast", 5.0);
    told(&PathDoubts::supercritical, "channel-supercritical", 1.0);
    told(&PathDoubts::small_channels, "channel-smaller-than-its-law", 1.0);
}

TEST_CASE("the uppermost twentieth of a path may take a quarter of its time, and no more") {
    Outlet outlet = unremarkable();
    outlet.governing.doubts.head_s = 250;
    silent(outlet);
    outlet.governing.doubts.head_s = 251;
    const Notice notice = only(outlet, "slow-head");
    CHECK(notice.value == Approx(0.251));
    CHECK(notice.effect_s == Approx(1.0));
}

TEST_CASE("a point without a path has nothing to compare") {
    Outlet outlet;
    outlet.point.cell = 0;
    silent(outlet);
}

}  // namespace
}  // namespace rillclock
