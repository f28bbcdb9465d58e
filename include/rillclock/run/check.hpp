#pragma once

#include <string>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/study/study.hpp"

namespace rillclock {

/// What can be said of a study before it is run.
struct CheckReport {
    std::vector<std::string> facts;      ///< what was read, a sentence each
    std::vector<std::string> problems;   ///< what would stop the run, a sentence each
    Notices notices;                     ///< what the run would tell
};

/// Reads headers, tables and points, no more, and says what would be wrong and what the run will cost in memory and disk. Goes on
/// after a problem, so that one check finds them all.
[[nodiscard]] CheckReport check(const Study& study);

/// Memory that a run needs, in bytes, with room to spare: what is kept for every cell, and what tiles, strips of the rasters being
/// written and the libraries need whatever the size. `wide` where elevations take eight bytes a cell (see ElevationStore), `soil` where
/// there is a raster of soil groups.
[[nodiscard]] constexpr double memory_need(double cells, bool wide, bool soil = false) {
    return cells * ((wide ? 30.0 : 20.0) + (soil ? 1.0 : 0.0)) + 350e6;
}

}  // namespace rillclock
