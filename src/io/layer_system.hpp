#pragma once

#include <filesystem>
#include <optional>
#include <string>

#include "rillclock/io/reference_system.hpp"

class GDALDataset;
class OGRLayer;

namespace rillclock {

/// The layer of a file that is asked for, or its only one. Throws Error (inputs) with the names of all where it has not that one, or several and
/// none was asked for; `called` names the file in the sentence, `say` is the key that chooses: "points.layer".
[[nodiscard]] OGRLayer* layer_of(GDALDataset& file, const std::optional<std::string>& asked, const std::string& called, const std::string& say);

/// The reference system of a layer of shapes. Throws Error (inputs), with the command that states one, where it has none; `called` names
/// the file in the sentence: "point file inlets.gpkg".
[[nodiscard]] ReferenceSystem system_of_layer(OGRLayer& layer, const std::string& called, const std::filesystem::path& path);

}  // namespace rillclock
