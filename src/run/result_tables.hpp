#pragma once

#include <filesystem>
#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "rillclock/core/csv_text.hpp"

namespace rillclock {

/// A table of a result, asked by column and row.
class ResultTable {
public:
    /// Throws Error (inputs) where the file cannot be read as a table.
    explicit ResultTable(const std::filesystem::path& path);

    [[nodiscard]] std::size_t rows() const { return table_.rows.size(); }
    /// Empty where the table has no such column.
    [[nodiscard]] std::string text(std::size_t row, const std::string& column) const;
    /// None where there is no such column or the field is empty. Throws Error (inputs) for what is no number.
    [[nodiscard]] std::optional<double> number(std::size_t row, const std::string& column) const;
    /// What follows `stem` in the name of the first column that begins with it: its unit; none where no column does.
    [[nodiscard]] std::optional<std::string> ending_of(std::string_view stem) const;
    /// Rows by the text of a column, the first of equal ones.
    [[nodiscard]] std::map<std::string, std::size_t> rows_by(const std::string& column) const;

private:
    std::string file_;
    CsvTable table_;
};

/// The tables of a result that a comparison reads.
struct ResultTables {
    std::filesystem::path folder;
    ResultTable outlets;
    std::optional<ResultTable> peaks;

    /// Throws Error (inputs) where the folder is not there or is no result.
    static ResultTables of(const std::filesystem::path& folder);
};

}  // namespace rillclock
