#pragma once

#include <algorithm>
#include <cstdint>
#include <optional>
#include <string>

#include "rillclock/tiles/usable_memory.hpp"

namespace rillclock {

/// What the memory of a run depends on.
struct MemoryTask {
    std::int64_t cells = 0;
    bool wide_elevations = false;   ///< elevations take eight bytes a cell (see ElevationStore)
    bool soil_raster = false;       ///< soil groups come from a raster
    bool rain_zones = false;        ///< each cell lies in a zone of rain
    bool own_storms = false;        ///< each point has a storm of its own, whose arrivals are kept apart (see StormBins)
    bool results_kept = false;      ///< what is known of every cell is handed back in memory (see TravelTimes), 23 bytes a cell
};

/// Memory that a run needs, in bytes, with room to spare.
///
/// What is kept for every cell is 11.2 bytes, and 4 more where it lies below its spill elevation; 15.2 and 8 where elevations are wide; and 1 of a
/// soil raster. All cells are taken to lie below theirs: what that leaves over goes to strips of the rasters being written, which grow with
/// their width. Tiles and the libraries take 150 MB at least, and 350 MB once there are enough cells to fill them. A bin of arrivals takes 72 bytes with what
/// the heap adds; there may be one a cell, but in data of some size they share them: 20 bytes a cell were seen at 36 million cells.
[[nodiscard]] constexpr double memory_need(const MemoryTask& task) {
    const auto cells = static_cast<double>(task.cells);
    const double kept = cells * ((task.wide_elevations ? 24.0 : 16.0) + (task.soil_raster ? 1.0 : 0.0) + (task.rain_zones ? 1.0 : 0.0) +
                                 (task.results_kept ? 23.0 : 0.0));
    const double around = 150e6 + std::min(200e6, cells * 40.0);
    const double bins = task.own_storms ? std::min(cells * 72.0, 72e6 + cells * 25.0) : 0.0;
    return kept + around + bins;
}

/// Says with numbers that a run needs more memory than there is; nothing where it does not.
[[nodiscard]] std::optional<std::string> lack_of_memory(const MemoryTask& task, const MemoryLimit& limit);

/// "530 MB", "21 GB": bytes to three digits.
[[nodiscard]] std::string bytes_text(double bytes);

}  // namespace rillclock
