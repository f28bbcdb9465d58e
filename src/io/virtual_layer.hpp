#pragma once

#include <filesystem>

namespace rillclock {

/// Whether a file is a virtual layer: XML that names other files of shapes as its sources.
[[nodiscard]] bool is_virtual_layer(const std::filesystem::path& path);

/// Refuses virtual layers that do more than put local files of shapes together, before anything of them is opened.
///
/// Throws Error (inputs), naming the source, where one is missing, is no file or folder that the disk holds (an address, an archive), is of
/// a format that is not in `local_vector_drivers`, is read by SQL or with options of its own, or where virtual layers name each other in
/// a circle or more than 8 deep.
void check_virtual_layer(const std::filesystem::path& path);

}  // namespace rillclock
