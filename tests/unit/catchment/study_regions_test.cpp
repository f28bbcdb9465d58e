#include "rillclock/catchment/study_regions.hpp"

#include <catch2/catch.hpp>
#include <vector>

using namespace rillclock;

namespace {

constexpr Grid row_grid{.rows = 1, .columns = 7, .left = 0.0, .top = 1.0, .cell_width = 1.0, .cell_height = 1.0};

/// One row of seven cells: 1 drains to 2, 2 to 3, which is the last; the seventh cell drains to none.
struct Chain {
    Ground ground = Ground::planar(metres(1), metres(1));
    PointTree tree = point_tree({2, 3, 0});
    std::vector<std::uint32_t> owners{1, 1, 2, 2, 3, 3, 0};
    std::vector<float> minutes_there{23, 21, 14, 12, 6, 0, 9};
    std::vector<double> to_last{20, 10, 0};

    [[nodiscard]] StudyRegions regions(const IsochroneRules& rules) const {
        StudyRegions made(row_grid, ground, tree, to_last, rules);
        made.look({.window = {.rows = 1, .columns = row_grid.columns}, .owners = owners, .minutes = minutes_there});
        made.finish();
        return made;
    }
};

std::vector<IsochroneBand> of_point(const StudyRegions& regions, PointNumber point) {
    std::vector<IsochroneBand> bands;
    for (const IsochroneBand& band : regions.bands()) {
        if (band.scope == IsochroneScope::catchment && band.point == point) bands.push_back(band);
    }
    return bands;
}

double band_cells(const IsochroneBand& band) { return from_fixed_area(band.area); }

}  // namespace

TEST_CASE("without asking for more, the whole catchments of last points alone have bands") {
    const Chain chain;
    const StudyRegions regions = chain.regions({.step = minutes(10)});
    CHECK(of_point(regions, 1).empty());
    CHECK(of_point(regions, 2).empty());
    CHECK(of_point(regions, 3).size() == 3);
}

TEST_CASE("a catchment that is asked for has bands by the time to its own point, from all that drains to it") {
    const Chain chain;
    const StudyRegions regions = chain.regions({.step = minutes(10), .catchments = {2, 2, 3}});
    const std::vector<IsochroneBand> bands = of_point(regions, 2);
    REQUIRE(bands.size() == 2);   // 13 and 11 min; 4 and 2 min
    CHECK(bands[0].number == 0);
    CHECK(band_cells(bands[0]) == 2.0);
    REQUIRE(bands[0].parts.size() == 1);
    CHECK(bands[0].parts[0].subarea == 2);
    CHECK(bands[1].number == 1);
    REQUIRE(bands[1].parts.size() == 1);
    CHECK(bands[1].parts[0].subarea == 1);
    CHECK(of_point(regions, 3).size() == 3);
}

TEST_CASE("catchments within one another have their own bands each, that add up to them") {
    const Chain chain;
    const StudyRegions regions = chain.regions({.step = minutes(3), .catchments = {1, 2}});
    for (const PointNumber point : {1U, 2U, 3U}) {
        double cells = 0.0;
        double in_parts = 0.0;
        double outlined = 0.0;
        for (const IsochroneBand& band : of_point(regions, point)) {
            cells += band_cells(band);
            for (const IsochronePart& part : band.parts) in_parts += from_fixed_area(part.area);
            for (const Polygon& polygon : regions.outline(band)) outlined += polygon.rings[0][2].x - polygon.rings[0][0].x;
        }
        CHECK(cells == 2.0 * point);
        CHECK(in_parts == 2.0 * point);
        CHECK(outlined == 2.0 * point);   // strips of one row
    }
}

TEST_CASE("smoothed outlines are told from those along cells by their rules") {
    const Chain chain;
    const StudyRegions cells = chain.regions({.step = minutes(100)});
    const StudyRegions smoothed = chain.regions({.step = minutes(100), .smoothed = true});
    const IsochroneBand band = of_point(cells, 3).front();
    CHECK(cells.outline(band)[0].rings[0].size() == 4);
    CHECK(smoothed.outline(band)[0].rings[0].size() == 6);   // its ends of one cell come to a point
}
