#pragma once

#include <cstdint>
#include <functional>
#include <string>
#include <vector>

#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/deliver/calculation_sheet.hpp"
#include "rillclock/deliver/comparison.hpp"
#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// The rasters as the report's map shows them: every `stride`-th cell of every `stride`-th row.
struct ReportOverview {
    std::int64_t stride = 1;
    std::int64_t rows = 0;
    std::int64_t columns = 0;
    std::vector<float> minutes;         ///< to the last point on the way down; NaN where there is none
    std::vector<std::uint8_t> shade;    ///< of the relief, lit from the north-west: 1 dark to 255 light; 0 void
};

/// What the report is made from.
struct ReportMatter {
    const StudyResult& result;
    const StudyRegions& regions;
    const ReportOverview& overview;
    const SheetBook& sheets;
    std::function<double(Cell)> ground_m;   ///< elevation of the ground, in metres
};

/// A scenario beside the study, for the study's report.
struct ScenarioBeside {
    std::string name;
    std::string folder;                ///< of its result and of the comparison, from the study's
    std::string comparison_folder;
    std::vector<std::string> changes;  ///< what it states in place of the study: "surface.cover = cover-plan.tif"
    Comparison comparison;
};

/// The text of `report.html`, but for what is known only when the scenarios are worked out: `scenarios_section` belongs between the two.
struct ReportText {
    std::string before;
    std::string after;
};

/// `report.html`: one file that needs no network and no script to be read and printed. At most about 10 MB: beyond, points with smaller
/// catchments have shorter sections, then none; what was left out is said.
[[nodiscard]] ReportText report_html(const ReportMatter& matter);

/// What each scenario changes, and its times and peaks beside the study's: the points that get worse first, at most 20 of each scenario. Nothing
/// where there are no scenarios.
[[nodiscard]] std::string scenarios_section(const std::vector<ScenarioBeside>& scenarios);

}  // namespace rillclock
