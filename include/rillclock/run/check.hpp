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
    std::vector<std::string> lacking;    ///< what would stop it on this machine alone
    Notices notices;                     ///< what the run would tell
};

/// Reads headers, tables and points, no more, and says what would be wrong and what the run will cost in memory and disk. Goes on
/// after a problem, so that one check finds them all.
[[nodiscard]] CheckReport check(const Study& study);

}  // namespace rillclock
