#pragma once

#include <string_view>
#include <vector>

#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/deliver/study_result.hpp"
#include "rillclock/raster/grid_shapes.hpp"

namespace rillclock {

/// An isochrone band with what its feature says.
struct IsochroneRow {
    const IsochroneBand* band = nullptr;
    const Outlet* outlet = nullptr;
    double from_min = 0.0;
    double to_min = 0.0;
    FixedArea area_until = 0;   ///< of this band and all earlier ones of its scope and point
    FixedArea area_in_all = 0;  ///< of all bands of its scope and point
};

/// All bands, in their order.
[[nodiscard]] std::vector<IsochroneRow> isochrone_rows(const StudyResult& result, const StudyRegions& regions);
/// "subarea", "catchment".
[[nodiscard]] std::string_view words(IsochroneScope scope);
/// Outlines in the coordinates of the grid.
[[nodiscard]] std::vector<Polygon> placed(const std::vector<CornerPolygon>& polygons, const Grid& grid);

}  // namespace rillclock
