#pragma once

#include <filesystem>
#include <string>

namespace rillclock {

/// The calculation sheet of one point of a result, as text for a terminal.
///
/// Throws Error (inputs) where the folder is no result, and where no point has that name, with the nearest that has.
[[nodiscard]] std::string explanation(const std::filesystem::path& result_folder, const std::string& point);

}  // namespace rillclock
