#include "rillclock/run/explain.hpp"

#include <algorithm>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/deliver/calculation_sheet.hpp"
#include "rillclock/run/read_result.hpp"

namespace rillclock {

std::string explanation(const std::filesystem::path& result_folder, const std::string& point) {
    const SheetBook book(result_figures(result_folder), (result_folder / "result.json").string());
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
