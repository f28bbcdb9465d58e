#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace rillclock {

/// One record of a CSV text, and the line of the text on which it begins (from 1).
struct CsvRow {
    int line = 0;
    std::vector<std::string> fields;
};

/// A table with a header: every row has as many fields as the header.
struct CsvTable {
    std::vector<std::string> header;
    std::vector<CsvRow> rows;

    /// The place of a column in the header (from 0), by its exact name; the first of two.
    [[nodiscard]] std::optional<std::size_t> column(std::string_view name) const;
};

/// Reads comma-separated text after RFC 4180: quoted fields may hold commas, line ends and doubled quotes. A byte order
/// mark is skipped, lines end with LF or CRLF, blank lines are skipped, blanks around unquoted fields are dropped.
/// `file` names the text in errors. Throws an input error, with the line, for a text without header, a row whose number
/// of fields is not the header's, a quote that does not close or is followed by more text, and fields separated by
/// semicolons or tabs.
[[nodiscard]] CsvTable parse_csv(std::string_view text, std::string_view file);

/// One record, ended by LF; fields are quoted only where they hold a comma, a quote, a line end or blanks at an end.
[[nodiscard]] std::string csv_line(std::span<const std::string> fields);

}  // namespace rillclock
