#pragma once

#include <filesystem>
#include <string>

#include "rillclock/core/progress.hpp"
#include "rillclock/io/result_folder.hpp"
#include "rillclock/run/compare.hpp"

namespace rillclock {

/// A result on disk, and how the user calls it.
struct NamedResult {
    std::filesystem::path folder;
    std::filesystem::path name;
};

/// What `compare` does, but for making and committing the folder: `into` takes tables and raster, where there is one.
[[nodiscard]] CompareOutcome compare_two(const NamedResult& before, const NamedResult& after, double tolerance, ResultFolder* into,
                                         const Progress& progress);

}  // namespace rillclock
