#pragma once

#include <filesystem>
#include <optional>
#include <string>

#include "rillclock/core/progress.hpp"

namespace rillclock {

/// How two results are compared.
struct CompareOptions {
    double tolerance = 0.05;                     ///< share by which a point may get worse
    std::optional<std::string> folder = {};      ///< where to write tables and the raster; none writes nothing
    bool replace = false;                        ///< whether a comparison that is already there may be replaced
};

/// What a comparison tells its caller.
struct CompareOutcome {
    std::string text;                            ///< for a terminal
    std::string json;
    std::size_t worse = 0;                       ///< points that get worse by more than the tolerance
    std::optional<std::filesystem::path> folder; ///< where it was written
};

/// Compares two results of the same points on the same grid: times (those peaks are made with, and over the ground), paths, the subareas that arrive last, coefficients and peaks, from their
/// tables, and travel times cell by cell.
///
/// Throws Error (inputs) where a folder is no result, where their points, grids or report units differ, and for a table that cannot be
/// read, each with what to do.
[[nodiscard]] CompareOutcome compare(const std::filesystem::path& before, const std::filesystem::path& after,
                                     const CompareOptions& options, const Progress& progress = {});

/// "5 %" as a share, for the command line. Throws Error (command line) for anything else.
[[nodiscard]] double tolerance_from_text(const std::string& text);

}  // namespace rillclock
