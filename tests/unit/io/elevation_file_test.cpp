#include "rillclock/io/elevation_file.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();

struct ElevationFolder {
    TemporaryFolder folder;
    fs::path dem(const TestRaster& raster) const { return write_tiff(folder / "dem.tif", raster); }
    static std::string refusal(const fs::path& path, const ElevationOptions& options = {}) {
        return sentence_of([&] { (void)open_elevation(path, options); });
    }
};

}  // namespace

TEST_CASE_METHOD(ElevationFolder, "cells come row by row from the north-west corner") {
    const ElevationFile file = open_elevation(dem({.columns = 3, .rows = 2, .values = {1, 2, 3, 4, 5, 6}}));
    CHECK(all_of(*file.source) == std::vector<double>{1, 2, 3, 4, 5, 6});
    CHECK(file.grid() ==
          Grid{.rows = 2, .columns = 3, .left = 500000, .top = 4000000, .cell_width = 30, .cell_height = 30});
}

TEST_CASE_METHOD(ElevationFolder, "a grid stored south-up is turned") {
    const ElevationFile file =
        open_elevation(dem({.columns = 1, .rows = 3, .values = {1, 2, 3}, .transform = {0, 10, 0, 100, 0, 20}}));
    CHECK(all_of(*file.source) == std::vector<double>{3, 2, 1});
    CHECK(file.grid().top == 160);
    CHECK(file.grid().cell_height == 20);
}

TEST_CASE_METHOD(ElevationFolder, "a window of a south-up grid is that of the turned grid") {
    const ElevationFile file = open_elevation(
        dem({.columns = 2, .rows = 3, .values = {1, 2, 3, 4, 5, 6}, .transform = {0, 10, 0, 100, 0, 20}}));
    std::vector<double> values(2);
    file.source->read(Window{.row = 0, .column = 1, .rows = 2, .columns = 1}, values);
    CHECK(values == std::vector<double>{6, 4});
}

TEST_CASE_METHOD(ElevationFolder, "nodata of a float file is compared as a float") {
    const double stored = static_cast<double>(-3.4e38F);
    const ElevationFile file = open_elevation(dem({.values = {stored, 2, 3, 4}, .nodata = -3.4e38}));
    CHECK(std::isnan(all_of(*file.source)[0]));
    CHECK(all_of(*file.source)[1] == 2);
}

TEST_CASE_METHOD(ElevationFolder, "a nodata tag beyond the range of floats means its end") {
    const ElevationFile file = open_elevation(
        dem({.values = {-std::numeric_limits<float>::max(), 2, 3, 4}, .nodata = -1.7976931348623157e308}));
    CHECK(std::isnan(all_of(*file.source)[0]));
    CHECK(file.source->notices().empty());
}

TEST_CASE_METHOD(ElevationFolder, "NaN and infinities are void and counted") {
    const ElevationFile file = open_elevation(dem({.values = {not_a_number, infinity, -infinity, 4}}));
    const std::vector<double> values = all_of(*file.source);
    CHECK(std::isnan(values[0]));
    CHECK(std::isnan(values[1]));
    CHECK(std::isnan(values[2]));
    REQUIRE(has_notice(file.source->notices(), "elevation-not-finite"));
    CHECK(file.source->notices()[0].value == 3.0);
}

TEST_CASE_METHOD(ElevationFolder, "NaN that is the file's nodata is void without a notice") {
    const ElevationFile file = open_elevation(dem({.values = {not_a_number, 2, 3, 4}, .nodata = not_a_number}));
    CHECK(std::isnan(all_of(*file.source)[0]));
    CHECK(file.source->notices().empty());
}

TEST_CASE_METHOD(ElevationFolder, "an elevation that cannot be is void and counted") {
    const ElevationFile file = open_elevation(dem({.values = {1e30, 2, 3, -1e6}}));
    CHECK(std::isnan(all_of(*file.source)[0]));
    CHECK(has_notice(file.source->notices(), "elevation-impossible"));
}

TEST_CASE_METHOD(ElevationFolder, "minus zero comes as zero") {
    const ElevationFile file = open_elevation(dem({.values = {-0.0, 2, 3, 4}}));
    CHECK_FALSE(std::signbit(all_of(*file.source)[0]));
}

TEST_CASE_METHOD(ElevationFolder, "scale and offset are told, values stay as stored") {
    const ElevationFile file = open_elevation(
        dem({.values = {100, 200, 300, 400}, .type = GDT_UInt16, .scale = 0.1, .offset = 50.0, .unit = "m"}));
    CHECK(all_of(*file.source)[1] == 200);
    CHECK(file.format.metres_per_stored_unit() == Approx(0.1).epsilon(1e-15));
    CHECK(file.format.quantum_m() == Approx(0.1).epsilon(1e-15));
    CHECK(file.format.offset == 50.0);
    CHECK(has_notice(file.notices, "elevation-scaled"));
}

TEST_CASE_METHOD(ElevationFolder, "the quantum of integer feet is a foot") {
    const ElevationFile file = open_elevation(dem({.type = GDT_Int16, .unit = "ft"}));
    CHECK(file.format.quantum_m() == 0.3048);
    CHECK(file.format.stored == StoredType::int16);
}

TEST_CASE_METHOD(ElevationFolder, "floating point has no quantum") {
    CHECK(open_elevation(dem({})).format.quantum_m() == 0.0);
}

TEST_CASE_METHOD(ElevationFolder, "an unknown unit on a metre grid is taken as metre with a notice") {
    const ElevationFile file = open_elevation(dem({}));
    CHECK(file.format.unit.is_metre());
    CHECK(has_notice(file.notices, "elevation-unit-assumed"));
}

TEST_CASE_METHOD(ElevationFolder, "an unknown unit on a foot grid asks for the line to add") {
    CHECK_THAT(refusal(dem({.system = "EPSG:2222"})), Contains("elevation_unit = \"ft\""));
}

TEST_CASE_METHOD(ElevationFolder, "the study may state the unit") {
    const ElevationFile file = open_elevation(dem({.system = "EPSG:2222"}), {.unit = "us survey ft"});
    CHECK(file.format.unit.metres_per_unit == 1200.0 / 3937.0);
    CHECK_FALSE(has_notice(file.notices, "elevation-unit-assumed"));
}

TEST_CASE_METHOD(ElevationFolder, "a study that contradicts the band is refused") {
    const std::string sentence = refusal(dem({.unit = "m"}), {.unit = "ft"});
    CHECK_THAT(sentence, Contains("the study says foot") && Contains("the file's band says metre"));
}

TEST_CASE_METHOD(ElevationFolder, "the vertical part of the reference system gives the unit") {
    const ElevationFile file = open_elevation(dem({.system = "EPSG:26912+6360"}));  // NAVD88 height in US survey feet
    CHECK(file.format.unit.metres_per_unit == 1200.0 / 3937.0);
}

TEST_CASE_METHOD(ElevationFolder, "a study that contradicts the vertical part of the reference system is refused") {
    CHECK_THAT(refusal(dem({.system = "EPSG:26912+6360"}), {.unit = "m"}), Contains("contradictory"));
}

TEST_CASE_METHOD(ElevationFolder, "the two feet do not contradict each other, and the study's counts") {
    const ElevationFile file = open_elevation(dem({.unit = "ft"}), {.unit = "us survey ft"});
    CHECK(file.format.unit.metres_per_unit == 1200.0 / 3937.0);
}

TEST_CASE_METHOD(ElevationFolder, "a word that is no unit is refused") {
    CHECK_THAT(refusal(dem({}), {.unit = "cubits"}), Contains("\"cubits\" is no unit of length"));
}

TEST_CASE_METHOD(ElevationFolder, "nodata that the type cannot hold is noticed and dropped") {
    const ElevationFile file = open_elevation(dem({.type = GDT_UInt16, .nodata = -9999.0}));
    CHECK(has_notice(file.notices, "nodata-outside-type"));
    CHECK(file.format.void_value() == 65535);
}

TEST_CASE_METHOD(ElevationFolder, "nodata that could be an elevation is noticed") {
    CHECK(has_notice(open_elevation(dem({.nodata = 0.0})).notices, "nodata-is-elevation"));
}

TEST_CASE_METHOD(ElevationFolder, "cells masked out are void") {
    const fs::path path = dem({});
    {
        const GdalSession session;
        const GDALDatasetUniquePtr dataset(GDALDataset::Open(path.c_str(), GDAL_OF_UPDATE));
        REQUIRE(dataset->CreateMaskBand(GMF_PER_DATASET) == CE_None);
        std::vector<GByte> mask = {255, 0, 255, 255};
        REQUIRE(dataset->GetRasterBand(1)->GetMaskBand()->RasterIO(GF_Write, 0, 0, 2, 2, mask.data(), 2, 2, GDT_Byte, 0,
                                                                   0, nullptr) == CE_None);
    }
    const std::vector<double> values = all_of(*open_elevation(path).source);
    CHECK(std::isnan(values[1]));
    CHECK(values[0] == 1);
}

TEST_CASE_METHOD(ElevationFolder, "a rotated grid is refused with the command that turns it") {
    CHECK_THAT(refusal(dem({.transform = {0, 10, 1, 0, 1, -10}})),
               Contains("rotated") && Contains("gdalwarp -r bilinear "));
}

TEST_CASE_METHOD(ElevationFolder, "a missing reference system is refused with the command that states it") {
    CHECK_THAT(refusal(dem({.system = ""})),
               Contains("gdal_edit.py -a_srs EPSG:nnnnn " + (folder / "dem.tif").string()));
}

TEST_CASE_METHOD(ElevationFolder, "web Mercator is read, and told") {
    const ElevationFile file =
        open_elevation(dem({.transform = {-12580000, 30, 0, 4490000, 0, -30}, .system = "EPSG:3857"}), {});
    const auto told = std::find_if(file.notices.begin(), file.notices.end(), [](const Notice& n) { return n.code == "web-mercator"; });
    REQUIRE(told != file.notices.end());
    CHECK_THAT(told->text, Contains("on the ellipsoid, row by row"));
}

TEST_CASE_METHOD(ElevationFolder, "several bands are listed and one must be chosen") {
    const fs::path path = dem({.bands = 3});
    CHECK_THAT(refusal(path), Contains("several bands: 1 (no name, Float32), 2") && Contains("band = 1"));
    CHECK(all_of(*open_elevation(path, {.band = 2}).source)[3] == 4);
}

TEST_CASE_METHOD(ElevationFolder, "a band that is not there is refused") {
    CHECK_THAT(refusal(dem({}), {.band = 2}), Contains("has no band 2"));
}

TEST_CASE_METHOD(ElevationFolder, "complex values are refused") {
    CHECK_THAT(refusal(dem({.type = GDT_CFloat32})), Contains("CFloat32") && Contains("gdal_translate -ot Float64"));
}

TEST_CASE_METHOD(ElevationFolder, "a palette is refused") {
    const fs::path path = dem({.type = GDT_Byte});
    {
        const GdalSession session;
        const GDALDatasetUniquePtr dataset(GDALDataset::Open(path.c_str(), GDAL_OF_UPDATE));
        GDALColorTable colours;
        const GDALColorEntry red = {255, 0, 0, 255};
        colours.SetColorEntry(1, &red);
        dataset->GetRasterBand(1)->SetColorTable(&colours);
    }
    CHECK_THAT(refusal(path), Contains("palette"));
}

TEST_CASE_METHOD(ElevationFolder, "a scale that is not positive is refused") {
    CHECK_THAT(refusal(dem({.scale = -1.0})), Contains("scale -1"));
}

TEST_CASE_METHOD(ElevationFolder, "a file that is not there is said so") {
    CHECK_THAT(refusal(folder / "none.tif"), Contains("does not exist"));
}

TEST_CASE_METHOD(ElevationFolder, "an empty file is said so") {
    CHECK_THAT(refusal(write_file(folder / "a.tif", "")), Contains("empty (0 bytes)"));
}

TEST_CASE_METHOD(ElevationFolder, "a text with a raster's name is said to be a text") {
    CHECK_THAT(refusal(write_file(folder / "a.tif", "dear reader, this is prose\n")), Contains("it is a text"));
}

TEST_CASE_METHOD(ElevationFolder, "a folder is said to be one") {
    CHECK_THAT(refusal(folder.path()), Contains("is a folder"));
}

TEST_CASE_METHOD(ElevationFolder, "an address is refused") {
    CHECK_THAT(refusal("http://127.0.0.1:9/dem.tif"), Contains("not a local file"));
}

TEST_CASE_METHOD(ElevationFolder, "rows that a truncated file lacks are named") {
    const fs::path path = dem({.columns = 100, .rows = 100, .values = std::vector<double>(10000, 7.0)});
    fs::resize_file(path, 20000);
    const ElevationFile file = open_elevation(path);
    std::vector<double> values(1000);
    const std::string sentence =
        sentence_of([&] { file.source->read({.row = 90, .rows = 10, .columns = 100}, values); });
    CHECK_THAT(sentence, Contains("Rows 90 to 99") && Contains("cut short"));
}

TEST_CASE_METHOD(ElevationFolder, "a header that claims far more than the file holds is refused with both numbers") {
    const fs::path path = folder / "huge.tif";
    {
        const GdalSession session;
        CPLStringList options;
        options.SetNameValue("SPARSE_OK", "TRUE");
        options.SetNameValue("TILED", "YES");
        const GDALDatasetUniquePtr dataset(GetGDALDriverManager()->GetDriverByName("GTiff")->Create(
            path.c_str(), 30000, 30000, 1, GDT_Float32, options));
        std::array<double, 6> transform = {0, 1, 0, 0, 0, -1};
        dataset->SetGeoTransform(transform.data());
        OGRSpatialReference system;
        system.importFromEPSG(26912);
        dataset->SetSpatialRef(&system);
    }
    CHECK_THAT(refusal(path),
               Contains("3600000000 bytes, but holds " + std::to_string(fs::file_size(path)) + " bytes"));
}

TEST_CASE_METHOD(ElevationFolder, "more cells than can be numbered are refused") {
    const fs::path path =
        write_file(folder / "a.vrt",
                   "<VRTDataset rasterXSize=\"100000\" rasterYSize=\"100000\"><SRS>EPSG:26912</SRS>"
                   "<GeoTransform>0,1,0,0,0,-1</GeoTransform><VRTRasterBand dataType=\"Byte\" band=\"1\"/>"
                   "</VRTDataset>");
    CHECK_THAT(refusal(path), Contains("100000 x 100000 cells"));
}
