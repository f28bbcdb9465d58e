#pragma once

#include <optional>
#include <string_view>
#include <vector>

#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/deliver/study_result.hpp"
#include "rillclock/raster/grid_shapes.hpp"
#include "rillclock/study/isochrone_runoff.hpp"

namespace rillclock {

/// An isochrone band with what its feature says.
struct IsochroneRow {
    const IsochroneBand* band = nullptr;
    const Outlet* outlet = nullptr;
    double from_min = 0.0;
    double to_min = 0.0;
    FixedArea area_until = 0;   ///< of this band and all earlier ones of its scope and point
    FixedArea area_in_all = 0;  ///< of all bands of its scope and point
    std::optional<BandRunoff> runoff = {};  ///< where the study has rain by duration and runoff coefficients
};

/// All bands, in their order.
[[nodiscard]] std::vector<IsochroneRow> isochrone_rows(const StudyResult& result, const StudyRegions& regions);
/// "subarea", "catchment".
[[nodiscard]] std::string_view words(IsochroneScope scope);
/// "cells", or "smoothed".
[[nodiscard]] std::string_view border_words(const IsochroneRules& rules);
/// What is said wherever times of cells stand beside a network with pipes or stated times.
inline constexpr std::string_view ground_times_words =
    "times are those over the ground: what pipes and stated times change is not in them, but in the times of the points";
/// What the bands are and are not, for whoever opens the layer.
[[nodiscard]] std::string isochrone_description(const StudyResult& result);
/// The subareas within a band, with the area that each has of it in m²: "Weir 1250.0; Mill bridge 475.5".
[[nodiscard]] std::string parts_in_words(const StudyResult& result, const IsochroneBand& band);
/// Outlines in the coordinates of the grid; the first ones count columns and rows.
[[nodiscard]] std::vector<Polygon> placed(std::vector<Polygon> in_cells, const Grid& grid);
[[nodiscard]] std::vector<Polygon> placed(const std::vector<CornerPolygon>& polygons, const Grid& grid);

}  // namespace rillclock
