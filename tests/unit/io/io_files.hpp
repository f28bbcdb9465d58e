#pragma once

#include <gdal_priv.h>
#include <ogr_spatialref.h>
#include <unistd.h>

#include <array>
#include <catch2/catch.hpp>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <limits>
#include <optional>
#include <string>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/notice.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/raster/blocks.hpp"

namespace rillclock::testing {

namespace fs = std::filesystem;

inline constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();

/// A folder that lives as long as the test.
class TemporaryFolder {
public:
    TemporaryFolder() {
        std::string pattern = (fs::temp_directory_path() / "rillclock-io-XXXXXX").string();
        path_ = mkdtemp(pattern.data());
    }
    TemporaryFolder(const TemporaryFolder&) = delete;
    TemporaryFolder& operator=(const TemporaryFolder&) = delete;
    ~TemporaryFolder() { fs::remove_all(path_); }
    [[nodiscard]] fs::path operator/(const std::string& name) const { return path_ / name; }
    [[nodiscard]] const fs::path& path() const { return path_; }

private:
    fs::path path_;
};

/// A small raster as another program would have written it.
struct TestRaster {
    int columns = 2;
    int rows = 2;
    std::vector<double> values = {1, 2, 3, 4};
    GDALDataType type = GDT_Float32;
    std::array<double, 6> transform = {500000, 30, 0, 4000000, 0, -30};
    std::string system = "EPSG:26912";
    std::optional<double> nodata = {};
    std::optional<double> scale = {};
    std::optional<double> offset = {};
    std::string unit = {};
    int bands = 1;
};

inline fs::path write_tiff(const fs::path& path, const TestRaster& raster) {
    const GdalSession session;
    GDALDriver* driver = GetGDALDriverManager()->GetDriverByName("GTiff");
    const GDALDatasetUniquePtr dataset(
        driver->Create(path.c_str(), raster.columns, raster.rows, raster.bands, raster.type, nullptr));
    std::array<double, 6> transform = raster.transform;
    dataset->SetGeoTransform(transform.data());
    if (!raster.system.empty()) {
        OGRSpatialReference system;
        system.SetFromUserInput(raster.system.c_str());
        dataset->SetSpatialRef(&system);
    }
    std::vector<double> values = raster.values;
    for (int b = 1; b <= raster.bands; ++b) {
        GDALRasterBand& band = *dataset->GetRasterBand(b);
        if (raster.nodata) band.SetNoDataValue(*raster.nodata);
        if (raster.scale) band.SetScale(*raster.scale);
        if (raster.offset) band.SetOffset(*raster.offset);
        if (!raster.unit.empty()) band.SetUnitType(raster.unit.c_str());
        REQUIRE(band.RasterIO(GF_Write, 0, 0, raster.columns, raster.rows, values.data(), raster.columns, raster.rows,
                              GDT_Float64, 0, 0, nullptr) == CE_None);
    }
    return path;
}

inline fs::path write_file(const fs::path& path, const std::string& content) {
    std::ofstream(path, std::ios::binary) << content;
    return path;
}

inline std::string bytes_of(const fs::path& path) {
    std::ifstream file(path, std::ios::binary);
    return {std::istreambuf_iterator<char>(file), std::istreambuf_iterator<char>()};
}

template <class T>
std::vector<T> all_of(BlockSource<T>& source) {
    const Grid grid = source.grid();
    std::vector<T> values(static_cast<std::size_t>(grid.size()));
    source.read(Window{.rows = grid.rows, .columns = grid.columns}, values);
    return values;
}

/// The sentence an action fails with, or an empty text; fails the test where the fault is another.
template <class Action>
std::string sentence_of(const Action& action, Fault fault = Fault::inputs) {
    try {
        action();
    } catch (const Error& error) {
        CHECK(error.fault() == fault);
        return error.what();
    }
    return {};
}

inline bool has_notice(const Notices& notices, const std::string& code) {
    for (const Notice& notice : notices)
        if (notice.code == code) return true;
    return false;
}

}  // namespace rillclock::testing
