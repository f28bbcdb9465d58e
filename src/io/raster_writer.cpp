#include "raster_writer.hpp"

#include <ogr_spatialref.h>

#include <array>
#include <bit>
#include <charconv>
#include <cstring>
#include <string>
#include <vector>

#include "rillclock/core/error.hpp"
#include "thread_option.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;

GDALDataType gdal_type(StoredType type) {
    switch (type) {
        case StoredType::int8:
        case StoredType::uint8:
            return GDT_Byte;
        case StoredType::int16:
            return GDT_Int16;
        case StoredType::uint16:
            return GDT_UInt16;
        case StoredType::int32:
            return GDT_Int32;
        case StoredType::uint32:
            return GDT_UInt32;
        case StoredType::float32:
            return GDT_Float32;
        case StoredType::float64:
            return GDT_Float64;
    }
    return GDT_Unknown;
}

/// Side of blocks. A row of tiles of the engine is then a row of blocks, which nothing has to gather.
constexpr std::int64_t full_side = 256;
/// Side of blocks that are squares of a power of two, as GDAL asks for. All of a block is packed, so those of a narrow raster are no wider than need be.
std::int64_t square_side(std::int64_t shorter_side, std::int64_t most) {
    constexpr std::int64_t least = 64;
    return std::clamp(static_cast<std::int64_t>(std::bit_ceil(static_cast<std::uint64_t>(shorter_side))), least, most);
}

/// Sides of blocks; for smaller rasters the multiple of 16 (which TIFF asks for) that holds them.
std::int64_t block_side(std::int64_t cells) {
    return std::min(full_side, (cells + 15) / 16 * 16);
}

/// The shortest text that reads back as the same number, whatever the locale.
std::string shortest(double value) {
    std::array<char, 40> text{};
    const auto end = std::to_chars(text.data(), text.data() + text.size(), value).ptr;
    return {text.data(), end};
}

CPLStringList creation_options(StoredType stored, std::int64_t block_columns, std::int64_t block_rows) {
    CPLStringList options;
    options.SetNameValue("TILED", "YES");
    options.SetNameValue("BLOCKXSIZE", std::to_string(block_columns).c_str());
    options.SetNameValue("BLOCKYSIZE", std::to_string(block_rows).c_str());
    options.SetNameValue("COMPRESS", "ZSTD");
    options.SetNameValue("ZSTD_LEVEL", "1");
    options.SetNameValue("PREDICTOR", is_integer(stored) ? "2" : "3");
    options.SetNameValue("BIGTIFF", "IF_SAFER");
    options.SetNameValue("NUM_THREADS", CPLGetConfigOption("GDAL_NUM_THREADS", "ALL_CPUS"));
    if (stored == StoredType::int8) options.SetNameValue("PIXELTYPE", "SIGNEDBYTE");
    return options;
}

void refuse_occupied(const fs::path& path) {
    std::error_code problem;
    const fs::file_status status = fs::symlink_status(path, problem);
    if (fs::is_symlink(status))
        throw input_error("The raster " + path.string() +
                          " would be written through a symbolic link; remove the link.");
    if (fs::exists(status) && !fs::is_regular_file(status))
        throw input_error("The raster " + path.string() + " cannot be written, since a folder or device has its name.");
}

}  // namespace

RasterWriter::RasterWriter(const fs::path& path, const Grid& grid, const ReferenceSystem& system,
                           const RasterDescription& description)
    : begun_at_(session_.mark()),
      path_(path),
      grid_(grid),
      description_(description) {
    plan_levels();
    refuse_occupied(path_);
    try {
        create(system);
    } catch (...) {
        dataset_.reset();
        remove();
        throw;
    }
}

RasterWriter::~RasterWriter() {
    if (is_closed_) return;
    dataset_.reset();
    remove();
}

void RasterWriter::plan_levels() {
    levels_.push_back({.rows = grid_.rows, .columns = grid_.columns, .block_rows = block_side(grid_.rows),
                       .block_columns = block_side(grid_.columns)});
    const std::int64_t side = copies_side();
    while (has_coarser_copy(levels_.back().rows, levels_.back().columns)) {
        levels_.push_back({.rows = (levels_.back().rows + 1) / 2, .columns = (levels_.back().columns + 1) / 2,
                           .block_rows = side, .block_columns = side});
    }
}

/// Side of the blocks of coarser copies.
std::int64_t RasterWriter::copies_side() const { return square_side((std::min(grid_.rows, grid_.columns) + 1) / 2, full_side); }

void RasterWriter::remove() const {
    std::error_code ignored;
    fs::remove(path_, ignored);
    fs::remove(path_.string() + ".aux.xml", ignored);
    if (!description_.cloud_optimized) return;
    fs::remove(plain_path(), ignored);
    fs::remove(plain_path().string() + ".aux.xml", ignored);
}

/// Where the file is made that is arranged anew when it is whole.
fs::path RasterWriter::plain_path() const {
    return description_.cloud_optimized ? fs::path(path_.string() + ".plain.tif") : path_;
}

void RasterWriter::throw_if_failed(bool worked) const {
    const std::string what =
        "The raster " + path_.string() + " cannot be written; look at the free space and the permissions of its folder";
    session_.throw_if_failed(begun_at_, Fault::machine, what);
    if (!worked) throw machine_error(what + ".");
}

void RasterWriter::create(const ReferenceSystem& system) {
    remove();
    const CPLStringList options = creation_options(description_.stored, levels_[0].block_columns, levels_[0].block_rows);
    GDALDriver* driver = GetGDALDriverManager()->GetDriverByName("GTiff");
    if (!driver) throw machine_error("GDAL has no GeoTIFF driver here; install the whole of GDAL.");
    dataset_.reset(driver->Create(plain_path().c_str(), static_cast<int>(grid_.columns), static_cast<int>(grid_.rows), 1,
                                  gdal_type(description_.stored), options.List()));
    throw_if_failed(dataset_ != nullptr);
    describe(system);
    add_overviews();
    throw_if_failed(true);
}

void RasterWriter::describe(const ReferenceSystem& system) {
    std::array<double, 6> transform = {grid_.left, grid_.cell_width, 0.0, grid_.top, 0.0, -grid_.cell_height};
    dataset_->SetGeoTransform(transform.data());
    OGRSpatialReference reference;
    reference.SetFromUserInput(system.wkt().c_str(), OGRSpatialReference::SET_FROM_USER_INPUT_LIMITATIONS);
    reference.SetAxisMappingStrategy(OAMS_TRADITIONAL_GIS_ORDER);
    dataset_->SetSpatialRef(&reference);
    for (const auto& [key, value] : description_.metadata) dataset_->SetMetadataItem(key.c_str(), value.c_str());
    GDALRasterBand& band = *dataset_->GetRasterBand(1);
    if (!description_.description.empty()) band.SetDescription(description_.description.c_str());
    if (!description_.unit.empty()) band.SetUnitType(description_.unit.c_str());
    if (description_.nodata) band.SetNoDataValue(*description_.nodata);
    if (description_.scale != 1.0) band.SetScale(description_.scale);
    if (description_.offset != 0.0) band.SetOffset(description_.offset);
    name_categories();
    colour_classes();
}

void RasterWriter::name_categories() {
    int greatest = -1;
    for (const auto& [number, name] : description_.categories) {
        if (number < 0 || number > 65535)
            throw bug("A class name of " + path_.string() + " has a number outside 0 to 65535");
        greatest = std::max(greatest, number);
    }
    if (greatest < 0) return;
    std::vector<std::string> names(static_cast<std::size_t>(greatest) + 1);
    for (const auto& [number, name] : description_.categories) names[static_cast<std::size_t>(number)] = name;
    CPLStringList list;
    for (const std::string& name : names) list.AddString(name.c_str());
    dataset_->GetRasterBand(1)->SetCategoryNames(list.List());
}

void RasterWriter::colour_classes() {
    if (description_.colours.empty()) return;
    GDALColorTable table;
    for (const auto& [number, colour] : description_.colours) {
        const auto part = [&](std::size_t at) { return static_cast<short>(std::stoi(colour.substr(at, 2), nullptr, 16)); };
        const GDALColorEntry entry{part(1), part(3), part(5), 255};
        table.SetColorEntry(number, &entry);
    }
    dataset_->GetRasterBand(1)->SetColorTable(&table);
}

void RasterWriter::write_blocks(int level, std::int64_t block_row, std::span<const std::byte> rows) {
    const auto cell = static_cast<std::size_t>(GDALGetDataTypeSizeBytes(gdal_type(description_.stored)));
    const Level& shape = levels_[static_cast<std::size_t>(level)];
    const auto columns = static_cast<std::size_t>(shape.columns);
    const auto width = static_cast<std::size_t>(shape.block_columns);
    block_.resize(width * static_cast<std::size_t>(shape.block_rows) * cell);
    const bool lacks_rows = rows.size() < columns * static_cast<std::size_t>(shape.block_rows) * cell;
    for (std::size_t left = 0; left < columns; left += width) {
        const std::size_t count = std::min(width, columns - left);
        if (count < width || lacks_rows) std::fill(block_.begin(), block_.end(), std::byte{0});  // what lies beyond the raster
        for (std::size_t row = 0; row * columns * cell < rows.size(); ++row)
            std::memcpy(&block_[row * width * cell], &rows[(row * columns + left) * cell], count * cell);
        const CPLErr result = bands_[static_cast<std::size_t>(level)]->WriteBlock(static_cast<int>(left / width),
                                                                                  static_cast<int>(block_row), block_.data());
        throw_if_failed(result == CE_None);
    }
}

void RasterWriter::store_statistics() {
    if (!(statistics_.count > 0)) return;
    GDALRasterBand& band = *dataset_->GetRasterBand(1);
    band.SetMetadataItem("STATISTICS_MINIMUM", shortest(statistics_.least).c_str());
    band.SetMetadataItem("STATISTICS_MAXIMUM", shortest(statistics_.greatest).c_str());
    band.SetMetadataItem("STATISTICS_MEAN", shortest(statistics_.mean).c_str());
    band.SetMetadataItem("STATISTICS_STDDEV", shortest(statistics_.standard_deviation()).c_str());
}

/// Makes the coarser copies, with nothing in them yet.
void RasterWriter::add_overviews() {
    std::vector<int> factors;
    for (std::size_t i = 1; i < levels_.size(); ++i) factors.push_back(1 << i);
    if (!factors.empty()) {
        const ThreadOption zstd("ZSTD_LEVEL_OVERVIEW", "1");
        const ThreadOption block("GDAL_TIFF_OVR_BLOCKSIZE", std::to_string(copies_side()).c_str());
        const CPLErr result = dataset_->BuildOverviews("NONE", static_cast<int>(factors.size()), factors.data(), 0, nullptr,
                                                       nullptr, nullptr);
        throw_if_failed(result == CE_None);
    }
    GDALRasterBand& band = *dataset_->GetRasterBand(1);
    bands_.assign(1, &band);
    for (int i = 0; i < band.GetOverviewCount(); ++i) bands_.push_back(band.GetOverview(i));
    if (bands_.size() != levels_.size()) throw bug("The raster " + path_.string() + " has not the overviews that were planned");
}

void RasterWriter::close() {
    dataset_->FlushCache(false);  // all blocks are in the file before its directory is, however many threads pack them
    throw_if_failed(true);
    store_statistics();
    dataset_.reset();
    throw_if_failed(true);
    if (description_.cloud_optimized) rearrange();
    verify();
    is_closed_ = true;
}

/// Copies the finished file so that its overviews come first and its blocks in order.
void RasterWriter::rearrange() {
    GDALDriver* driver = GetGDALDriverManager()->GetDriverByName("COG");
    if (driver == nullptr) throw machine_error("GDAL has no driver for cloud-optimized GeoTIFF here; install the whole of GDAL.");
    CPLStringList options;
    options.SetNameValue("COMPRESS", "ZSTD");
    options.SetNameValue("LEVEL", "1");
    options.SetNameValue("PREDICTOR", "YES");
    options.SetNameValue("BLOCKSIZE", std::to_string(square_side(std::min(grid_.rows, grid_.columns), 512)).c_str());
    options.SetNameValue("OVERVIEWS", "FORCE_USE_EXISTING");
    options.SetNameValue("BIGTIFF", "IF_SAFER");
    options.SetNameValue("NUM_THREADS", CPLGetConfigOption("GDAL_NUM_THREADS", "ALL_CPUS"));
    {
        const GDALDatasetUniquePtr plain(GDALDataset::Open(plain_path().c_str(), GDAL_OF_RASTER));
        throw_if_failed(plain != nullptr);
        const GDALDatasetUniquePtr arranged(driver->CreateCopy(path_.c_str(), plain.get(), FALSE, options.List(), nullptr, nullptr));
        throw_if_failed(arranged != nullptr);
    }
    throw_if_failed(true);
    std::error_code ignored;
    fs::remove(plain_path(), ignored);
    fs::remove(plain_path().string() + ".aux.xml", ignored);
}

/// Opens the file anew and reads its last row, which a file cut short does not have.
void RasterWriter::verify() const {
    const char* const drivers[] = {"GTiff", nullptr};
    const GDALDatasetUniquePtr written(GDALDataset::Open(path_.c_str(), GDAL_OF_RASTER, drivers));
    throw_if_failed(written != nullptr);
    throw_if_failed(written->GetRasterXSize() == grid_.columns && written->GetRasterYSize() == grid_.rows);
    std::vector<double> row(static_cast<std::size_t>(grid_.columns));
    const CPLErr result = written->GetRasterBand(1)->RasterIO(
        GF_Read, 0, static_cast<int>(grid_.rows - 1), static_cast<int>(grid_.columns), 1, row.data(),
        static_cast<int>(grid_.columns), 1, GDT_Float64, 0, 0, nullptr);
    throw_if_failed(result == CE_None);
}

}  // namespace rillclock
