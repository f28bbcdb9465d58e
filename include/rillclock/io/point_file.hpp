#pragma once

#include <cstdint>
#include <filesystem>
#include <optional>
#include <string>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/io/reference_system.hpp"

namespace rillclock {

/// A point as the user's file gives it, in the target's coordinates.
struct NamedPlace {
    std::string name;
    Place place;
    std::int64_t feature = 0;  ///< from 1, in the order of the file
    std::vector<std::string> fields = {};  ///< texts of the fields asked for, in that order; empty where not set
};

/// How a file of points is read.
struct PointOptions {
    std::optional<std::string> layer = {};       ///< needed only where the file has several
    std::optional<std::string> name_field = {};  ///< default: the field called name, label or id, whichever comes first
    std::vector<std::string> fields = {};        ///< further fields to read
};

/// The points of a file, in its order, in the coordinates asked for.
struct PointFile {
    std::vector<NamedPlace> points;  ///< in the order of the file
    Notices notices;                 ///< features left out, one notice each
};

/// Reads points of any vector format that lies on the disk, as `read_shapes` does, and any reference system. A point
/// without a name is called "point N", N being its number in the file.
///
/// Features that are no single point, are empty, are not finite or have no image in `target` are left out with a
/// notice. Throws Error (inputs) where the file, layer or a field is not there, no feature is left, the reference system
/// is missing, or two points have one name.
[[nodiscard]] PointFile read_points(const std::filesystem::path& path, const PointOptions& options,
                                    const ReferenceSystem& target);

}  // namespace rillclock
