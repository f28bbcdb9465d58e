#include "rillclock/tiles/processor_quota.hpp"

#include <algorithm>
#include <cmath>
#include <fstream>
#include <limits>
#include <sstream>
#include <string>

#include "control_groups.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;

constexpr double no_quota = std::numeric_limits<double>::infinity();

std::string line_in(const fs::path& path) {
    std::ifstream file(path);
    std::string line;
    std::getline(file, line);
    return line;
}

/// Both texts in microseconds: time a period. "max" and -1 say that there is no quota.
double ratio_of(const std::string& time_and_period) {
    std::istringstream numbers(time_and_period);
    double time = 0.0;
    double period = 0.0;
    return numbers >> time >> period && time > 0 && period > 0 ? time / period : no_quota;
}

double quota_of(const ControlGroup& group) {
    if (group.version == ControlGroup::Version::second) return ratio_of(line_in(group.folder / "cpu.max"));
    return ratio_of(line_in(group.folder / "cpu.cfs_quota_us") + " " + line_in(group.folder / "cpu.cfs_period_us"));
}

}  // namespace

double processor_quota() { return processor_quota("/"); }

double processor_quota(const fs::path& root) {
    double least = no_quota;
    for (const ControlGroup& group : control_groups(root, "cpu")) least = std::min(least, quota_of(group));
    return least;
}

unsigned threads_within(double quota, unsigned processors) {
    return quota < processors ? std::max(1U, static_cast<unsigned>(std::ceil(quota))) : std::max(1U, processors);
}

}  // namespace rillclock
