#include "rillclock/io/cover_file.hpp"

#include <cmath>

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

const ReferenceSystem cover_utm = ReferenceSystem::from_text("EPSG:26912");

struct CoverFolder {
    TemporaryFolder folder;
    fs::path cover(TestRaster raster) const {
        if (raster.type == GDT_Float32) raster.type = GDT_Byte;
        return write_tiff(folder / "cover.tif", raster);
    }
};

/// 60 × 70 classes that differ from cell to cell, on WGS 84.
TestRaster chequered() {
    TestRaster raster{.columns = 60,
                      .rows = 70,
                      .values = {},
                      .transform = {-111.01, 0.0003, 0, 36.15, 0, -0.0004},
                      .system = "EPSG:4326"};
    for (int r = 0; r < raster.rows; ++r)
        for (int c = 0; c < raster.columns; ++c) raster.values.push_back((r * 7 + c * 3) % 250 + 1);
    return raster;
}

}  // namespace

TEST_CASE_METHOD(CoverFolder, "a cover on the same grid is read as it is") {
    const Grid target = {.rows = 2, .columns = 2, .left = 500000, .top = 4000000, .cell_width = 30, .cell_height = 30};
    const CoverFile file = open_cover(cover({}), {}, target, cover_utm);
    CHECK(all_of(*file.source) == std::vector<std::int32_t>{1, 2, 3, 4});
    CHECK(file.notices.empty());
}

TEST_CASE_METHOD(CoverFolder, "cells outside the cover and its nodata have no class") {
    const Grid target = {.rows = 2, .columns = 3, .left = 500000, .top = 4000000, .cell_width = 30, .cell_height = 30};
    const CoverFile file = open_cover(cover({.nodata = 4.0}), {}, target, cover_utm);
    CHECK(all_of(*file.source) == std::vector<std::int32_t>{1, 2, no_class, 3, no_class, no_class});
}

TEST_CASE_METHOD(CoverFolder, "a coarser cover gives each cell the class at its centre") {
    const Grid target = {.rows = 1, .columns = 4, .left = 500000, .top = 4000000, .cell_width = 15, .cell_height = 15};
    const CoverFile file = open_cover(cover({}), {}, target, cover_utm);
    CHECK(all_of(*file.source) == std::vector<std::int32_t>{1, 1, 2, 2});
}

TEST_CASE_METHOD(CoverFolder, "a south-up cover is turned") {
    const Grid target = {.rows = 2, .columns = 2, .left = 0, .top = 60, .cell_width = 30, .cell_height = 30};
    const CoverFile file = open_cover(cover({.transform = {0, 30, 0, 0, 0, 30}}), {}, target, cover_utm);
    CHECK(all_of(*file.source) == std::vector<std::int32_t>{3, 4, 1, 2});
}

TEST_CASE_METHOD(CoverFolder, "a twin under another name is not transformed and said so") {
    const Grid target = {.rows = 2, .columns = 2, .left = 500000, .top = 4000000, .cell_width = 30, .cell_height = 30};
    const CoverFile file =
        open_cover(cover({.system = "+proj=utm +zone=12 +ellps=GRS80 +towgs84=0,0,0 +units=m"}), {}, target, cover_utm);
    CHECK(all_of(*file.source) == std::vector<std::int32_t>{1, 2, 3, 4});
    CHECK(has_notice(file.notices, "cover-system-named-otherwise"));
}

TEST_CASE_METHOD(CoverFolder, "a cover in another system gives the class under each transformed centre") {
    const TestRaster raster = chequered();
    const Grid target = {
        .rows = 150, .columns = 300, .left = 499600, .top = 4000500, .cell_width = 5, .cell_height = 5};
    const CoverFile file = open_cover(cover(raster), {}, target, cover_utm);
    CHECK(has_notice(file.notices, "cover-transformed"));
    const std::vector<std::int32_t> values = all_of(*file.source);

    // Independently: every centre by itself, through GDAL's own objects. Centres within a hundredth of a cell of an
    // edge may fall either way.
    OGRSpatialReference from, to;
    from.importFromEPSG(26912);
    to.importFromEPSG(4326);
    to.SetAxisMappingStrategy(OAMS_TRADITIONAL_GIS_ORDER);
    const std::unique_ptr<OGRCoordinateTransformation> transformation(OGRCreateCoordinateTransformation(&from, &to));
    int compared = 0, wrong = 0;
    for (std::int64_t r = 0; r < target.rows; ++r)
        for (std::int64_t c = 0; c < target.columns; ++c) {
            double x = target.centre({r, c}).x, y = target.centre({r, c}).y;
            REQUIRE(transformation->Transform(1, &x, &y));
            const double column = (x - raster.transform[0]) / raster.transform[1];
            const double row = (y - raster.transform[3]) / raster.transform[5];
            if (std::abs(column - std::round(column)) < 0.01 || std::abs(row - std::round(row)) < 0.01) continue;
            const bool is_inside = column >= 0 && column < 60 && row >= 0 && row < 70;
            const auto at = static_cast<std::size_t>(std::floor(row) * 60 + std::floor(column));
            const std::int32_t expected = is_inside ? static_cast<std::int32_t>(raster.values[at]) : no_class;
            ++compared;
            if (values[static_cast<std::size_t>(r * target.columns + c)] != expected) ++wrong;
        }
    CHECK(compared > 40000);
    CHECK(wrong == 0);
}

TEST_CASE_METHOD(CoverFolder, "the answer does not depend on the windows") {
    const Grid target = {.rows = 20, .columns = 300, .left = 499600, .top = 4000500, .cell_width = 5, .cell_height = 5};
    const CoverFile file = open_cover(cover(chequered()), {}, target, cover_utm);
    const std::vector<std::int32_t> whole = all_of(*file.source);
    std::vector<std::int32_t> part(37);
    file.source->read({.row = 11, .column = 101, .rows = 1, .columns = 37}, part);
    CHECK(std::equal(part.begin(), part.end(), whole.begin() + 11 * 300 + 101));
}

TEST_CASE_METHOD(CoverFolder, "a half-cell shift is noticed") {
    const Grid target = {.rows = 2, .columns = 2, .left = 500015, .top = 3999985, .cell_width = 30, .cell_height = 30};
    CHECK(has_notice(open_cover(cover({}), {}, target, cover_utm).notices, "cover-half-cell"));
}

TEST_CASE_METHOD(CoverFolder, "a cover of another place is refused") {
    const Grid target = {.rows = 2, .columns = 2, .left = 600000, .top = 4000000, .cell_width = 30, .cell_height = 30};
    CHECK_THAT(sentence_of([&] { (void)open_cover(cover({}), {}, target, cover_utm); }), Contains("does not overlap"));
}

TEST_CASE_METHOD(CoverFolder, "whole numbers in a floating-point cover are classes, others are refused") {
    const Grid target = {.rows = 1, .columns = 1, .left = 500000, .top = 4000000, .cell_width = 30, .cell_height = 30};
    TestRaster raster{.type = GDT_Float64};
    CHECK(all_of(*open_cover(cover(raster), {}, target, cover_utm).source) == std::vector<std::int32_t>{1});
    raster.values[0] = 1.5;
    const CoverFile file = open_cover(cover(raster), {}, target, cover_utm);
    CHECK_THAT(sentence_of([&] { (void)all_of(*file.source); }), Contains("holds 1.5 in row 0, column 0"));
}
