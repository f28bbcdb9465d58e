#pragma once

#include <span>
#include <string_view>

namespace rillclock {

/// A file of the demo study, kept in the program itself.
struct DemoFile {
    std::string_view name;
    std::string_view content;
};

/// All of them; the list is made by CMake from `data-demo`.
[[nodiscard]] std::span<const DemoFile> demo_files();

}  // namespace rillclock
