#pragma once

#include <string>
#include <vector>

#include "rillclock/raster/grid_shapes.hpp"
#include "study_data.hpp"

namespace rillclock {

/// The polygons of a study's rain zones. A zone is the rain file that its polygons name.
struct RainZoneShapes {
    struct Part {
        std::size_t zone = 0;  ///< from 1
        Polygon polygon;
    };
    std::vector<std::string> files;  ///< rain file of each zone, by number − 1, in the order in which they are named
    std::vector<Part> parts;         ///< in the order of the file
    Notices notices;
};

/// Reads them in the coordinates of the elevations; nothing where the study has none. Throws an input error where the file cannot be used, a
/// polygon names no rain file, or there are more than 255 zones.
[[nodiscard]] RainZoneShapes read_rain_zones(const Study& study);

/// The zone of each cell, 0 outside of all; where polygons of two zones overlap, the one that comes first in the file,
/// and a notice. No cells where the study has no zones: one byte a cell else. Throws an input error where no polygon
/// holds the centre of a cell.
struct RainZoneCells {
    Raster<std::uint8_t> zone;
    Notices notices;
};
[[nodiscard]] RainZoneCells rain_zone_cells(const Study& study, const RainZoneShapes& shapes, const TerrainData& terrain);

/// Throws an input error for a point whose catchment lies outside of all zones while there is no rain for that.
void require_rain(const StudyRain& rain, const std::vector<Outlet>& outlets);
/// A notice for each point whose zone holds less than half of its catchment.
[[nodiscard]] Notices zone_notices(const StudyRain& rain, const std::vector<Outlet>& outlets, const Grid& grid);

}  // namespace rillclock
