#pragma once

#include <string>
#include <vector>

#include "mapped_flow.hpp"
#include "overview.hpp"
#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/io/result_folder.hpp"
#include "rillclock/terrain/depressions.hpp"
#include "study_data.hpp"

namespace rillclock {

/// A study worked out, and what its files are written from beside that.
struct WorkedStudy {
    const StudyResult& result;
    const TerrainData& terrain;
    const TiledTravel& travel;
    const MappedFlow& flow;
    const std::vector<Depression>& depressions;   ///< the deepest first
    const StudyRegions& regions;
    OverviewSampler& overview;
};

/// Writes all files of a result but its rasters; returns the text of result.json.
std::string write_result(const WorkedStudy& worked, ResultFolder& folder);

}  // namespace rillclock
