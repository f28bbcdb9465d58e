#include "meridian_cut.hpp"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <random>

#include "rillclock/raster/region_outlines.hpp"

using namespace rillclock;

namespace {

double area_of(const Line& ring) {
    double sum = 0.0;
    for (std::size_t i = 0; i + 1 < ring.size(); ++i) sum += (ring[i].x - ring[0].x) * (ring[i + 1].y - ring[0].y) - (ring[i + 1].x - ring[0].x) * (ring[i].y - ring[0].y);
    return sum / 2.0;
}

/// Even–odd over all rings of all polygons: how many polygons hold the place.
std::size_t held(const std::vector<Polygon>& polygons, const Place& at) {
    return static_cast<std::size_t>(std::count_if(polygons.begin(), polygons.end(), [&](const Polygon& polygon) {
        bool inside = false;
        for (const Line& ring : polygon.rings) {
            for (std::size_t i = 0; i + 1 < ring.size(); ++i) {
                const Place& a = ring[i];
                const Place& b = ring[i + 1];
                if ((a.y > at.y) != (b.y > at.y) && at.x < a.x + (at.y - a.y) / (b.y - a.y) * (b.x - a.x)) inside = !inside;
            }
        }
        return inside;
    }));
}

double wrapped(double longitude) { return longitude > 180.0 ? longitude - 360.0 : longitude; }

}  // namespace

TEST_CASE("what lies on one side of the meridian stays as it is") {
    const std::vector<Polygon> made = cut_at_meridian({{.rings = {{{179.0, 0.0}, {179.5, 0.0}, {179.5, 1.0}}}}});
    REQUIRE(made.size() == 1);
    CHECK(made[0].rings[0].size() == 4);
    CHECK(made[0].rings[0][1].x == 179.5);
}

TEST_CASE("a square across the meridian becomes two") {
    const std::vector<Polygon> made = cut_at_meridian({{.rings = {{{179.0, 0.0}, {-179.0, 0.0}, {-179.0, 1.0}, {179.0, 1.0}, {179.0, 0.0}}}}});
    REQUIRE(made.size() == 2);
    CHECK(area_of(made[0].rings[0]) == Approx(1.0));
    CHECK(area_of(made[1].rings[0]) == Approx(1.0));
    for (const Place& at : made[0].rings[0]) CHECK((at.x >= 179.0 && at.x <= 180.0));
    for (const Place& at : made[1].rings[0]) CHECK((at.x >= -180.0 && at.x <= -179.0));
}

TEST_CASE("a ring that only touches the meridian is one piece") {
    const std::vector<Polygon> made = cut_at_meridian({{.rings = {{{179.0, 0.0}, {180.0, 0.0}, {180.0, 1.0}, {179.0, 1.0}}}}});
    REQUIRE(made.size() == 1);
    CHECK(area_of(made[0].rings[0]) == Approx(1.0));
}

TEST_CASE("a hole across the meridian opens both sides, one beside it stays a hole of its side") {
    const Line outer{{179.0, 0.0}, {-179.0, 0.0}, {-179.0, 3.0}, {179.0, 3.0}};
    const Line across{{179.5, 1.0}, {179.5, 2.0}, {-179.5, 2.0}, {-179.5, 1.0}};
    const Line beside{{-179.4, 1.0}, {-179.4, 2.0}, {-179.2, 2.0}, {-179.2, 1.0}};
    const std::vector<Polygon> made = cut_at_meridian({{.rings = {outer, across, beside}}});
    REQUIRE(made.size() == 2);
    CHECK(made[0].rings.size() == 1);
    CHECK(made[1].rings.size() == 2);
    CHECK(area_of(made[0].rings[0]) == Approx(2.5));
    CHECK(area_of(made[1].rings[0]) == Approx(2.5));
    CHECK(area_of(made[1].rings[1]) == Approx(-0.2));
}

TEST_CASE("random outlines across the meridian are covered once on either side, and nothing else is") {
    std::mt19937 random(5);
    for (int round = 0; round < 300; ++round) {
        const std::size_t rows = 3 + random() % 10;
        const std::size_t columns = 4 + random() % 10;
        RegionBorders borders(static_cast<std::int64_t>(columns));
        std::vector<std::vector<RegionLabel>> labels(rows, std::vector<RegionLabel>(columns));
        for (auto& row : labels) {
            for (auto& label : row) label = random() % 3 == 0 ? no_region : 1;
            borders.add_row(row);
        }
        borders.finish();
        // Now on a line between cells, now through their middles.
        const double meridian_at = static_cast<double>(1 + random() % (columns - 2)) + (round % 2 == 0 ? 0.0 : 0.5);
        const auto longitude = [&](double column) { return 180.0 + 0.1 * (column - meridian_at); };
        std::vector<Polygon> whole = in_cells(borders.outline(1));
        double area = 0.0;
        for (Polygon& polygon : whole) {
            for (Line& ring : polygon.rings) {
                for (Place& at : ring) at = {wrapped(longitude(at.x)), -0.1 * at.y};
            }
        }
        const std::vector<Polygon> made = cut_at_meridian(whole);
        double cells = 0.0;
        for (const Polygon& polygon : made) {
            for (std::size_t i = 0; i < polygon.rings.size(); ++i) {
                CHECK((area_of(polygon.rings[i]) > 0) == (i == 0));
                area += area_of(polygon.rings[i]);
                const auto [west, east] = std::minmax_element(polygon.rings[i].begin(), polygon.rings[i].end(), [](const Place& a, const Place& b) { return a.x < b.x; });
                CHECK(east->x - west->x < 2.0);
                CHECK((west->x >= -180.0 && east->x <= 180.0));
            }
        }
        for (std::size_t r = 0; r < rows; ++r) {
            for (std::size_t c = 0; c < columns; ++c) {
                cells += labels[r][c] == 1 ? 1.0 : 0.0;
                for (const double share : {0.25, 0.75}) {
                    const Place at{wrapped(longitude(static_cast<double>(c) + share)), -0.1 * (static_cast<double>(r) + 0.4)};
                    CHECK(held(made, at) == (labels[r][c] == 1 ? 1 : 0));
                }
            }
        }
        CHECK(area == Approx(0.01 * cells).margin(1e-9));
    }
}
