#pragma once

#include <filesystem>
#include <string>

namespace rillclock {

/// Whether a text that should name a file names something else: an address, one of GDAL's own paths, or markup in a file's place.
[[nodiscard]] bool is_address(const std::string& text);

/// Throws Error (inputs) where a path is no plain local file with something in it; `called` is the file's name in the
/// sentence.
void check_local_file(const std::filesystem::path& path, const std::string& called);

/// What a file that no driver opens seems to be: "it looks like a web page", "it is a text" and so on, for messages.
[[nodiscard]] std::string seeming_kind(const std::filesystem::path& path);

}  // namespace rillclock
