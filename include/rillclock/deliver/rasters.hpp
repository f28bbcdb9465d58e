#pragma once

#include "rillclock/core/progress.hpp"
#include "rillclock/deliver/study_result.hpp"
#include "rillclock/io/result_folder.hpp"

namespace rillclock {

inline constexpr int azimuth_leaves = 65534;  ///< in flow_azimuth.tif: water leaves the data here
inline constexpr int azimuth_void = 65535;

/// Writes the six rasters of a result: travel time, flow azimuth, contributing area, catchment, regime, spill elevation.
void write_rasters(const StudyResult& result, ResultFolder& folder, const Progress& progress);

}  // namespace rillclock
