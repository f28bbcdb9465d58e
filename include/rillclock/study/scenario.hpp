#pragma once

#include <string>
#include <string_view>

#include "rillclock/study/study.hpp"

namespace rillclock {

/// Whether a scenario may have a value of its own for that key. Those of the terrain, the points, the units and the output are the
/// study's: a scenario runs over the same flow paths to the same points.
[[nodiscard]] bool may_differ(std::string_view key);

/// Throws an input error where a name cannot be that of a scenario, which becomes part of a folder's name: letters, digits, "-" and "_".
/// `where`: "study.toml, line 3, column 1".
void check_scenario_name(std::string_view name, std::string_view where);

/// The study as it is under one of its scenarios: each value that the scenario states in place of the study's own, and all others as they
/// are. What states the same thing in another way gives way: a rain formula to a rain file and the other way round, a region of channel sizes
/// to a hydraulic radius, a raster of soil groups to one letter.
[[nodiscard]] Study scenario_study(const Study& base, const ScenarioStudy& scenario);

/// What a scenario states, as a line of a study file would: "surface.cover = cover-plan.tif".
[[nodiscard]] std::string words(const StatedChange& change);

/// Where in the result folder the scenario's own result stands: "scenario-after".
[[nodiscard]] std::string scenario_folder(const ScenarioStudy& scenario);
/// Where in the result folder its comparison with the study stands: "comparison-after".
[[nodiscard]] std::string comparison_folder(const ScenarioStudy& scenario);

}  // namespace rillclock
