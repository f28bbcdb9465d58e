#pragma once

#include <gdal_priv.h>

#include <cstddef>
#include <cstdint>
#include <filesystem>
#include <span>
#include <vector>

#include "raster_statistics.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/io/raster_output.hpp"

namespace rillclock {

/// The GDAL side of a raster that is being written: takes whole rows of blocks in order, of the raster itself (level 0) and of its
/// overviews (each half as fine as the level before). Overviews end where a screen holds them, or where they would be less than 16 cells wide.
class RasterWriter {
public:
    RasterWriter(const std::filesystem::path& path, const Grid& grid, const ReferenceSystem& system,
                 const RasterDescription& description);
    RasterWriter(const RasterWriter&) = delete;
    RasterWriter& operator=(const RasterWriter&) = delete;
    /// Removes the file unless it was closed.
    ~RasterWriter();

    [[nodiscard]] const std::filesystem::path& path() const { return path_; }
    [[nodiscard]] int levels() const { return static_cast<int>(levels_.size()); }
    [[nodiscard]] std::int64_t rows(int level) const { return levels_[static_cast<std::size_t>(level)].rows; }
    [[nodiscard]] std::int64_t columns(int level) const { return levels_[static_cast<std::size_t>(level)].columns; }
    [[nodiscard]] std::int64_t block_rows(int level = 0) const { return levels_[static_cast<std::size_t>(level)].block_rows; }

    /// The stored bytes of all cells of a row of blocks of a level, row by row.
    void write_blocks(int level, std::int64_t block_row, std::span<const std::byte> rows);
    void add_statistics(const RasterStatistics& part) { statistics_.join(part); }
    void close();

private:
    struct Level {
        std::int64_t rows = 0;
        std::int64_t columns = 0;
        std::int64_t block_rows = 0;
        std::int64_t block_columns = 0;
    };

    void plan_levels();
    [[nodiscard]] std::int64_t copies_side() const;
    void create(const ReferenceSystem& system);
    void describe(const ReferenceSystem& system);
    void name_categories();
    void store_statistics();
    void add_overviews();
    void colour_classes();
    void rearrange();
    [[nodiscard]] std::filesystem::path plain_path() const;
    void verify() const;
    void remove() const;
    void throw_if_failed(bool worked) const;

    GdalSession session_;
    GdalMark begun_at_;
    std::filesystem::path path_;
    Grid grid_;
    RasterDescription description_;
    std::vector<Level> levels_;
    GDALDatasetUniquePtr dataset_;
    std::vector<GDALRasterBand*> bands_;   ///< by level
    std::vector<std::byte> block_;         ///< room for the block that is handed on
    RasterStatistics statistics_;
    bool is_closed_ = false;
};

}  // namespace rillclock
