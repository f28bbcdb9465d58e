#pragma once

#include <gdal_priv.h>

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <filesystem>
#include <limits>
#include <span>

#include "rillclock/io/gdal_session.hpp"
#include "rillclock/io/raster_output.hpp"

namespace rillclock {

/// Least, greatest, mean and spread of values, joined part by part in a fixed order.
struct RasterStatistics {
    double count = 0;
    double least = std::numeric_limits<double>::infinity();
    double greatest = -std::numeric_limits<double>::infinity();
    double mean = 0;
    double squares = 0;  ///< sum of squared distances from the mean

    /// T. F. Chan, G. H. Golub, R. J. LeVeque, Updating formulae and a pairwise algorithm for computing sample
    /// variances, 1979.
    void join(const RasterStatistics& other) {
        if (!(other.count > 0)) return;
        const double both = count + other.count;
        const double apart = other.mean - mean;
        squares += other.squares + apart * apart * count * other.count / both;
        mean += apart * other.count / both;
        count = both;
        least = std::min(least, other.least);
        greatest = std::max(greatest, other.greatest);
    }
    [[nodiscard]] double standard_deviation() const { return std::sqrt(squares / count); }
};

[[nodiscard]] RasterStatistics statistics_of(std::span<const double> values);

/// The GDAL side of a raster that is being written: takes whole rows of blocks in order.
class RasterWriter {
public:
    RasterWriter(const std::filesystem::path& path, const Grid& grid, const ReferenceSystem& system,
                 const RasterDescription& description);
    RasterWriter(const RasterWriter&) = delete;
    RasterWriter& operator=(const RasterWriter&) = delete;
    /// Removes the file unless it was closed.
    ~RasterWriter();

    [[nodiscard]] const std::filesystem::path& path() const { return path_; }
    [[nodiscard]] std::int64_t block_rows() const { return block_rows_; }

    /// The stored bytes of all cells of a row of blocks, row by row.
    void write_blocks(std::int64_t block_row, std::span<const std::byte> rows);
    void add_statistics(const RasterStatistics& part) { statistics_.join(part); }
    void close();

private:
    void create(const ReferenceSystem& system);
    void describe(const ReferenceSystem& system);
    void name_categories();
    void store_statistics();
    void build_overviews();
    void verify() const;
    void remove() const;
    void throw_if_failed(bool worked) const;

    GdalSession session_;
    GdalMark begun_at_;
    std::filesystem::path path_;
    Grid grid_;
    RasterDescription description_;
    std::int64_t block_rows_ = 0;
    std::int64_t block_columns_ = 0;
    GDALDatasetUniquePtr dataset_;
    RasterStatistics statistics_;
    bool is_closed_ = false;
};

}  // namespace rillclock
