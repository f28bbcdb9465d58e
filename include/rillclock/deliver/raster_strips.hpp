#pragma once

#include <array>
#include <cstdint>
#include <functional>
#include <memory>
#include <span>
#include <string>
#include <vector>

#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/io/elevation_file.hpp"
#include "rillclock/io/result_folder.hpp"
#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

inline constexpr int azimuth_leaves = 65534;  ///< in flow_azimuth.tif: water leaves the data here
inline constexpr int azimuth_void = 65535;

/// What the rasters of a result are written from, beside the cells themselves.
struct RasterStory {
    const Grid& grid;
    const ReferenceSystem& system;
    const ElevationFormat& format;
    std::string storm;                            ///< that travel_time.tif is under, in words
    std::string sheet_flow;                       ///< the formula, in words
    bool has_voids = false;
    bool cloud_optimized = false;
    std::span<const DesignPoint> points;
    /// By point number, from 0: time to the root of the last point on the way down; entry 0 is nothing.
    std::vector<StepTime> last_point_times;
    /// By point number, from 0: storm factor of the last point on the way down; entry 0 that of cells without a point.
    std::vector<double> last_point_factors;
    /// Sees each finished strip, from the top down, on the thread that writes; may be empty.
    std::function<void(const RegionStrip&)> look = {};
};

/// Writes the six rasters of a result strip by strip while tiles are worked: travel time, flow azimuth, contributing area, catchment,
/// regime, spill elevation. A strip is written while the next one is filled.
class RasterStrips {
public:
    RasterStrips(RasterStory story, const TiledTravel& travel, ResultFolder& folder);
    ~RasterStrips();
    RasterStrips(const RasterStrips&) = delete;
    RasterStrips& operator=(const RasterStrips&) = delete;

    /// Takes the cells of a tile whose times and owners are on the desk; safe from several threads for tiles of one row of tiles.
    void fill(const TileDesk& desk);
    /// Hands the filled rows of cells on to the files; from the top down.
    void write(std::int64_t row, std::int64_t rows);
    /// Ends the files. Throws Error (machine) where anything could not be written.
    void close();

private:
    class Files;
    struct Strip;

    void fill_cell(const TileDesk& desk, Local local, Cell at);

    RasterStory story_;
    std::array<std::uint16_t, 256> azimuths_{};   ///< by flow code
    std::unique_ptr<Files> files_;
    std::unique_ptr<Strip> filling_;
    std::unique_ptr<Strip> leaving_;
};

}  // namespace rillclock
