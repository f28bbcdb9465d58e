#pragma once

#include <span>
#include <string>

#include "rillclock/deliver/study_result.hpp"
#include "rillclock/raster/grid_shapes.hpp"
#include "rillclock/terrain/depressions.hpp"

namespace rillclock {

/// A depression with the ground it covers, and its row in `tables/depressions.csv`, from 1.
struct OutlinedDepression {
    std::size_t number = 0;
    Depression depression;
    std::vector<Polygon> outline;
};

/// `depressions.geojson`: outlines along the edges of cells, in longitude and latitude, with depth, area and volume in metres. One that
/// crosses the 180th meridian is a point, at its deepest cell.
[[nodiscard]] std::string depressions_geojson(const StudyResult& result, std::span<const OutlinedDepression> depressions);

}  // namespace rillclock
