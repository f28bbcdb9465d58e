#pragma once

#include <filesystem>
#include <string>

namespace rillclock {

/// How much memory this process may fill, and what says so.
struct MemoryLimit {
    double bytes = 0.0;
    std::string set_by;   ///< "the machine", "the container" or "the limit set for the process (ulimit -v)"
};

/// The least of the machine's memory, the limits of all control groups the process is in (either version), and the limit of its
/// address space. What other programs fill at the moment does not count.
[[nodiscard]] MemoryLimit usable_memory();

/// The same but for the address space, as the files of a machine under `root` have it: `proc/meminfo`, `proc/self/cgroup` and what
/// is below `sys/fs/cgroup`. A file that is not there, or says "max", sets no limit.
[[nodiscard]] MemoryLimit usable_memory(const std::filesystem::path& root);

}  // namespace rillclock
