#pragma once

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <optional>
#include <string>

#include "rillclock/io/raster_output.hpp"
#include "rillclock/tiles/usable_memory.hpp"

namespace rillclock {

/// What the memory of a run depends on.
struct MemoryTask {
    std::int64_t cells = 0;
    std::int64_t rows = 0;          ///< and columns: of the rasters that are written; 0 where none are
    std::int64_t columns = 0;
    bool wide_elevations = false;   ///< elevations take eight bytes a cell (see ElevationStore)
    bool soil_raster = false;       ///< soil groups come from a raster
    bool rain_zones = false;        ///< each cell lies in a zone of rain
    bool own_storms = false;        ///< each point has a storm of its own, whose arrivals are kept apart (see StormBins)
    bool results_kept = false;      ///< what is known of every cell is handed back in memory (see TravelTimes), 23 bytes a cell
    std::int64_t points = 0;        ///< design points, at most
    std::int64_t draws = 0;         ///< of uncertain inputs; 0 where none are asked for
    bool rain_by_duration = false;  ///< there may be peak flows, whose land is kept by time of arrival
    bool isochrones = false;        ///< are asked for, whatever their step
    std::int64_t scenarios = 0;     ///< beside the study
};

/// Bytes of the rows that are on their way into the six rasters: two strips of a row of tiles, 27 bytes a cell each, and the next row of
/// blocks of every coarser copy.
[[nodiscard]] constexpr double strips_need(std::int64_t rows, std::int64_t columns) {
    constexpr std::int64_t strip_rows = 256;
    constexpr double cell_bytes = 27.0;
    double bytes = 2.0 * cell_bytes * static_cast<double>(std::min(strip_rows, rows)) * static_cast<double>(columns);
    while (has_coarser_copy(rows, columns)) {
        rows = (rows + 1) / 2;
        columns = (columns + 1) / 2;
        bytes += cell_bytes * static_cast<double>(std::min(strip_rows, rows)) * static_cast<double>(columns);
    }
    return bytes;
}

/// Bytes of what is kept for design points: results, sheets and rows (75 000 a point), and the cells of their paths, which are longer in larger
/// data. From 85 000 to 140 000 were seen a point, at 1 to 36 million cells and 2000 points. A scenario keeps less of each until the end.
[[nodiscard]] inline double points_need(const MemoryTask& task) {
    const double of_study = 75e3 + 20.0 * std::sqrt(static_cast<double>(task.cells));
    return static_cast<double>(task.points) * (of_study + 45e3 * static_cast<double>(task.scenarios));
}

/// Bytes of arrivals where points have storms of their own: a bin takes 72 with what the heap adds, and is copied as bins are joined. There may be
/// one a cell; in data of some size cells of a subarea share them, fewer the more subareas there are. From 33 to 90 were seen a cell, at 10 and 36
/// million cells with none to 100 points.
[[nodiscard]] inline double own_storms_need(const MemoryTask& task) {
    const auto cells = static_cast<double>(task.cells);
    return task.own_storms ? std::min(160.0 * cells, 52.0 * cells + 12.5e3 * std::sqrt(cells * static_cast<double>(task.points))) : 0.0;
}

/// Bytes of the outlines of isochrones. How long they are is known once times are: 43 bytes a cell were seen at 10 min, 125 at 3 min, in data of 10
/// million cells. StudyRegions has an end to the pieces of border that it keeps.
[[nodiscard]] inline double isochrones_need(const MemoryTask& task) {
    return task.isochrones ? std::min(130.0 * static_cast<double>(task.cells), 1.6e9) : 0.0;
}

/// Bytes of what peak flows and uncertainty add to points. Both keep something for each subarea, the larger the longer its water is on the way:
/// as the side of a subarea grows, so do all of them together as the root of cells times points. Uncertainty keeps the paths from up to forty
/// heads of each, which are no more than there are cells, and 24 bytes a draw and point.
[[nodiscard]] inline double subareas_need(const MemoryTask& task) {
    const auto cells = static_cast<double>(task.cells);
    const auto points = static_cast<double>(task.points);
    const double ways = std::sqrt(cells * points);
    const double peaks = task.rain_by_duration ? 30e3 * points + 400.0 * ways : 0.0;
    const double paths = task.draws > 0 ? std::min(cells * 100.0, 4600.0 * ways) : 0.0;
    return peaks + paths + 24.0 * static_cast<double>(task.draws) * points;
}

/// Memory that a run needs, in bytes, with room to spare.
///
/// What is kept for every cell is 11.2 bytes, and 4 more where it lies below its spill elevation; 15.2 and 8 where elevations are wide; and 1 of a
/// soil raster. All cells are taken to lie below theirs, and a cell to have 16 bytes (24): the 0.8 that this leaves over are the strips of rasters
/// not far from square (see `strips_need`); wider ones are counted. Depressions, once the strips are gone, take 0.25 of it. Tiles and the libraries
/// take 170 MB at least, and 350 MB once there are enough cells to fill them. Land cover on another grid adds nothing: it is read in parts of at
/// most 32 MB, before half of what is kept is there.
[[nodiscard]] inline double memory_need(const MemoryTask& task) {
    const auto cells = static_cast<double>(task.cells);
    const double kept = cells * ((task.wide_elevations ? 23.2 : 15.2) + (task.soil_raster ? 1.0 : 0.0) + (task.rain_zones ? 1.0 : 0.0) +
                                 (task.results_kept ? 23.0 : 0.0));
    const double strips = std::max(cells * 0.8, strips_need(task.rows, task.columns));
    const double around = 170e6 + std::min(180e6, cells * 90.0);
    return kept + strips + around + own_storms_need(task) + isochrones_need(task) + points_need(task) + subareas_need(task);
}

/// Says with numbers that a run needs more memory than there is; nothing where it does not.
[[nodiscard]] std::optional<std::string> lack_of_memory(const MemoryTask& task, const MemoryLimit& limit);

/// "530 MB", "21 GB": bytes to three digits.
[[nodiscard]] std::string bytes_text(double bytes);

}  // namespace rillclock
