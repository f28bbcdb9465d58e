#pragma once

#include "rillclock/io/reference_system.hpp"
#include "rillclock/raster/ground.hpp"

namespace rillclock {

/// Lengths of steps and areas of cells on the ground.
///
/// Projected grids: planar, in the system's linear unit. Geographic grids (degrees): geodesics between cell centres on
/// the system's own ellipsoid (C. F. F. Karney, Algorithms for geodesics, J. Geodesy 87, 2013; error below 15 nm, so
/// the rounding to 2⁻²⁰ m is the greater), and the closed formula for the area between two parallels (relative error
/// below 1e-9 for cells of one arc second and larger; rounded to 1 cm²).
///
/// Web Mercator: not its own lengths, which are too long by about 1/cos(latitude) (by 1.56 at 50°), but those between the
/// same centres on the ellipsoid of WGS 84, row by row: the geodesics and areas of a geographic grid whose rows lie at the
/// latitudes that PROJ gives them.
///
/// Throws Error (inputs) where the system is neither projected nor geographic, its angles are not degrees, or a
/// geographic grid or one in web Mercator reaches beyond a pole or over the 180th meridian by more than a cell.
[[nodiscard]] Ground ground_of(const Grid& grid, const ReferenceSystem& system);

}  // namespace rillclock
