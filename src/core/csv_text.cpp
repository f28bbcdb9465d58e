#include "rillclock/core/csv_text.hpp"

#include <algorithm>

#include "rillclock/core/error.hpp"
#include "rillclock/core/trimmed.hpp"

namespace rillclock {
namespace {

constexpr std::string_view byte_order_mark = "\xEF\xBB\xBF";
constexpr std::string_view blanks = " \t";

/// Takes a CSV text apart from front to back; knows on which line it is.
class CsvReader {
public:
    CsvReader(std::string_view text, std::string_view file) : rest_(text), file_(file) {
        if (rest_.starts_with(byte_order_mark)) rest_.remove_prefix(byte_order_mark.size());
    }

    [[nodiscard]] bool at_end() const { return rest_.empty(); }

    CsvRow take_row() {
        CsvRow row{.line = line_, .fields = {}};
        do row.fields.push_back(take_field());
        while (take_if(','));
        take_line_end();
        return row;
    }

private:
    bool take_if(char wanted) {
        if (!rest_.starts_with(wanted)) return false;
        rest_.remove_prefix(1);
        return true;
    }

    void take_line_end() {
        if (rest_.starts_with("\r\n")) rest_.remove_prefix(1);
        if (take_if('\n')) ++line_;
    }

    [[nodiscard]] bool at_line_end() const {
        return rest_.empty() || rest_.starts_with('\n') || rest_.starts_with("\r\n");
    }

    std::string take_field() {
        const auto first = std::min(rest_.find_first_not_of(blanks), rest_.size());
        if (rest_.substr(first).starts_with('"')) {
            rest_.remove_prefix(first + 1);
            return take_quoted();
        }
        return take_plain();
    }

    std::string take_plain() {
        std::size_t length = 0;
        while (length < rest_.size() && rest_[length] != ',' && rest_[length] != '\n' &&
               !rest_.substr(length).starts_with("\r\n"))
            ++length;
        const std::string_view field = rest_.substr(0, length);
        rest_.remove_prefix(length);
        return std::string(trimmed(field, blanks));
    }

    std::string take_quoted() {
        const int opened = line_;
        std::string field;
        while (true) {
            const auto quote = rest_.find('"');
            if (quote == std::string_view::npos) throw fault(opened, "a quote is opened that does not close; close it");
            field += rest_.substr(0, quote);
            rest_.remove_prefix(quote + 1);
            if (!take_if('"')) break;
            field += '"';
        }
        line_ += static_cast<int>(std::count(field.begin(), field.end(), '\n'));
        rest_.remove_prefix(std::min(rest_.find_first_not_of(blanks), rest_.size()));
        if (!at_line_end() && !rest_.starts_with(','))
            throw fault(line_, "text follows a closing quote; write a quote inside a quoted field twice");
        return field;
    }

    [[nodiscard]] Error fault(int line, std::string_view what) const {
        return input_error(std::string(file_) + ", line " + std::to_string(line) + ": " + std::string(what));
    }

    std::string_view rest_;
    std::string_view file_;
    int line_ = 1;
};

bool is_blank(const CsvRow& row) {
    return row.fields.size() == 1 && row.fields.front().empty();
}

std::string place(std::string_view file, int line) {
    return std::string(file) + ", line " + std::to_string(line);
}

void refuse_other_separators(const CsvRow& header, std::string_view file) {
    if (header.fields.size() > 1) return;
    if (header.fields.front().find_first_of(";\t") == std::string::npos) return;
    throw input_error(place(file, header.line) +
                      ": fields are separated by semicolons or tabs; separate them by commas, with decimal points");
}

void require_width(const CsvRow& row, std::size_t width, std::string_view file) {
    if (row.fields.size() == width) return;
    throw input_error(place(file, row.line) + ": the row has " + std::to_string(row.fields.size()) +
                      " fields where the header has " + std::to_string(width) +
                      "; give every row as many fields as the header, and put fields that hold a comma in quotes");
}

bool needs_quotes(const std::string& field) {
    if (field.empty()) return false;
    const bool blank_at_an_end =
        blanks.find(field.front()) != std::string_view::npos || blanks.find(field.back()) != std::string_view::npos;
    return blank_at_an_end || field.find_first_of(",\"\r\n") != std::string::npos;
}

std::string quoted(const std::string& field) {
    std::string text = "\"";
    for (const char letter : field) text.append(letter == '"' ? 2U : 1U, letter);
    return text + '"';
}

}  // namespace

std::optional<std::size_t> CsvTable::column(std::string_view name) const {
    const auto found = std::find(header.begin(), header.end(), name);
    if (found == header.end()) return std::nullopt;
    return static_cast<std::size_t>(found - header.begin());
}

CsvTable parse_csv(std::string_view text, std::string_view file) {
    CsvReader reader(text, file);
    CsvTable table;
    while (!reader.at_end()) {
        CsvRow row = reader.take_row();
        if (is_blank(row)) continue;
        if (table.header.empty()) {
            refuse_other_separators(row, file);
            table.header = std::move(row.fields);
            continue;
        }
        require_width(row, table.header.size(), file);
        table.rows.push_back(std::move(row));
    }
    if (table.header.empty())
        throw input_error(std::string(file) + " holds no table; its first line must name the columns");
    return table;
}

std::string csv_line(std::span<const std::string> fields) {
    std::string line;
    for (const std::string& field : fields) {
        if (&field != fields.data()) line += ',';
        line += needs_quotes(field) ? quoted(field) : field;
    }
    return line + '\n';
}

}  // namespace rillclock
