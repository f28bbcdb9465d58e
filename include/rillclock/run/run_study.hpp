#pragma once

#include <cstdint>
#include <filesystem>
#include <string>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/core/progress.hpp"
#include "rillclock/study/study.hpp"

namespace rillclock {

/// How a study is run; no figure depends on it.
struct RunOptions {
    bool replace = false;          ///< whether a result that is already there may be replaced
    unsigned threads = 0;          ///< 0 for as many as GDAL_NUM_THREADS says, else as may be used
    std::int64_t tile_side = 256;  ///< in cells; no figure depends on it
};

/// What a run tells of a scenario of its study.
struct ScenarioOutcome {
    std::string name;
    std::filesystem::path folder;             ///< of its own result
    std::filesystem::path comparison_folder;
    std::vector<std::string> facts;
    std::string comparison;                   ///< with the study: a sentence and a short table
    std::size_t worse = 0;                    ///< points that get worse by more than the tolerance of `CompareOptions`
    std::vector<std::string> changes;         ///< what it states in place of the study: "surface.cover = cover-plan.tif"
    std::string json;                         ///< `result.json` of its own result
    std::string comparison_json;              ///< and of the comparison
};

/// What a finished run tells its caller; all of it, and more, is in the result folder.
struct RunOutcome {
    std::filesystem::path folder;
    std::vector<std::string> facts;       ///< what was read and could be read wrongly: source, block, unit of the rain
    std::vector<std::string> headlines;   ///< three or four sentences
    std::string overview;                 ///< a short table of the points
    Notices notices;                      ///< by effect on the time, the greatest first
    std::string json;                     ///< `result.json`
    std::vector<ScenarioOutcome> scenarios;
};

/// All figures of a run as one JSON document: `result.json`, and where there are scenarios a member `scenario_results` more, with the name,
/// folders, changes, `result.json` and comparison of each.
[[nodiscard]] std::string json_of(const RunOutcome& outcome);

/// The whole of a study: reads the rasters, settles the flow, times it, works out every design point, and writes the result
/// folder, which appears whole or not at all. Scenarios are worked out on the same flow, which is found once; each has a result of its own
/// within the folder, and its comparison with the study beside (see study/scenario.hpp).
///
/// Throws Error where the inputs or the machine do not allow it, Cancelled where the caller's `progress` asks to stop; the folder is
/// then as it was.
RunOutcome run(const Study& study, const RunOptions& options, const Progress& progress = {});

}  // namespace rillclock
