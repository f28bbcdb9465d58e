#pragma once

#include <filesystem>
#include <string>

namespace rillclock {

/// The whole of a text file, without a byte order mark. Throws Error (inputs) where it is not there, is no plain file,
/// or is not UTF-8 (with the line).
[[nodiscard]] std::string read_text(const std::filesystem::path& path);

/// SHA-256 of a file's bytes, as 64 hexadecimal digits.
[[nodiscard]] std::string file_checksum(const std::filesystem::path& path);

/// SHA-256 of a folder that is one data set: of the lines "checksum  name" of all files in it, sorted by name, as `sha256sum` prints them.
[[nodiscard]] std::string folder_checksum(const std::filesystem::path& path);

}  // namespace rillclock
