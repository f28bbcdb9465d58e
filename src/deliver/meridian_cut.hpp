#pragma once

#include <vector>

#include "rillclock/raster/grid_shapes.hpp"

namespace rillclock {

/// Cuts polygons in degrees at the 180th meridian, as RFC 7946 (section 3.1.9) asks: each answer lies on one side of it, with longitudes from −180 to
/// 180, and together they cover what was there.
///
/// A ring whose longitude jumps by more than 180 degrees from one corner to the next is taken to go on beyond the meridian there. The first
/// ring of a polygon is its outer one, counter-clockwise, the others are holes, clockwise; so are those of the answers. Rings may be closed by
/// repeating the first corner or not; those of the answers are closed. Corners on the meridian are taken for east of it. Sides that
/// lie on the meridian may touch. Polygons that hold a pole are left as they are. Cost: n log n in the corners.
[[nodiscard]] std::vector<Polygon> cut_at_meridian(const std::vector<Polygon>& polygons);

}  // namespace rillclock
