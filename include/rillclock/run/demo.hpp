#pragma once

#include <filesystem>
#include <string>
#include <vector>

namespace rillclock {

/// Writes the demo study, an invented town, into a folder that is empty or not there yet; returns the names of the files.
/// Throws Error (inputs) where the folder holds something, machine where it cannot be written.
std::vector<std::string> write_demo(const std::filesystem::path& folder);

}  // namespace rillclock
