#pragma once

#include "rillclock/io/cover_file.hpp"
#include "study_data.hpp"

namespace rillclock {

/// Opens what a study says of its raster of soil groups, to be seen through the grid of the elevations.
[[nodiscard]] CoverFile open_soil(const Study& study, const Grid& target, const ReferenceSystem& system);

/// Gives the surface its soil: the group of each cell from the study's raster (a byte a cell), or the one that is
/// stated for all (no memory at all). Adds a notice for cells whose group is not known, or for which the fallback was
/// taken. Throws an input error where the raster cannot be used or gives no cell a group.
void read_soil(const Study& study, const TerrainData& terrain, SurfaceData& surface, const Progress& progress);

}  // namespace rillclock
