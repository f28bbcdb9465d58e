#pragma once

#include "rillclock/deliver/study_geopackage.hpp"
#include "rillclock/io/vector_output.hpp"

namespace rillclock {

/// The layer `depressions`: outlines along the edges of cells, the deepest first, as in `depressions.geojson`.
void write_depressions(const StudyResult& result, std::span<const OutlinedDepression> depressions, VectorFile& file);

/// The layer `own_paths`: where the water of mapped lines would go by the ground alone, the path that departs farthest first.
void write_own_paths(const StudyResult& result, std::span<const OwnWay> ways, VectorFile& file);

}  // namespace rillclock
