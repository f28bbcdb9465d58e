#pragma once

#include "rillclock/hydraulics/lump_methods.hpp"

// The times of the lump methods from what was measured, each with whether it may be used.

namespace rillclock {

LumpTime nrcs_lag_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime kirpich_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime california_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime kerby_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime kerby_kirpich_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime kerby_kirpich_low_slope_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime faa_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime izzard_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime papadakis_kazan_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime bransby_williams_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime bransby_williams_equal_area_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime giandotti_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime los_angeles_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);
LumpTime county_initial_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain);

}  // namespace rillclock
