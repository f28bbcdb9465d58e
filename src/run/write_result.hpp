#pragma once

#include <string>
#include <vector>

#include "mapped_flow.hpp"
#include "overview.hpp"
#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/deliver/report.hpp"
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

/// Texts of a result that its caller has use for.
struct ResultTexts {
    std::string json;      ///< as it was written to result.json
    ReportText report;     ///< not yet written: a section on scenarios may come into it
};

/// Writes all files of a result but its rasters and its report.
[[nodiscard]] ResultTexts write_result(const WorkedStudy& worked, ResultFolder& folder);

}  // namespace rillclock
