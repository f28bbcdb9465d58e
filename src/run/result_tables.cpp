#include "result_tables.hpp"

#include "rillclock/core/error.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/io/text_file.hpp"

namespace rillclock {

ResultTable::ResultTable(const std::filesystem::path& path) : file_(path.string()), table_(parse_csv(read_text(path), file_)) {}

std::string ResultTable::text(std::size_t row, const std::string& column) const {
    const auto place = table_.column(column);
    return place ? table_.rows[row].fields[*place] : std::string();
}

std::optional<double> ResultTable::number(std::size_t row, const std::string& column) const {
    const std::string field = text(row, column);
    if (field.empty()) return std::nullopt;
    const std::string subject = file_ + ", line " + std::to_string(table_.rows[row].line) + " (" + column + ")";
    return number_from_text(field, {.subject = subject, .example = "12.5", .sign = Sign::any});
}

std::optional<std::string> ResultTable::ending_of(std::string_view stem) const {
    for (const std::string& name : table_.header) {
        if (name.starts_with(stem)) return name.substr(stem.size());
    }
    return std::nullopt;
}

std::map<std::string, std::size_t> ResultTable::rows_by(const std::string& column) const {
    std::map<std::string, std::size_t> places;
    for (std::size_t row = 0; row < rows(); ++row) places.emplace(text(row, column), row);
    return places;
}

ResultTables ResultTables::of(const std::filesystem::path& folder) {
    if (!std::filesystem::is_directory(folder)) {
        throw input_error("there is no folder '" + folder.string() + "'; name a result folder that rillclock run has written");
    }
    const std::filesystem::path outlets = folder / "tables/outlets.csv";
    if (!std::filesystem::exists(folder / "result.json") || !std::filesystem::exists(outlets)) {
        throw input_error("'" + folder.string() + "' is not a result of a run: it lacks result.json or tables/outlets.csv; name a folder that "
                          "rillclock run has written");
    }
    ResultTables tables{.folder = folder, .outlets = ResultTable(outlets), .peaks = {}};
    const std::filesystem::path peaks = folder / "tables/peaks.csv";
    if (std::filesystem::exists(peaks)) tables.peaks.emplace(peaks);
    return tables;
}

}  // namespace rillclock
