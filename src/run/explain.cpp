#include "rillclock/run/explain.hpp"

#include <algorithm>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/deliver/calculation_sheet.hpp"
#include "rillclock/io/text_file.hpp"

namespace rillclock {
namespace {

std::filesystem::path result_file(const std::filesystem::path& folder) {
    if (!std::filesystem::is_directory(folder)) {
        throw input_error("there is no folder '" + folder.string() + "'; name a result folder that rillclock run has written");
    }
    const std::filesystem::path file = folder / "result.json";
    if (std::filesystem::exists(file)) return file;
    throw input_error("'" + folder.string() + "' is not a result: it holds no result.json; name a folder that rillclock run has written");
}

}  // namespace

std::string explanation(const std::filesystem::path& result_folder, const std::string& point) {
    const std::filesystem::path file = result_file(result_folder);
    const SheetBook book(read_text(file), file.string());
    const std::vector<std::string> names = book.names();
    const auto found = std::find(names.begin(), names.end(), point);
    if (found == names.end()) {
        throw input_error("no point of '" + result_folder.string() + "' is called '" + point + "'" +
                          did_you_mean(point, std::vector<std::string_view>(names.begin(), names.end())) +
                          "; their names are in tables/outlets.csv");
    }
    return sheet_text(book.sheet(static_cast<std::size_t>(found - names.begin())));
}

}  // namespace rillclock
