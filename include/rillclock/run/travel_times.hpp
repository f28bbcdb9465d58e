#pragma once

#include <cstdint>
#include <span>
#include <string_view>

#include "rillclock/core/notice.hpp"
#include "rillclock/core/progress.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/raster/blocks.hpp"
#include "rillclock/raster/raster.hpp"
#include "rillclock/study/study.hpp"

namespace rillclock {

/// Land that needs no files: elevations and land cover on one grid of rectangular cells on a plane.
struct PlaneLand {
    BlockSource<double>& elevations;    ///< rows × columns, in the study's `terrain.elevation_unit` (metres where absent); NaN where void
    BlockSource<std::int32_t>& cover;   ///< rows × columns, codes of the study's cover book; `no_class` where there is none
    Length cell_width;                  ///< on the ground
    Length cell_height;
    bool whole_numbers = false;         ///< elevations are whole numbers, so falls of less than one are not to be trusted
    bool wide = true;                   ///< kept in 8 bytes a cell; 4 hold every value exactly where they came from 32-bit floating point
};

/// What is known of every cell, rows × columns each; void cells have what stands in brackets.
struct TravelTimes {
    Raster<float> minutes;                    ///< to where water leaves the data, or stays [NaN]
    Raster<std::uint16_t> flow_azimuth;       ///< degrees clockwise from grid north; 65534 where water leaves [65535]
    Raster<double> contributing_area_m2;      ///< that drains through the cell, its own area included [NaN]
    Raster<std::uint8_t> regime;              ///< in which its step begins, as a `Regime` [0]
    Raster<double> spill_elevation;           ///< the lowest level at which its water gets out, in the unit of the elevations [NaN]
    std::int64_t void_cells = 0;
    Notices notices;
};

/// The time of water from every cell to where it leaves the data, by the rules of a study without design points of its own: what `run` writes
/// to `travel_time.tif` for the same elevations, cover and study, bit for bit.
///
/// Of the study count the cover book, the 2-year 24-hour rain and what else `travel_time_keys` lists; the names of rasters may be empty.
/// No file is read but the cover book and velocity chart that the study names, and none is written. `threads` of 0 means as many as may be used; no
/// figure depends on it. Memory: 12 to 16 bytes a cell (16 to 24 where elevations are wide) and what is returned, 23 more. Cost: linear in the cells.
///
/// Throws Error (inputs) where the two grids differ, a cell size is not above 0 or not finite, no cell has data, the cover has classes
/// that the book lacks, or the study asks for what needs files or points (kinematic sheet flow, mapped lines, ranges); machine where
/// there is too little memory; Cancelled where `progress` asks to stop.
[[nodiscard]] TravelTimes travel_times(const PlaneLand& land, const Study& study, unsigned threads = 0, const Progress& progress = {});

/// The keys of a study that act on `travel_times`, as `study_keys` names them.
[[nodiscard]] std::span<const std::string_view> travel_time_keys();

}  // namespace rillclock
