#include "rillclock/tiles/usable_memory.hpp"

#include <sys/resource.h>

#include <fstream>
#include <limits>

#include "control_groups.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;

constexpr double no_limit = std::numeric_limits<double>::infinity();

void lower(MemoryLimit& limit, double bytes, const char* set_by) {
    if (bytes < limit.bytes) limit = {bytes, set_by};
}

/// "MemTotal:       24654328 kB".
double memory_of_machine(const fs::path& root) {
    std::ifstream file(root / "proc/meminfo");
    std::string name;
    double kilobytes = 0.0;
    while (file >> name >> kilobytes) {
        if (name == "MemTotal:") return kilobytes * 1024.0;
        std::getline(file, name);
    }
    return no_limit;
}

double number_in(const fs::path& path) {
    std::ifstream file(path);
    double bytes = 0.0;
    return file >> bytes ? bytes : no_limit;
}

void lower_by_containers(MemoryLimit& limit, const fs::path& root) {
    for (const ControlGroup& group : control_groups(root, "memory")) {
        const char* file = group.version == ControlGroup::Version::second ? "memory.max" : "memory.limit_in_bytes";
        lower(limit, number_in(group.folder / file), "the container");
    }
}

}  // namespace

MemoryLimit usable_memory(const fs::path& root) {
    MemoryLimit limit{memory_of_machine(root), "the machine"};
    lower_by_containers(limit, root);
    return limit;
}

MemoryLimit usable_memory() {
    MemoryLimit limit = usable_memory("/");
    rlimit space{};
    if (getrlimit(RLIMIT_AS, &space) == 0 && space.rlim_cur != RLIM_INFINITY) {
        lower(limit, static_cast<double>(space.rlim_cur), "the limit set for the process (ulimit -v)");
    }
    return limit;
}

}  // namespace rillclock
