#include "control_groups.hpp"

#include <fstream>
#include <sstream>
#include <string>

namespace rillclock {
namespace {

namespace fs = std::filesystem;

/// "cpu" among "cpu,cpuacct".
bool has(const std::string& controllers, std::string_view controller) {
    std::istringstream list(controllers);
    for (std::string one; std::getline(list, one, ',');) {
        if (one == controller) return true;
    }
    return false;
}

void add_with_parents(const fs::path& top, const std::string& group, ControlGroup::Version version, std::vector<ControlGroup>& groups) {
    for (fs::path at = fs::path(group).relative_path(); !at.empty(); at = at.parent_path()) groups.push_back({top / at, version});
    groups.push_back({top, version});
}

}  // namespace

/// Lines of proc/self/cgroup: "0::/group" for the second version, "8:memory:/group" or "4:cpu,cpuacct:/group" for the first.
std::vector<ControlGroup> control_groups(const fs::path& root, std::string_view controller) {
    const fs::path top = root / "sys/fs/cgroup";
    std::vector<ControlGroup> groups;
    std::ifstream file(root / "proc/self/cgroup");
    for (std::string line; std::getline(file, line);) {
        std::istringstream fields(line);
        std::string number;
        std::string controllers;
        std::string group;
        std::getline(fields, number, ':');
        std::getline(fields, controllers, ':');
        std::getline(fields, group);
        if (controllers.empty()) add_with_parents(top, group, ControlGroup::Version::second, groups);
        if (!has(controllers, controller)) continue;
        // Controllers that are ruled together have one folder, named by all of them; most machines link their single names to it.
        add_with_parents(top / controllers, group, ControlGroup::Version::first, groups);
        if (controllers != controller) add_with_parents(top / controller, group, ControlGroup::Version::first, groups);
    }
    return groups;
}

}  // namespace rillclock
