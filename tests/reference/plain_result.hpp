#pragma once

#include <filesystem>
#include <string>

#include "rillclock/study/study.hpp"

namespace rillclock::reference {

/// Holds the six rasters of a result to the plain way over the whole raster, in every cell: flow azimuth, spill elevation, contributing area,
/// catchment, regime and travel time. Returns the first cell that differs, with both values; empty where none does.
///
/// What is read from the study's files (elevations, cover, rain, mapped shapes and the cells they claim) and the cells of the design
/// points, which `result.json` names, are the program's; directions, sweeps, slopes, step times and owners are those of reference/plain. Where
/// points have storms of their own, these are as `result.json` prints them, to eight digits: travel times then agree within 10⁻⁶ of themselves,
/// and else to the last bit. Studies without rain zones, mapped sections and channels under the design storm.
[[nodiscard]] std::string difference_from_plain(const Study& study, const std::filesystem::path& result);

}  // namespace rillclock::reference
