#pragma once

#include <cstdint>

#include "rillclock/deliver/raster_strips.hpp"
#include "rillclock/io/raster_output.hpp"

namespace rillclock {

inline constexpr double no_value = -9999.0;
inline constexpr std::uint32_t no_number = UINT32_MAX;

[[nodiscard]] RasterDescription travel_time_description(const RasterStory& story);
[[nodiscard]] RasterDescription flow_azimuth_description();
[[nodiscard]] RasterDescription contributing_area_description();
[[nodiscard]] RasterDescription catchment_description(const RasterStory& story);
[[nodiscard]] RasterDescription regime_description();
[[nodiscard]] RasterDescription spill_elevation_description(const RasterStory& story);

/// What flow_azimuth.tif holds for a code.
[[nodiscard]] std::uint16_t azimuth_value(FlowCode code);

}  // namespace rillclock
