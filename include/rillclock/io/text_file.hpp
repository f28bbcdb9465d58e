#pragma once

#include <filesystem>
#include <string>

namespace rillclock {

/// The whole of a text file, without a byte order mark. Throws Error (inputs) where it is not there, is no plain file,
/// or is not UTF-8 (with the line).
[[nodiscard]] std::string read_text(const std::filesystem::path& path);

/// SHA-256 of a file's bytes, as 64 hexadecimal digits.
[[nodiscard]] std::string file_checksum(const std::filesystem::path& path);

}  // namespace rillclock
