#include "rillclock/rainfall/rain_table_text.hpp"

#include <array>
#include <charconv>
#include <cmath>
#include <optional>

#include "printed_table.hpp"
#include "rillclock/core/csv_text.hpp"
#include "rillclock/core/quantity_text.hpp"

namespace rillclock {
namespace {

constexpr std::string_view right_header =
    "write the header as in \"duration_min,intensity_2yr_in_h,intensity_10yr_in_h\" (duration_min or duration_h; "
    "intensity_<years>yr_in_h, intensity_<years>yr_mm_h, depth_<years>yr_in or depth_<years>yr_mm, one of these "
    "throughout)";

struct ColumnEnding {
    std::string_view ending;
    RainUnit unit;
};

const std::array<ColumnEnding, 4> endings{{
    {"in_h", {.is_depth = false, .name = "in/h", .in_si = si_of_inches_per_hour}},
    {"mm_h", {.is_depth = false, .name = "mm/h", .in_si = si_of_millimetres_per_hour}},
    {"in", {.is_depth = true, .name = "in", .in_si = si_of_inches}},
    {"mm", {.is_depth = true, .name = "mm", .in_si = si_of_millimetres}},
}};

struct PeriodColumn {
    double years = 0.0;
    RainUnit unit;
};

/// "intensity_2yr_in_h" taken apart.
std::optional<PeriodColumn> period_column(std::string_view name) {
    const bool is_depth = name.starts_with("depth_");
    if (!is_depth && !name.starts_with("intensity_")) return std::nullopt;
    name.remove_prefix(name.find('_') + 1);
    PeriodColumn column;
    const auto [end, error] = std::from_chars(name.data(), name.data() + name.size(), column.years);
    name.remove_prefix(static_cast<std::size_t>(end - name.data()));
    if (error != std::errc() || !std::isfinite(column.years) || !name.starts_with("yr_")) return std::nullopt;
    name.remove_prefix(3);
    for (const ColumnEnding& known : endings)
        if (known.ending == name && known.unit.is_depth == is_depth) {
            column.unit = known.unit;
            return column;
        }
    return std::nullopt;
}

Duration duration_unit(const CsvTable& csv, std::string_view file) {
    const std::string& name = csv.header.front();
    if (name == "duration_min") return minutes(1);
    if (name == "duration_h") return hours(1);
    throw input_error(std::string(file) + ": the first column is named \"" + name +
                      "\", which does not say in which unit the durations are; " + std::string(right_header));
}

void read_header(const CsvTable& csv, PrintedTable& table) {
    for (std::size_t i = 1; i < csv.header.size(); ++i) {
        const auto column = period_column(csv.header[i]);
        if (!column)
            throw input_error(table.file + ": the column \"" + csv.header[i] + "\" is not that of a return period; " +
                              std::string(right_header));
        if (i > 1 && column->unit.name != table.unit.name)
            throw input_error(table.file + ": the column \"" + csv.header[i] + "\" is in " +
                              std::string(column->unit.name) + " where those before it are in " +
                              std::string(table.unit.name) + "; " + std::string(right_header));
        table.unit = column->unit;
        table.return_periods.push_back(column->years);
    }
}

double number_of(const CsvTable& csv, const CsvRow& row, std::size_t column, const std::string& file) {
    return number_from_text(row.fields[column],
                            {.subject = file + ", line " + std::to_string(row.line) + ", column " +
                                        std::to_string(column + 1) + " (" + csv.header[column] + ")",
                             .example = "4.8"});
}

PrintedRow printed_row(const CsvTable& csv, const CsvRow& row, Duration unit, const std::string& file) {
    const double duration = number_of(csv, row, 0, file);
    PrintedRow printed{.line = row.line,
                       .label = row.fields[0] + (unit == minutes(1) ? " min" : " h"),
                       .duration = duration * unit,
                       .values = {}};
    for (std::size_t i = 1; i < row.fields.size(); ++i) printed.values.push_back(number_of(csv, row, i, file));
    return printed;
}

}  // namespace

RainSource rain_from_table(std::string_view text, std::string_view file) {
    const CsvTable csv = parse_csv(text, file);
    PrintedTable printed{.file = std::string(file), .header_line = 1, .unit = {}, .return_periods = {}, .rows = {}};
    const Duration unit = duration_unit(csv, file);
    read_header(csv, printed);
    for (const CsvRow& row : csv.rows) printed.rows.push_back(printed_row(csv, row, unit, printed.file));
    IntensityTable table = checked_table(printed);
    RainEcho echo{.source = printed.file,
                  .kind = "table",
                  .quantity = printed.unit.is_depth ? "depth" : "intensity",
                  .unit = std::string(printed.unit.name),
                  .return_periods = table.return_periods,
                  .range = table.range()};
    return {.echo = std::move(echo), .law = std::move(table)};
}

}  // namespace rillclock
