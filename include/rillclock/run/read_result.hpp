#pragma once

#include <filesystem>
#include <string>

#include "rillclock/core/csv_text.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// `result.json` of a result folder, its text. Throws Error (inputs) where the folder is not there or is no result.
[[nodiscard]] std::string result_figures(const std::filesystem::path& folder);

/// A table of a result by its name without ending, "segments"; the columns stand in README. Throws Error (inputs) as
/// `result_figures`, and where there is no such table, with the nearest name that there is.
[[nodiscard]] CsvTable result_table(const std::filesystem::path& folder, const std::string& name);

/// A raster of a result by its name without ending, "travel_time": rows × columns from the north-west corner, NaN where it has no
/// value. Numbers mean what README says of the file. Throws Error (inputs) as `result_table`.
[[nodiscard]] Raster<double> result_raster(const std::filesystem::path& folder, const std::string& name);

}  // namespace rillclock
