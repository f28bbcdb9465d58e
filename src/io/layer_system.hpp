#pragma once

#include <filesystem>
#include <optional>
#include <string>

#include "rillclock/io/reference_system.hpp"

class GDALDataset;
class OGRLayer;

namespace rillclock {

/// Which layer of a file is wanted, and how sentences name the file.
struct LayerWish {
    std::optional<std::string> asked;   ///< its name, where one is stated
    std::string called;                 ///< the file: "point file inlets.gpkg"
    std::string key;                    ///< that chooses a layer: "points.layer"
    std::filesystem::path path;
};

/// The layer of a file that is asked for, or its only one with shapes: tables beside it, such as styles, do not count. Throws Error (inputs)
/// with the names of all where it has not that one, or several and none was asked for, and where there are no shapes.
[[nodiscard]] OGRLayer* layer_of(GDALDataset& file, const LayerWish& wish);

/// The reference system of a layer of shapes. Throws Error (inputs), with the command that states one, where it has none; `called` names
/// the file in the sentence: "point file inlets.gpkg".
[[nodiscard]] ReferenceSystem system_of_layer(OGRLayer& layer, const std::string& called, const std::filesystem::path& path);

}  // namespace rillclock
