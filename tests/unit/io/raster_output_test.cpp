#include "rillclock/io/raster_output.hpp"

#include <sys/resource.h>

#include <cmath>
#include <csignal>
#include <limits>

#include "io_files.hpp"
#include "rillclock/io/elevation_file.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

const ReferenceSystem output_utm = ReferenceSystem::from_text("EPSG:26912");

Grid grid_of(std::int64_t rows, std::int64_t columns) {
    return {.rows = rows, .columns = columns, .left = 500000, .top = 4000000, .cell_width = 2, .cell_height = 3};
}

/// Values without a pattern, the same on every machine.
Raster<double> rough(std::int64_t rows, std::int64_t columns) {
    Raster<double> raster(rows, columns);
    std::uint64_t state = 1;
    for (double& value : raster.values()) {
        state = state * 6364136223846793005ULL + 1442695040888963407ULL;
        value = static_cast<double>(state >> 40U) / 1000.0;
    }
    return raster;
}

void write(const fs::path& path, const Raster<double>& raster, const RasterDescription& description) {
    const auto sink = create_raster<double>(path, grid_of(raster.rows(), raster.columns()), output_utm, description);
    write_raster(*sink, raster);
}

GDALDatasetUniquePtr opened(const fs::path& path) {
    static const GdalSession session;
    return GDALDatasetUniquePtr(GDALDataset::Open(path.c_str(), GDAL_OF_RASTER));
}

}  // namespace

TEST_CASE("what is written is read back bit for bit") {
    const TemporaryFolder folder;
    const Raster<double> raster = rough(700, 530);
    write(folder / "a.tif", raster, {.stored = StoredType::float64, .unit = "m"});
    const ElevationFile file = open_elevation(folder / "a.tif");
    const std::vector<double> values = all_of(*file.source);
    CHECK(std::equal(values.begin(), values.end(), raster.values().begin()));
    CHECK(file.grid() == grid_of(700, 530));
    CHECK(same_coordinates(file.system, output_utm, file.grid()));
}

TEST_CASE("every stored type keeps its whole numbers and its nodata") {
    const auto type = GENERATE(StoredType::int8, StoredType::uint8, StoredType::int16, StoredType::uint16,
                               StoredType::int32, StoredType::uint32, StoredType::float32, StoredType::float64);
    const TemporaryFolder folder;
    Raster<double> raster(2, 2);
    raster(0, 0) = 5;
    raster(0, 1) = 100;
    raster(1, 0) = not_a_number;
    write(folder / "a.tif", raster, {.stored = type, .unit = "m", .nodata = 77.0});
    const ElevationFile file = open_elevation(folder / "a.tif");
    const std::vector<double> values = all_of(*file.source);
    CHECK(values[0] == 5);
    CHECK(values[1] == 100);
    CHECK(std::isnan(values[2]));
    CHECK(file.format.stored == type);
}

TEST_CASE("negative numbers survive in eight bits") {
    const TemporaryFolder folder;
    Raster<double> raster(1, 2);
    raster(0, 0) = -128;
    raster(0, 1) = -1;
    write(folder / "a.tif", raster, {.stored = StoredType::int8, .unit = "m"});
    CHECK(all_of(*open_elevation(folder / "a.tif").source) == std::vector<double>{-128, -1});
}

TEST_CASE("a raster says what it holds") {
    const TemporaryFolder folder;
    write(folder / "a.tif", Raster<double>(3, 3, 2.0),
          {.description = "travel time", .unit = "min", .nodata = -9999.0, .metadata = {{"storm", "10 years"}}});
    const GDALDatasetUniquePtr dataset = opened(folder / "a.tif");
    CHECK(std::string(dataset->GetRasterBand(1)->GetDescription()) == "travel time");
    CHECK(std::string(dataset->GetRasterBand(1)->GetUnitType()) == "min");
    CHECK(dataset->GetRasterBand(1)->GetNoDataValue() == -9999.0);
    CHECK(std::string(dataset->GetMetadataItem("storm")) == "10 years");
    CHECK(std::string(dataset->GetMetadataItem("COMPRESSION", "IMAGE_STRUCTURE")) == "ZSTD");
}

TEST_CASE("statistics leave nodata out") {
    const TemporaryFolder folder;
    Raster<double> raster(1, 4, 1.0);
    raster(0, 1) = 3;
    raster(0, 2) = not_a_number;
    raster(0, 3) = 8;
    write(folder / "a.tif", raster, {.nodata = -9999.0});
    double least = 0, greatest = 0, mean = 0, deviation = 0;
    REQUIRE(opened(folder / "a.tif")->GetRasterBand(1)->GetStatistics(0, 0, &least, &greatest, &mean, &deviation) ==
            CE_None);
    CHECK(least == 1);
    CHECK(greatest == 8);
    CHECK(mean == 4);
    CHECK(deviation == Approx(std::sqrt(26.0 / 3.0)));
}

TEST_CASE("names of classes are in the file beside the raster") {
    const TemporaryFolder folder;
    write(folder / "a.tif", Raster<double>(2, 2, 1.0),
          {.stored = StoredType::uint8,
           .categories = {{1, "sheet"}, {3, "channel"}},
           .overviews = OverviewKind::nearest});
    CHECK(fs::exists(folder / "a.tif.aux.xml"));
    const GDALDatasetUniquePtr dataset = opened(folder / "a.tif");
    (void)dataset->GetRasterBand(1)->GetMetadata();
    char** const names = dataset->GetRasterBand(1)->GetCategoryNames();
    REQUIRE(CSLCount(names) == 4);
    CHECK(std::string(names[3]) == "channel");
}

TEST_CASE("overviews of classes hold classes only") {
    const TemporaryFolder folder;
    Raster<double> raster(600, 600, 10.0);
    for (std::int64_t r = 0; r < 600; ++r)
        for (std::int64_t c = 0; c < 600; ++c)
            if ((r + c) % 2 == 0) raster(r, c) = 20.0;
    write(folder / "a.tif", raster, {.stored = StoredType::uint8, .overviews = OverviewKind::nearest});
    const GDALDatasetUniquePtr dataset = opened(folder / "a.tif");
    REQUIRE(dataset->GetRasterBand(1)->GetOverviewCount() == 1);
    GDALRasterBand& overview = *dataset->GetRasterBand(1)->GetOverview(0);
    std::vector<double> values(300 * 300);
    REQUIRE(overview.RasterIO(GF_Read, 0, 0, 300, 300, values.data(), 300, 300, GDT_Float64, 0, 0, nullptr) == CE_None);
    CHECK(std::all_of(values.begin(), values.end(), [](double v) { return v == 10.0 || v == 20.0; }));
}

namespace {

std::vector<double> values_of(GDALRasterBand& band) {
    std::vector<double> values(static_cast<std::size_t>(band.GetXSize()) * static_cast<std::size_t>(band.GetYSize()));
    REQUIRE(band.RasterIO(GF_Read, 0, 0, band.GetXSize(), band.GetYSize(), values.data(), band.GetXSize(), band.GetYSize(),
                          GDT_Float64, 0, 0, nullptr) == CE_None);
    return values;
}

/// The raster of a file in memory, with overviews that GDAL makes.
GDALDatasetUniquePtr with_overviews_by_gdal(GDALDataset& file, const char* resampling, std::vector<int> factors) {
    GDALDriver* const memory = GetGDALDriverManager()->GetDriverByName("MEM");
    GDALDatasetUniquePtr copy(memory->CreateCopy("", &file, FALSE, nullptr, nullptr, nullptr));
    REQUIRE(copy->BuildOverviews(resampling, static_cast<int>(factors.size()), factors.data(), 0, nullptr, nullptr, nullptr) ==
            CE_None);
    return copy;
}

}  // namespace

TEST_CASE("overviews are those that GDAL would make") {
    const TemporaryFolder folder;
    const auto kind = GENERATE(OverviewKind::nearest, OverviewKind::average);
    const bool has_voids = GENERATE(false, true);
    Raster<double> raster = rough(2048, 1024);
    for (std::int64_t i = 0; has_voids && i < 500; ++i) raster(i, i) = raster(i, i + 1) = not_a_number;
    write(folder / "a.tif", raster, {.stored = StoredType::float32, .nodata = -9999.0, .overviews = kind});
    const GDALDatasetUniquePtr file = opened(folder / "a.tif");
    GDALRasterBand& band = *file->GetRasterBand(1);
    REQUIRE(band.GetOverviewCount() == 2);
    const GDALDatasetUniquePtr theirs = with_overviews_by_gdal(*file, kind == OverviewKind::nearest ? "NEAREST" : "AVERAGE", {2, 4});
    // Beside voids a mean of means is not that of all cells, and GDAL takes now one, now the other.
    const int compared = has_voids && kind == OverviewKind::average ? 1 : 2;
    for (int level = 0; level < compared; ++level) {
        const std::vector<double> made = values_of(*band.GetOverview(level));
        const std::vector<double> expected = values_of(*theirs->GetRasterBand(1)->GetOverview(level));
        REQUIRE(made.size() == expected.size());
        double apart = 0.0;
        for (std::size_t i = 0; i < made.size(); ++i) apart = std::max(apart, std::abs(made[i] - expected[i]));
        CHECK(apart <= 0.002);  // a unit of single precision at 16 777, the greatest value
    }
}

TEST_CASE("coarser copies of a narrow raster end where they would be less than 16 cells wide, and have narrow blocks") {
    struct Narrow {
        std::int64_t shorter;
        int copies;
        int block_side;
    };
    // 200: 100, 50, 25; the next would have 13.
    const auto [shorter, copies, block_side] =
        GENERATE(Narrow{1, 0, 0}, Narrow{30, 0, 0}, Narrow{32, 1, 64}, Narrow{128, 3, 64}, Narrow{200, 3, 128}, Narrow{300, 4, 256});
    const bool is_wide = GENERATE(false, true);
    const bool is_cloud_optimized = GENERATE(false, true);
    const TemporaryFolder folder;
    const Raster<double> raster = is_wide ? rough(shorter, 10'000) : rough(10'000, shorter);
    write(folder / "a.tif", raster,
          {.stored = StoredType::float64, .overviews = OverviewKind::nearest, .cloud_optimized = is_cloud_optimized});
    const GDALDatasetUniquePtr file = opened(folder / "a.tif");
    GDALRasterBand& band = *file->GetRasterBand(1);
    const std::vector<double> read = values_of(band);
    CHECK(std::equal(read.begin(), read.end(), raster.values().begin(), raster.values().end()));
    REQUIRE(band.GetOverviewCount() == copies);
    if (copies == 0) return;
    const GDALDatasetUniquePtr theirs = with_overviews_by_gdal(*file, "NEAREST", {2});
    const std::vector<double> expected = values_of(*theirs->GetRasterBand(1)->GetOverview(0));
    const std::vector<double> made = values_of(*band.GetOverview(0));
    REQUIRE(made.size() == expected.size());
    double apart = 0.0;
    for (std::size_t i = 0; i < made.size(); ++i) apart = std::max(apart, std::abs(made[i] - expected[i]));
    INFO(shorter << (is_wide ? " rows" : " columns") << (is_cloud_optimized ? ", cloud-optimized" : ""));
    CHECK(apart <= 0.002);  // GDAL makes them in single precision
    int columns = 0;
    int rows = 0;
    band.GetOverview(0)->GetBlockSize(&columns, &rows);
    CHECK(columns == rows);
    if (!is_cloud_optimized) CHECK(columns == block_side);
}

TEST_CASE("an overview of an odd number of rows and columns ends with half squares") {
    const TemporaryFolder folder;
    Raster<double> raster(35, 601, 4.0);
    raster(34, 600) = 11.0;
    raster(0, 600) = 1.0;
    raster(1, 600) = 2.0;
    write(folder / "a.tif", raster, {.stored = StoredType::int16});
    const GDALDatasetUniquePtr file = opened(folder / "a.tif");
    GDALRasterBand& overview = *file->GetRasterBand(1)->GetOverview(0);
    REQUIRE(overview.GetXSize() == 301);
    REQUIRE(overview.GetYSize() == 18);
    const std::vector<double> values = values_of(overview);
    CHECK(values[300] == 2);        // of 1 and 2, halves up
    CHECK(values[18 * 301 - 1] == 11);
    CHECK(values[0] == 4);
}

TEST_CASE("the same values give the same bytes whatever the windows, the threads and GDAL's cache") {
    const TemporaryFolder folder;
    const Raster<double> raster = rough(1300, 1100);
    const RasterDescription description{.stored = StoredType::float32, .description = "x", .nodata = -9999.0};
    write(folder / "whole.tif", raster, description);
    const GIntBig cache = GDALGetCacheMax64();
    GDALSetCacheMax64(2 << 20);
    CPLSetConfigOption("GDAL_NUM_THREADS", "1");
    {
        const auto sink = create_raster<double>(folder / "parts.tif", grid_of(1300, 1100), output_utm, description);
        for (std::int64_t row = 0; row < 1300; row += 100)
            for (const std::int64_t column : {std::int64_t{550}, std::int64_t{0}}) {
                std::vector<double> part;
                for (std::int64_t r = row; r < row + 100; ++r)
                    for (std::int64_t c = column; c < column + 550; ++c) part.push_back(raster(r, c));
                sink->write({.row = row, .column = column, .rows = 100, .columns = 550}, part);
            }
        sink->close();
    }
    GDALSetCacheMax64(cache);
    CPLSetConfigOption("GDAL_NUM_THREADS", nullptr);
    CHECK(bytes_of(folder / "whole.tif") == bytes_of(folder / "parts.tif"));
}

TEST_CASE("the same classes give the same bytes, names too") {
    const TemporaryFolder folder;
    fs::create_directory(folder / "one");
    fs::create_directory(folder / "two");
    for (const char* place : {"one/a.tif", "two/a.tif"})
        write(folder / place, Raster<double>(600, 700, 1.0),
              {.stored = StoredType::uint8, .categories = {{1, "sheet"}}, .overviews = OverviewKind::nearest});
    CHECK(bytes_of(folder / "one/a.tif") == bytes_of(folder / "two/a.tif"));
    CHECK(bytes_of(folder / "one/a.tif.aux.xml") == bytes_of(folder / "two/a.tif.aux.xml"));
}

TEST_CASE("a disk that is full fails the raster and leaves no file") {
    const TemporaryFolder folder;
    const Raster<double> raster = rough(1000, 1000);
    std::signal(SIGXFSZ, SIG_IGN);
    rlimit former{};
    getrlimit(RLIMIT_FSIZE, &former);
    const rlimit small{.rlim_cur = 300 * 1024, .rlim_max = former.rlim_max};
    setrlimit(RLIMIT_FSIZE, &small);
    const std::string sentence =
        sentence_of([&] { write(folder / "a.tif", raster, {.stored = StoredType::float64}); }, Fault::machine);
    setrlimit(RLIMIT_FSIZE, &former);
    CHECK_THAT(sentence, Contains("a.tif cannot be written") && Contains("free space"));
    CHECK_FALSE(fs::exists(folder / "a.tif"));
}

TEST_CASE("a raster in a folder that is not there fails as the machine's fault") {
    const TemporaryFolder folder;
    CHECK_THAT(sentence_of([&] { write(folder / "none/a.tif", Raster<double>(2, 2), {}); }, Fault::machine),
               Contains("cannot be written"));
}

TEST_CASE("a sink that is not closed leaves no file") {
    const TemporaryFolder folder;
    { const auto sink = create_raster<double>(folder / "a.tif", grid_of(2, 2), output_utm, {}); }
    CHECK_FALSE(fs::exists(folder / "a.tif"));
}

TEST_CASE("a raster is not closed before all its cells came") {
    const TemporaryFolder folder;
    const auto sink = create_raster<double>(folder / "a.tif", grid_of(2, 2), output_utm, {});
    sink->write({.rows = 1, .columns = 2}, std::vector<double>{1, 2});
    CHECK_THAT(sentence_of([&] { sink->close(); }, Fault::bug), Contains("before all of its cells"));
}

TEST_CASE("a value that the stored type cannot hold is refused") {
    const TemporaryFolder folder;
    CHECK_THAT(sentence_of([&] { write(folder / "a.tif", Raster<double>(1, 1, 300.0), {.stored = StoredType::uint8}); },
                           Fault::bug),
               Contains("does not fit"));
}

TEST_CASE("a raster is not written through a symbolic link") {
    const TemporaryFolder folder;
    write_file(folder / "precious", "keep");
    fs::create_symlink(folder / "precious", folder / "a.tif");
    CHECK_THAT(sentence_of([&] { write(folder / "a.tif", Raster<double>(1, 1), {}); }), Contains("symbolic link"));
    CHECK(bytes_of(folder / "precious") == "keep");
}
