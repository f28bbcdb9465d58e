#pragma once

#include <filesystem>
#include <string>

#include "rillclock/io/reference_system.hpp"

class OGRLayer;

namespace rillclock {

/// The reference system of a layer of shapes. Throws Error (inputs), with the command that states one, where it has none; `called` names
/// the file in the sentence: "point file inlets.gpkg".
[[nodiscard]] ReferenceSystem system_of_layer(OGRLayer& layer, const std::string& called, const std::filesystem::path& path);

}  // namespace rillclock
