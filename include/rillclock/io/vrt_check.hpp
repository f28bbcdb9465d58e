#pragma once

#include <filesystem>

namespace rillclock {

/// Whether a file is a virtual raster: XML that names other files as its tiles.
[[nodiscard]] bool is_virtual_raster(const std::filesystem::path& path);

/// Refuses virtual rasters that do more than put local raster files together, before anything of them is opened.
///
/// Throws Error (inputs), naming the tile, where a tile is missing, is not a plain local file (an address, an archive,
/// a text), is read as raw bytes or through a pixel function, or where virtual rasters name each other in a circle or
/// more than 8 deep.
void check_virtual_raster(const std::filesystem::path& path);

}  // namespace rillclock
