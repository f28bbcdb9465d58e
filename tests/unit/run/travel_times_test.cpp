#include "rillclock/run/travel_times.hpp"

#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>
#include <limits>

#include "rillclock/core/error.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"
#include "rillclock/raster/raster_source.hpp"
#include "rillclock/study/study_keys.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

constexpr double nothing = std::numeric_limits<double>::quiet_NaN();

/// A plane of three columns that falls to the south at 0.05, cells of 2 m, grass of the book nlcd all over.
struct Plane {
    Raster<double> elevations{61, 3};
    Raster<std::int32_t> cover{61, 3, 71};
    Study study;

    Plane() {
        for (std::int64_t row = 0; row < 61; ++row)
            for (std::int64_t column = 0; column < 3; ++column) elevations(row, column) = 100.0 - 0.1 * static_cast<double>(row);
        study.surface.book = "nlcd";
        study.rain.two_year_24_hour = inches(3.6);
    }

    [[nodiscard]] TravelTimes times(Length cell = metres(2), Length height = metres(2)) const {
        RasterSource elevation_source(elevations);
        RasterSource cover_source(cover);
        return travel_times({.elevations = elevation_source, .cover = cover_source, .cell_width = cell, .cell_height = height}, study);
    }
};

TEST_CASE("down a plane in memory water takes the time of the handbook's two formulas") {
    const TravelTimes times = Plane().times();
    // n 0.368, 100 ft · √0.05 / n ends sheet flow; k of short-grass pasture is 6.962 ft/s.
    const Length sheet = mccuen_spiess_length(0.368, 0.05);
    const Duration expected = nrcs_sheet_time({.n = 0.368, .length = sheet, .slope = 0.05}, inches(3.6)) +
                              (metres(120) - sheet) / shallow_velocity(feet_per_second(6.962), 0.05);
    CHECK(times.minutes(0, 1) == Approx(in_minutes(expected)).epsilon(1e-4));
    CHECK(times.minutes(60, 1) == 0);
    CHECK(times.flow_azimuth(0, 1) == 180);
    CHECK(times.flow_azimuth(60, 1) == 65534);
    CHECK(times.contributing_area_m2(60, 1) == 61 * 4);
    CHECK(times.regime(0, 1) == 1);
    CHECK(times.regime(59, 1) == 2);
    CHECK(times.notices.empty());
}

TEST_CASE("void cells have no time and count") {
    Plane plane;
    plane.elevations(30, 1) = nothing;
    plane.elevations(31, 1) = std::numeric_limits<double>::infinity();
    const TravelTimes times = plane.times();
    CHECK(times.void_cells == 2);
    CHECK(std::isnan(times.minutes(30, 1)));
    CHECK(times.flow_azimuth(31, 1) == 65535);
    REQUIRE(times.notices.size() == 1);
    CHECK(times.notices.front().code == "elevation-not-finite");
}

TEST_CASE("land that cannot be worked is refused in a sentence") {
    CHECK_THROWS_WITH(Plane().times(metres(nothing)), Contains("a cell size is nan m; give lengths above 0"));
    CHECK_THROWS_WITH(Plane().times(metres(2), metres(-1)), Contains("a cell size is -1 m"));
    Plane other;
    other.cover = Raster<std::int32_t>(61, 4, 71);
    CHECK_THROWS_WITH(other.times(), Contains("the elevations have 61 rows × 3 columns and the land cover 61 rows × 4 columns"));
    Plane empty;
    std::fill(empty.elevations.values().begin(), empty.elevations.values().end(), nothing);
    CHECK_THROWS_WITH(empty.times(), Contains("every cell is void"));
    Plane unknown;
    unknown.cover(3, 1) = 7;
    CHECK_THROWS_WITH(unknown.times(), Contains("class 7 (1 cell)"));
}

TEST_CASE("what needs files, points or rain by duration is refused and not passed over") {
    Plane plane;
    SECTION("points") { plane.study.points.file = "points.gpkg"; }
    SECTION("channels") { plane.study.terrain.channels.file = "brook.gpkg"; }
    SECTION("soils") { plane.study.surface.soil.file = "soils.tif"; }
    SECTION("kinematic sheet flow") { plane.study.timing.sheet = "kinematic"; }
    SECTION("catchments") { plane.study.points.catchments.file = "basins.gpkg"; }
    SECTION("cover areas") { plane.study.surface.cover_areas.file = "plan.gpkg"; }
    SECTION("scenarios") { plane.study.scenarios.push_back({.name = "after", .changes = {}}); }
    SECTION("ranges") { plane.study.uncertainty.emplace(); }
    CHECK_THROWS_WITH(plane.times(), Contains("travel times from rasters in memory do not know of"));
}

TEST_CASE("the keys that act on travel times are keys of a study") {
    for (const std::string_view key : travel_time_keys()) {
        INFO(key);
        CHECK(is_study_key(key));
    }
}

}  // namespace
}  // namespace rillclock
