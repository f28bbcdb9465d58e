#pragma once

#include <string>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// `rasters/travel_time.sld`: classes of time in round minutes, as on the report's map (OGC Styled Layer Descriptor 1.0).
[[nodiscard]] std::string travel_time_sld(const StudyResult& result);
/// `rasters/regime.sld`.
[[nodiscard]] std::string regime_sld();

}  // namespace rillclock
