#pragma once

#include <filesystem>
#include <memory>
#include <optional>
#include <string>

#include "rillclock/io/length_unit.hpp"
#include "rillclock/io/noted_source.hpp"
#include "rillclock/io/reference_system.hpp"
#include "rillclock/io/stored_type.hpp"

namespace rillclock {

/// How a file keeps its elevations, enough to write others the same way.
struct ElevationFormat {
    StoredType stored = StoredType::float32;
    std::optional<double> nodata = {};  ///< none also where the file's own cannot be held by its type
    double scale = 1.0;                 ///< elevation in `unit` = stored value × scale + offset
    double offset = 0.0;
    LengthUnit unit = {};

    /// What a fall between two stored values is multiplied by.
    [[nodiscard]] double metres_per_stored_unit() const { return scale * unit.metres_per_unit; }
    /// The least difference the file can hold, in metres; 0 for floating point.
    [[nodiscard]] double quantum_m() const { return is_integer(stored) ? metres_per_stored_unit() : 0.0; }
    /// What to write for void cells: the file's own nodata value, else -9999 for floating point and the value of an
    /// integer type that is farthest from zero (of two, the negative one).
    [[nodiscard]] double void_value() const;
};

/// What a study says of its elevations.
struct ElevationOptions {
    std::optional<int> band = {};          ///< from 1; needed only where the file has several
    std::optional<std::string> unit = {};  ///< the study's `elevation_unit`
};

/// A DEM, opened and understood, not yet read.
struct ElevationFile {
    /// Stored values (before scale and offset), exact; NaN where void; -0.0 comes as 0.0. Void are: nodata, compared in
    /// the file's own type; cells masked out; NaN and infinities; elevations beyond ±100 km.
    std::unique_ptr<NotedSource<double>> source;
    ReferenceSystem system;
    ElevationFormat format;
    Notices notices;

    [[nodiscard]] const Grid& grid() const { return source->grid(); }
};

/// Opens a DEM in any of the raster formats read here. A grid stored south-up is turned.
///
/// Throws Error (inputs), with the command or the study's line that mends it, where the file is no raster, is cut
/// short, is rotated, has no reference system, has several bands and none was chosen, has complex,
/// palette or 64-bit integer values, a scale that is not positive, 2³² − 1 cells or more, or a vertical unit that is
/// contradicted or cannot be told.
[[nodiscard]] ElevationFile open_elevation(const std::filesystem::path& path, const ElevationOptions& options = {});

}  // namespace rillclock
