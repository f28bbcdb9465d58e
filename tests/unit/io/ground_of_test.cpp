#include "rillclock/io/ground_of.hpp"

#include <array>
#include <cmath>
#include <cstdio>
#include <memory>
#include <numbers>
#include <sstream>

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

/// Distance in metres as PROJ's own command prints it, to a micrometre.
double distance_by_command(double latitude_1, double longitude_1, double latitude_2, double longitude_2) {
    std::ostringstream command;
    command.precision(17);
    command << "echo '" << latitude_1 << " " << longitude_1 << " " << latitude_2 << " " << longitude_2
            << "' | geod +ellps=WGS84 -I -F %.9f +units=m";
    const std::unique_ptr<FILE, int (*)(FILE*)> pipe(popen(command.str().c_str(), "r"), &pclose);
    REQUIRE(pipe);
    std::array<char, 256> line{};
    REQUIRE(std::fgets(line.data(), static_cast<int>(line.size()), pipe.get()));
    const std::string text(line.data());
    const std::size_t last = text.find_last_of('\t');
    return std::stod(text.substr(last + 1));
}

const Grid thousandths = {
    .rows = 3, .columns = 4, .left = -113.0, .top = 37.5, .cell_width = 0.001, .cell_height = 0.002};

}  // namespace

TEST_CASE("a projected grid in US survey feet is measured in metres") {
    const ReferenceSystem system = ReferenceSystem::from_text("EPSG:2263");
    const Ground ground = ground_of({.rows = 2, .columns = 2, .cell_width = 3937, .cell_height = 3937}, system);
    CHECK(ground.length(0, Direction::east) == to_fixed(1200.0));
    CHECK(ground.cell_area(1) == to_fixed_area(1.44e6));
}

TEST_CASE("a projected grid in international feet is told apart") {
    const ReferenceSystem system = ReferenceSystem::from_text("EPSG:2222");
    const Ground ground = ground_of({.rows = 2, .columns = 2, .cell_width = 10000, .cell_height = 5000}, system);
    CHECK(ground.length(0, Direction::east) == to_fixed(3048.0));
    CHECK(ground.length(0, Direction::south) == to_fixed(1524.0));
}

TEST_CASE("geodesic lengths are those of PROJ's own command") {
    const Ground ground = ground_of(thousandths, ReferenceSystem::wgs84());
    // rounding to 2^-20 m and the nine printed digits
    CHECK(from_fixed(ground.length(1, Direction::east)) ==
          Approx(distance_by_command(37.497, 0, 37.497, 0.001)).margin(1e-6).epsilon(0));
    CHECK(from_fixed(ground.length(1, Direction::south)) ==
          Approx(distance_by_command(37.497, 0, 37.495, 0)).margin(1e-6).epsilon(0));
    CHECK(from_fixed(ground.length(1, Direction::south_west)) ==
          Approx(distance_by_command(37.497, 0.001, 37.495, 0)).margin(1e-6).epsilon(0));
}

TEST_CASE("the last row steps south as the row before") {
    const Ground ground = ground_of(thousandths, ReferenceSystem::wgs84());
    CHECK(ground.length(2, Direction::south) == ground.length(1, Direction::south));
    CHECK(ground.length(2, Direction::south_east) == ground.length(1, Direction::south_east));
}

TEST_CASE("the cells of a whole earth have its area") {
    const Grid earth = {.rows = 180, .columns = 360, .left = -180, .top = 90, .cell_width = 1, .cell_height = 1};
    const Ground ground = ground_of(earth, ReferenceSystem::wgs84());
    double area = 0;
    for (std::int64_t r = 0; r < earth.rows; ++r) area += 360.0 * from_fixed_area(ground.cell_area(r));
    CHECK(area == Approx(510065621724088.44).epsilon(1e-12));  // 4 pi times the square of the authalic radius of WGS 84
}

TEST_CASE("a grid beyond a pole is refused") {
    const Grid grid = {.rows = 2, .columns = 2, .left = 0, .top = 90.5, .cell_width = 1, .cell_height = 1};
    CHECK_THAT(sentence_of([&] { (void)ground_of(grid, ReferenceSystem::wgs84()); }), Contains("beyond a pole"));
}

TEST_CASE("a grid across the 180th meridian is refused with advice") {
    const Grid grid = {.rows = 2, .columns = 20, .left = 170, .top = 10, .cell_width = 1, .cell_height = 1};
    CHECK_THAT(sentence_of([&] { (void)ground_of(grid, ReferenceSystem::wgs84()); }),
               Contains("180th") && Contains("gdalwarp"));
}

TEST_CASE("angles in grads are refused") {
    const ReferenceSystem system = ReferenceSystem::from_text("EPSG:4807");  // NTF (Paris)
    CHECK_THAT(sentence_of([&] { (void)ground_of(thousandths, system); }), Contains("another unit than degrees"));
}

TEST_CASE("a local system is refused") {
    const ReferenceSystem system = ReferenceSystem::from_text("LOCAL_CS[\"site\",UNIT[\"metre\",1]]");
    CHECK_THAT(sentence_of([&] { (void)ground_of(thousandths, system); }),
               Contains("neither projected nor geographic"));
}

namespace {

/// y of a latitude in web Mercator.
double mercator_y(double latitude) {
    return 6378137.0 * std::asinh(std::tan(latitude * std::numbers::pi / 180.0));
}
double latitude_of(double y) {
    return std::atan(std::sinh(y / 6378137.0)) * 180.0 / std::numbers::pi;
}

}  // namespace

TEST_CASE("in web Mercator lengths are those on the ellipsoid, at every latitude") {
    const double degrees_across = 30.0 / 6378137.0 * 180.0 / std::numbers::pi;
    for (const double latitude : {-60.0, -33.0, 0.0, 12.0, 37.5, 50.0, 71.0, 84.0}) {
        INFO(latitude);
        const double top = mercator_y(latitude);
        const Grid grid = {.rows = 3, .columns = 4, .left = -12580000, .top = top, .cell_width = 30, .cell_height = 20};
        const Ground ground = ground_of(grid, ReferenceSystem::from_text("EPSG:3857"));
        const double middle = latitude_of(top - 30), lower = latitude_of(top - 50);
        CHECK(from_fixed(ground.length(1, Direction::east)) ==
              Approx(distance_by_command(middle, 0, middle, degrees_across)).margin(2e-6).epsilon(0));
        CHECK(from_fixed(ground.length(1, Direction::south)) ==
              Approx(distance_by_command(middle, 0, lower, 0)).margin(2e-6).epsilon(0));
        CHECK(from_fixed(ground.length(1, Direction::south_west)) ==
              Approx(distance_by_command(middle, degrees_across, lower, 0)).margin(2e-6).epsilon(0));
        CHECK(from_fixed(ground.length(2, Direction::east)) / 30 ==
              Approx(std::cos(middle * std::numbers::pi / 180)).epsilon(0.0035));  // the flattening of the earth
    }
}

TEST_CASE("the cells of the whole web map have the area of the earth between its edges") {
    const double edge = 20037508.342789244;
    const Grid map = {.rows = 512, .columns = 256, .left = 0, .top = edge, .cell_width = edge / 256, .cell_height = edge / 256};
    const Ground ground = ground_of(map, ReferenceSystem::from_text("EPSG:3857"));
    double area = 0;
    for (std::int64_t r = 0; r < map.rows; ++r) area += 512.0 * from_fixed_area(ground.cell_area(r));
    CHECK(area == Approx(508147130188099.25).epsilon(1e-9));  // within ±85.0511287798066°, by Snyder's eq. 3-12 in Python
}

TEST_CASE("a grid off the web map is refused") {
    const Grid grid = {.rows = 2, .columns = 2, .left = 20037500, .top = 0, .cell_width = 30, .cell_height = 30};
    CHECK_THAT(sentence_of([&] { (void)ground_of(grid, ReferenceSystem::from_text("EPSG:3857")); }),
               Contains("180th meridian") && Contains("gdalwarp"));
}
