// The time that a run's reading and writing of rasters takes at all: reads the inputs and writes the rasters of a
// finished result anew, from memory, with the options of the command, its statistics and its overviews; computes
// nothing. Straight to GDAL, so that what the program's own reading and writing adds is seen as well.

#include <fcntl.h>
#include <gdal_priv.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <cstring>
#include <filesystem>

#include "bench/bench_program.hpp"

namespace rillclock::bench {
namespace {

namespace fs = std::filesystem;

constexpr int block_side = 256;
constexpr int strip_rows = 512;   // read at once

GDALDatasetUniquePtr opened(const fs::path& path) {
    GDALDatasetUniquePtr dataset(GDALDataset::Open(path.c_str(), GDAL_OF_RASTER));
    if (!dataset) throw std::runtime_error("cannot open " + path.string());
    return dataset;
}

/// A raster band as bytes, in the type of the file.
struct Content {
    GDALDataType type = GDT_Unknown;
    int rows = 0;
    int columns = 0;
    std::vector<std::byte> bytes;

    [[nodiscard]] std::size_t cell_bytes() const { return static_cast<std::size_t>(GDALGetDataTypeSizeBytes(type)); }
    [[nodiscard]] std::size_t row_bytes() const { return cell_bytes() * static_cast<std::size_t>(columns); }
};

/// Reads strip by strip; `keep` decides whether strips are kept or overwritten by the next.
Content content_of(const fs::path& path, bool keep) {
    const GDALDatasetUniquePtr dataset = opened(path);
    GDALRasterBand& band = *dataset->GetRasterBand(1);
    Content content{.type = band.GetRasterDataType(), .rows = band.GetYSize(), .columns = band.GetXSize(), .bytes = {}};
    content.bytes.resize(content.row_bytes() * static_cast<std::size_t>(keep ? content.rows : strip_rows));
    for (int row = 0; row < content.rows; row += strip_rows) {
        const int rows = std::min(strip_rows, content.rows - row);
        std::byte* const to = content.bytes.data() + (keep ? content.row_bytes() * static_cast<std::size_t>(row) : 0U);
        if (band.RasterIO(GF_Read, 0, row, content.columns, rows, to, content.columns, rows, content.type, 0, 0,
                          nullptr) != CE_None) {
            throw std::runtime_error("cannot read " + path.string());
        }
    }
    return content;
}

/// Least, greatest, sum and sum of squares, in eight lanes so that the processor can add several at a time.
struct Statistics {
    static constexpr std::size_t lanes = 8;
    std::array<double, lanes> least{}, greatest{}, sum{}, squares{}, count{};
    Statistics() {
        least.fill(std::numeric_limits<double>::infinity());
        greatest.fill(-std::numeric_limits<double>::infinity());
    }

    template <class T>
    void add(const T* values, std::size_t size, double nodata) {
        for (std::size_t i = 0; i + lanes <= size; i += lanes) {
            for (std::size_t lane = 0; lane < lanes; ++lane) {
                const auto value = static_cast<double>(values[i + lane]);
                const double weight = value == nodata ? 0.0 : 1.0;
                least[lane] = weight > 0.0 && value < least[lane] ? value : least[lane];
                greatest[lane] = weight > 0.0 && value > greatest[lane] ? value : greatest[lane];
                count[lane] += weight;
                sum[lane] += weight * value;
                squares[lane] += weight * value * value;
            }
        }
    }
    [[nodiscard]] static double total(const std::array<double, lanes>& of) {
        double all = 0.0;
        for (const double lane : of) all += lane;
        return all;
    }
    void store_in(GDALRasterBand& band) const {
        const double n = std::max(1.0, total(count));
        const double mean = total(sum) / n;
        band.SetStatistics(*std::min_element(least.begin(), least.end()),
                           *std::max_element(greatest.begin(), greatest.end()), mean,
                           std::sqrt(std::max(0.0, total(squares) / n - mean * mean)));
    }
};

void add_block(Statistics& statistics, GDALDataType type, const void* values, std::size_t size, double nodata) {
    switch (type) {
        case GDT_Byte:
            return statistics.add(static_cast<const std::uint8_t*>(values), size, nodata);
        case GDT_UInt16:
            return statistics.add(static_cast<const std::uint16_t*>(values), size, nodata);
        case GDT_Int16:
            return statistics.add(static_cast<const std::int16_t*>(values), size, nodata);
        case GDT_UInt32:
            return statistics.add(static_cast<const std::uint32_t*>(values), size, nodata);
        case GDT_Int32:
            return statistics.add(static_cast<const std::int32_t*>(values), size, nodata);
        case GDT_Float32:
            return statistics.add(static_cast<const float*>(values), size, nodata);
        case GDT_Float64:
            return statistics.add(static_cast<const double*>(values), size, nodata);
        default:
            throw std::runtime_error("a result raster has a type that results do not have");
    }
}

/// One raster of the result, to be written again.
class Rewriting {
public:
    explicit Rewriting(const fs::path& path)
        : name_(path.filename()), content_(content_of(path, true)), model_(opened(path)) {}

    struct Seconds {
        double blocks = 0.0;
        double overviews = 0.0;
    };
    [[nodiscard]] Seconds write(const fs::path& folder) const {
        GDALDatasetUniquePtr dataset;
        Seconds seconds;
        seconds.blocks = seconds_of([&] {
            dataset = created(folder / name_);
            write_blocks(*dataset->GetRasterBand(1));
            dataset->FlushCache(false);
        });
        seconds.overviews = seconds_of([&] {
            build_overviews(*dataset);
            dataset.reset();
        });
        return seconds;
    }

private:
    [[nodiscard]] GDALDatasetUniquePtr created(const fs::path& path) const {
        const bool is_real = content_.type == GDT_Float32 || content_.type == GDT_Float64;
        const std::string side = std::to_string(block_side);
        CPLStringList options;
        options.SetNameValue("TILED", "YES");
        options.SetNameValue("BLOCKXSIZE", side.c_str());
        options.SetNameValue("BLOCKYSIZE", side.c_str());
        options.SetNameValue("COMPRESS", "ZSTD");
        options.SetNameValue("ZSTD_LEVEL", "1");
        options.SetNameValue("PREDICTOR", is_real ? "3" : "2");
        options.SetNameValue("BIGTIFF", "IF_SAFER");
        options.SetNameValue("NUM_THREADS", "ALL_CPUS");
        GDALDatasetUniquePtr dataset(GetGDALDriverManager()->GetDriverByName("GTiff")->Create(
            path.c_str(), content_.columns, content_.rows, 1, content_.type, options.List()));
        if (!dataset) throw std::runtime_error("cannot create " + path.string());
        std::array<double, 6> transform{};
        model_->GetGeoTransform(transform.data());
        dataset->SetGeoTransform(transform.data());
        dataset->SetSpatialRef(model_->GetSpatialRef());
        int has_nodata = 0;
        const double nodata = model_->GetRasterBand(1)->GetNoDataValue(&has_nodata);
        if (has_nodata != 0) dataset->GetRasterBand(1)->SetNoDataValue(nodata);
        return dataset;
    }

    void write_blocks(GDALRasterBand& band) const {
        const double nodata = model_->GetRasterBand(1)->GetNoDataValue();
        const std::size_t block_row = content_.cell_bytes() * block_side;
        std::vector<std::byte> block(block_row * block_side);
        Statistics statistics;
        for (int top = 0; top < content_.rows; top += block_side) {
            const int rows = std::min(block_side, content_.rows - top);
            for (int left = 0; left < content_.columns; left += block_side) {
                const int columns = std::min(block_side, content_.columns - left);
                copy_block(top, left, rows, columns, block);
                for (int row = 0; row < rows; ++row) {
                    add_block(statistics, content_.type, &block[static_cast<std::size_t>(row) * block_row],
                              static_cast<std::size_t>(columns), nodata);
                }
                if (band.WriteBlock(left / block_side, top / block_side, block.data()) != CE_None)
                    throw std::runtime_error("cannot write");
            }
        }
        statistics.store_in(band);
    }

    void copy_block(int top, int left, int rows, int columns, std::vector<std::byte>& block) const {
        for (int row = 0; row < rows; ++row) {
            const std::size_t from = static_cast<std::size_t>(top + row) * content_.row_bytes() +
                                     static_cast<std::size_t>(left) * content_.cell_bytes();
            std::memcpy(&block[static_cast<std::size_t>(row) * content_.cell_bytes() * block_side],
                        &content_.bytes[from], static_cast<std::size_t>(columns) * content_.cell_bytes());
        }
    }

    void build_overviews(GDALDataset& dataset) const {
        std::vector<int> levels;
        for (int i = 0; i < model_->GetRasterBand(1)->GetOverviewCount(); ++i) levels.push_back(2 << i);
        if (levels.empty()) return;
        const bool is_amount =
            content_.type == GDT_Float32 || content_.type == GDT_Float64 || name_ == "spill_elevation.tif";
        const CPLErr built = dataset.BuildOverviews(is_amount ? "AVERAGE" : "NEAREST", static_cast<int>(levels.size()),
                                                    levels.data(), 0, nullptr, nullptr, nullptr);
        if (built != CE_None) throw std::runtime_error("cannot build overviews");
    }

    fs::path name_;
    Content content_;
    GDALDatasetUniquePtr model_;
};

/// Waits until a file's bytes are on the disk.
void put_on_disk(const fs::path& path) {
    const int file = open(path.c_str(), O_RDONLY);
    if (file < 0) throw std::runtime_error("cannot open " + path.string());
    fsync(file);
    close(file);
}

std::vector<fs::path> rasters_in(const fs::path& folder) {
    std::vector<fs::path> paths;
    for (const auto& entry : fs::directory_iterator(folder)) {
        if (entry.path().extension() == ".tif") paths.push_back(entry.path());
    }
    std::sort(paths.begin(), paths.end());
    return paths;
}

void measure(const Words& words) {
    GDALAllRegister();
    CPLSetConfigOption("GDAL_NUM_THREADS", "ALL_CPUS");
    CPLSetConfigOption("ZSTD_LEVEL_OVERVIEW", "1");
    CPLSetConfigOption("GDAL_TIFF_OVR_BLOCKSIZE", "256");
    const fs::path out = words.text(3);
    fs::create_directories(out);
    tell("read_seconds", seconds_of([&] {
             (void)content_of(words.text(0), false);
             (void)content_of(words.text(1), false);
         }));
    double blocks_seconds = 0.0;
    double overviews_seconds = 0.0;
    double disk_seconds = 0.0;
    for (const fs::path& path : rasters_in(words.text(2))) {
        const Rewriting raster(path);
        const Rewriting::Seconds seconds = raster.write(out);
        blocks_seconds += seconds.blocks;
        overviews_seconds += seconds.overviews;
        disk_seconds += seconds_of([&] { put_on_disk(out / path.filename()); });
    }
    tell("write_seconds", blocks_seconds + overviews_seconds);
    tell("overviews_seconds", overviews_seconds);
    tell("disk_seconds", disk_seconds);
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded(
        [&] { measure(Words(count, words, "io_floor DEM COVER FOLDER-OF-RESULT-RASTERS FOLDER-TO-WRITE-TO")); });
}
