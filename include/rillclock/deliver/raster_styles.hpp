#pragma once

#include <string>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// `rasters/travel_time.sld`: classes of time in round minutes, as on the report's map (OGC Styled Layer Descriptor 1.0).
[[nodiscard]] std::string travel_time_sld(const StudyResult& result);
/// `rasters/regime.sld`.
[[nodiscard]] std::string regime_sld();
/// `rasters/flow_azimuth.sld`: a colour for each of the eight directions.
[[nodiscard]] std::string flow_azimuth_sld();
/// `rasters/contributing_area.sld`: classes by tens.
[[nodiscard]] std::string contributing_area_sld(const StudyResult& result);
/// `rasters/catchment.sld`: a colour and the name of each point, none where nothing drains to one.
[[nodiscard]] std::string catchment_sld(const StudyResult& result);

}  // namespace rillclock
