#pragma once

#include <filesystem>
#include <string_view>
#include <vector>

namespace rillclock {

/// A folder in which a control group states its limits.
struct ControlGroup {
    enum class Version { first, second };
    std::filesystem::path folder;
    Version version = Version::second;
};

/// The control groups this process is in, and all that those are part of, as far as they may limit what `controller` ("memory", "cpu")
/// rules: as `proc/self/cgroup` under `root` has them. Folders need not be there. Within a container the group's own folder may be out
/// of sight, and its limit stand at the top, which is always among them.
[[nodiscard]] std::vector<ControlGroup> control_groups(const std::filesystem::path& root, std::string_view controller);

}  // namespace rillclock
