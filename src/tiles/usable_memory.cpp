#include "rillclock/tiles/usable_memory.hpp"

#include <sys/resource.h>

#include <fstream>
#include <limits>
#include <sstream>

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

/// Where limits of memory stand in a hierarchy of control groups.
struct Hierarchy {
    fs::path top;
    const char* file;
};

/// Takes the limits of a group and of all that it is part of. Within a container the group's own folder may be out of sight, and its
/// limit stand at the top.
void lower_by_groups(MemoryLimit& limit, const Hierarchy& hierarchy, const std::string& group) {
    for (fs::path at = fs::path(group).relative_path(); !at.empty(); at = at.parent_path()) {
        lower(limit, number_in(hierarchy.top / at / hierarchy.file), "the container");
    }
    lower(limit, number_in(hierarchy.top / hierarchy.file), "the container");
}

/// Lines of proc/self/cgroup: "0::/group" for the second version, "8:memory:/group" for the first.
void lower_by_containers(MemoryLimit& limit, const fs::path& root) {
    const fs::path groups = root / "sys/fs/cgroup";
    std::ifstream file(root / "proc/self/cgroup");
    for (std::string line; std::getline(file, line);) {
        std::istringstream fields(line);
        std::string number;
        std::string controllers;
        std::string group;
        std::getline(fields, number, ':');
        std::getline(fields, controllers, ':');
        std::getline(fields, group);
        if (controllers.empty()) lower_by_groups(limit, {groups, "memory.max"}, group);
        if (controllers == "memory") lower_by_groups(limit, {groups / "memory", "memory.limit_in_bytes"}, group);
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
