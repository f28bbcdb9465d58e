#pragma once

#include <span>
#include <string>

#include "rillclock/deliver/study_result.hpp"
#include "rillclock/terrain/own_ways.hpp"

namespace rillclock {

/// `own_paths.geojson`: where the water of mapped lines would go by the ground alone, a line each, drawn downstream.
[[nodiscard]] std::string own_ways_geojson(const StudyResult& result, std::span<const OwnWay> ways);

}  // namespace rillclock
