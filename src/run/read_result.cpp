#include "rillclock/run/read_result.hpp"

#include <algorithm>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/io/text_file.hpp"
#include "rillclock/io/value_raster.hpp"

namespace rillclock {
namespace {

void require_result(const std::filesystem::path& folder) {
    if (!std::filesystem::is_directory(folder)) {
        throw input_error("there is no folder '" + folder.string() + "'; name a result folder that rillclock run has written");
    }
    if (!std::filesystem::exists(folder / "result.json")) {
        throw input_error("'" + folder.string() + "' is not a result: it holds no result.json; name a folder that rillclock run has written");
    }
}

/// The names of the files of one ending in a folder, without it.
std::vector<std::string> stems_in(const std::filesystem::path& folder, const std::string& ending) {
    std::vector<std::string> stems;
    for (const auto& entry : std::filesystem::directory_iterator(folder)) {
        if (entry.path().extension() == ending) stems.push_back(entry.path().stem().string());
    }
    std::sort(stems.begin(), stems.end());
    return stems;
}

/// The file of that name in a part of a result.
std::filesystem::path file_of(const std::filesystem::path& folder, const char* part, const std::string& name, const std::string& ending) {
    require_result(folder);
    const std::vector<std::string> stems = stems_in(folder / part, ending);
    if (std::find(stems.begin(), stems.end(), name) != stems.end()) return folder / part / (name + ending);
    std::string list;
    for (const std::string& stem : stems) list += (list.empty() ? "" : ", ") + stem;
    throw input_error("'" + folder.string() + "' has no '" + name + "' in its " + part +
                      did_you_mean(name, std::vector<std::string_view>(stems.begin(), stems.end())) + "; there are " + list);
}

}  // namespace

std::string result_figures(const std::filesystem::path& folder) {
    require_result(folder);
    return read_text(folder / "result.json");
}

CsvTable result_table(const std::filesystem::path& folder, const std::string& name) {
    const std::filesystem::path file = file_of(folder, "tables", name, ".csv");
    return parse_csv(read_text(file), file.string());
}

Raster<double> result_raster(const std::filesystem::path& folder, const std::string& name) {
    const std::filesystem::path file = file_of(folder, "rasters", name, ".tif");
    const ValueRaster values = open_values(file);
    Raster<double> raster(values.grid().rows, values.grid().columns);
    values.source->read({.rows = raster.rows(), .columns = raster.columns()}, raster.values());
    return raster;
}

}  // namespace rillclock
