#include "rillclock/study/network_edits.hpp"

#include <algorithm>
#include <array>
#include <set>

#include "rillclock/core/csv_text.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/core/quantity_text.hpp"

namespace rillclock {
namespace {

/// One row, asked for by column name; knows where it stands for the sake of errors.
class Row {
public:
    Row(const CsvTable& table, const CsvRow& row, std::string_view file) : table_(table), row_(row), file_(file) {}

    [[nodiscard]] std::string text(std::string_view column) const {
        const auto place = table_.column(column);
        return place ? row_.fields[*place] : std::string();
    }
    [[nodiscard]] std::string needed(std::string_view column) const {
        std::string field = text(column);
        if (field.empty()) throw fault(column, "is empty");
        return field;
    }
    [[nodiscard]] QuantityAsked asked(std::string_view column, std::string example, Sign sign = Sign::positive) const {
        return {.subject = where() + " (" + std::string(column) + ")", .example = std::move(example), .sign = sign};
    }
    [[nodiscard]] double number(std::string_view column, const char* example, double greatest) const {
        const double value = number_from_text(needed(column), asked(column, example));
        if (!(value <= greatest)) throw fault(column, "is " + significant(value) + "; it must not pass " + significant(greatest));
        return value;
    }
    /// "pipes.csv, line 3".
    [[nodiscard]] std::string where() const { return std::string(file_) + ", line " + std::to_string(row_.line); }
    [[nodiscard]] Error fault(std::string_view column, const std::string& what) const {
        return input_error(where() + " (" + std::string(column) + ") " + what);
    }

private:
    const CsvTable& table_;
    const CsvRow& row_;
    std::string_view file_;
};

void require_columns(const CsvTable& table, std::string_view file, std::span<const std::string_view> known,
                     std::span<const std::string_view> needed) {
    for (const std::string& column : table.header) {
        if (std::find(known.begin(), known.end(), column) == known.end())
            throw input_error(std::string(file) + ", header: \"" + column + "\" is not a column of this table" + did_you_mean(column, known));
    }
    for (const std::string_view column : needed) {
        if (!table.column(column)) throw input_error(std::string(file) + ", header: the column " + std::string(column) + " is missing");
    }
}

constexpr double greatest_new_n = 1.0;
constexpr double greatest_slope = 10.0;

double slope_of(const Row& row, Length length) {
    if (!row.text("slope").empty()) {
        if (!row.text("invert_from").empty() || !row.text("invert_to").empty())
            throw row.fault("slope", "is given beside inverts; keep one of the two");
        return row.number("slope", "0.005", greatest_slope);
    }
    const Length from = length_from_text(row.needed("invert_from"), row.asked("invert_from", "101.4 ft", Sign::any));
    const Length to = length_from_text(row.needed("invert_to"), row.asked("invert_to", "100.2 ft", Sign::any));
    if (!(from > to)) throw row.fault("invert_from", "is not above invert_to; a pipe must fall from its inlet to its end");
    return (from - to) / length;
}

}  // namespace

std::vector<StatedPipe> parse_pipes(std::string_view text, std::string_view file) {
    constexpr std::array<std::string_view, 8> known{"from", "to", "length", "diameter", "n", "slope", "invert_from", "invert_to"};
    constexpr std::array<std::string_view, 5> needed{"from", "to", "length", "diameter", "n"};
    const CsvTable table = parse_csv(text, file);
    require_columns(table, file, known, needed);
    std::vector<StatedPipe> pipes;
    std::set<std::string> inlets;
    for (const CsvRow& csv : table.rows) {
        const Row row(table, csv, file);
        StatedPipe pipe{.from = row.needed("from"), .to = row.needed("to"), .length = {}, .pipe = {}, .bed = {}, .place = row.where()};
        if (!inlets.insert(pipe.from).second) throw row.fault("from", "is " + pipe.from + ", which has a pipe already; a point has one way on");
        if (pipe.from == pipe.to) throw row.fault("to", "is the point that the pipe comes from");
        pipe.length = length_from_text(row.needed("length"), row.asked("length", "120 ft"));
        pipe.pipe.diameter = length_from_text(row.needed("diameter"), row.asked("diameter", "18 in"));
        pipe.bed = {.n = row.number("n", "0.013", greatest_new_n), .slope = slope_of(row, pipe.length)};
        pipes.push_back(std::move(pipe));
    }
    if (pipes.empty()) throw input_error(std::string(file) + " holds no pipe; write one a line below the header, or leave pipes out");
    return pipes;
}

std::vector<PointOverride> parse_overrides(std::string_view text, std::string_view file) {
    constexpr std::array<std::string_view, 6> known{"point", "time", "way_time", "sheet_length", "n", "c"};
    constexpr std::array<std::string_view, 1> needed{"point"};
    const CsvTable table = parse_csv(text, file);
    require_columns(table, file, known, needed);
    std::vector<PointOverride> overrides;
    std::set<std::string> points;
    for (const CsvRow& csv : table.rows) {
        const Row row(table, csv, file);
        PointOverride made{.point = row.needed("point"), .place = row.where()};
        if (!points.insert(made.point).second) throw row.fault("point", "is " + made.point + ", which stands above already");
        if (!row.text("time").empty()) made.time = duration_from_text(row.text("time"), row.asked("time", "12 min", Sign::not_negative));
        if (!row.text("way_time").empty()) made.way_time = duration_from_text(row.text("way_time"), row.asked("way_time", "2 min", Sign::not_negative));
        if (!row.text("c").empty()) made.coefficient = number_from_text(row.text("c"), row.asked("c", "0.35", Sign::not_negative));
        if (made.coefficient && !(*made.coefficient <= 1)) throw row.fault("c", "is " + row.text("c") + "; a runoff coefficient lies between 0 and 1");
        if (!row.text("sheet_length").empty())
            made.overland.sheet_length = length_from_text(row.text("sheet_length"), row.asked("sheet_length", "80 ft", Sign::not_negative));
        if (!row.text("n").empty()) made.overland.n = row.number("n", "0.15", greatest_new_n);
        if (made.time && made.overland.is_any()) throw row.fault("time", "is given beside a sheet_length or n, which make a time of their own; keep one");
        if (!made.time && !made.way_time && !made.coefficient && !made.overland.is_any()) throw row.fault("point", "has no value beside it; state one, or remove the line");
        overrides.push_back(std::move(made));
    }
    if (overrides.empty()) throw input_error(std::string(file) + " holds no override; write one a line below the header, or leave overrides out");
    return overrides;
}

}  // namespace rillclock
