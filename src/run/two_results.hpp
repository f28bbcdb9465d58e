#pragma once

#include <filesystem>
#include <string>

#include "rillclock/core/progress.hpp"
#include "rillclock/deliver/comparison.hpp"
#include "rillclock/io/result_folder.hpp"
#include "rillclock/run/compare.hpp"

namespace rillclock {

/// A result on disk, and how the user calls it.
struct NamedResult {
    std::filesystem::path folder;
    std::filesystem::path name;
};

/// What came of a comparison, and the figures it was told from.
struct ComparedResults {
    CompareOutcome outcome;
    Comparison comparison;
};

/// What `compare` does, but for making and committing the folder: `into` takes tables and raster, where there is one.
[[nodiscard]] ComparedResults compare_two(const NamedResult& before, const NamedResult& after, double tolerance, ResultFolder* into,
                                         const Progress& progress);

}  // namespace rillclock
