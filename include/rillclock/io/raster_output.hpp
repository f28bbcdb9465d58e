#pragma once

#include <algorithm>
#include <cstdint>
#include <filesystem>
#include <memory>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "rillclock/io/reference_system.hpp"
#include "rillclock/io/stored_type.hpp"
#include "rillclock/raster/blocks.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// How coarser copies are made: `nearest` for classes, numbers and directions, `average` for amounts.
enum class OverviewKind { nearest, average };

/// Whether a raster of that size gets a copy half as fine: while a screen does not hold it, and the copy is at least 16 cells wide. A narrower
/// one shows nothing, and its blocks would be mostly empty.
[[nodiscard]] constexpr bool has_coarser_copy(std::int64_t rows, std::int64_t columns) {
    constexpr std::int64_t seen_at_once = 512;
    constexpr std::int64_t least_copy_side = 16;
    return std::max(rows, columns) > seen_at_once && (std::min(rows, columns) + 1) / 2 >= least_copy_side;
}

/// What a raster file says about itself.
struct RasterDescription {
    StoredType stored = StoredType::float32;
    std::string description = {};
    std::string unit = {};
    std::optional<double> nodata = {};
    double scale = 1.0;
    double offset = 0.0;
    /// Names of classes by number, 0 to 65535; kept in a second file beside the raster (its name and ".aux.xml").
    std::vector<std::pair<int, std::string>> categories = {};
    /// Colours of classes by number, "#rrggbb"; for types of 8 and 16 bits without sign.
    std::vector<std::pair<int, std::string>> colours = {};
    std::vector<std::pair<std::string, std::string>> metadata = {};
    OverviewKind overviews = OverviewKind::average;
    bool cloud_optimized = false;  ///< arranged so that parts of it can be read over the network
};

/// Begins a tiled, compressed GeoTIFF. Instances for double, float, uint8_t, uint16_t, uint32_t and int32_t.
///
/// Windows may come in any order and never twice; rows of blocks (256 rows) are held until they are whole and leave in
/// order, so that the same values give the same bytes whatever the windows, the threads and GDAL's cache. Whole-width
/// strips from the top down, a row of blocks each, need the least memory. Overviews are made on the way, each level from the one before. NaN is written as `nodata`; any other value must be representable in
/// the stored type. `close` adds statistics, closes, opens the file again and checks it. What fails is an
/// Error (machine) and leaves no file, as does a sink destroyed without `close`. A symbolic link at `path` is refused.
template <class T>
[[nodiscard]] std::unique_ptr<BlockSink<T>> create_raster(const std::filesystem::path& path, const Grid& grid,
                                                          const ReferenceSystem& system,
                                                          const RasterDescription& description);

/// Writes a raster that is wholly in memory, and closes the sink.
template <class T>
void write_raster(BlockSink<T>& sink, const Raster<T>& raster) {
    sink.write(Window{.rows = raster.rows(), .columns = raster.columns()}, raster.values());
    sink.close();
}

}  // namespace rillclock
