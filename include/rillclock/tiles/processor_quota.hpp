#pragma once

#include <filesystem>

namespace rillclock {

/// How many processors' time the control groups of this process allow it, as containers and batch systems set it: the least quota of
/// all groups it is in, of either version. Infinite where there is none; half a processor is 0.5.
[[nodiscard]] double processor_quota();

/// The same, as the files of a machine under `root` have it: `proc/self/cgroup` and what is below `sys/fs/cgroup`. A file that is not
/// there, or says "max" or -1, sets no quota.
[[nodiscard]] double processor_quota(const std::filesystem::path& root);

/// Threads that may work at a time on so many processors under a quota: as many as the quota keeps busy, the last one in part; one at least.
[[nodiscard]] unsigned threads_within(double quota, unsigned processors);

}  // namespace rillclock
