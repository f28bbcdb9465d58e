#include "printed_table.hpp"

#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

/// Two intensities of three printed digits are each off by at most 0.5 %.
constexpr double hidden_by_rounding = 0.01;

void require_rising_periods(const PrintedTable& table) {
    const auto& years = table.return_periods;
    for (std::size_t i = 0; i < years.size(); ++i) {
        if (!(years[i] > 0)) throw fault_at(table.file, table.header_line, "a return period is not above zero");
        if (i > 0 && !(years[i] > years[i - 1]))
            throw fault_at(table.file, table.header_line,
                           "the return periods do not rise: " + significant(years[i], 6) + " years follow " +
                               significant(years[i - 1], 6) + "; put the columns in rising order");
    }
}

void require_rain(const PrintedTable& table, const PrintedRow& row) {
    for (std::size_t i = 0; i < row.values.size(); ++i) {
        const std::string where = row.label + ", " + significant(table.return_periods[i], 6) + " years: ";
        if (!(row.values[i] > 0))
            throw fault_at(table.file, row.line,
                           where + significant(row.values[i]) + " " + std::string(table.unit.name) +
                               " cannot be rain; every number must be above zero");
        if (i > 0 && !(row.values[i] >= row.values[i - 1]))
            throw fault_at(table.file, row.line,
                           where + significant(row.values[i]) + " is less than " + significant(row.values[i - 1]) +
                               " of the shorter return period before it; rain does not fall as the return period "
                               "grows");
    }
}

double depth_of(const PrintedTable& table, const PrintedRow& row, std::size_t period) {
    return table.unit.is_depth ? row.values[period] : row.values[period] * row.duration.si();
}

void require_depth_not_falling(const PrintedTable& table, const PrintedRow& before, const PrintedRow& row) {
    const double slack = table.unit.is_depth ? 0.0 : hidden_by_rounding;
    for (std::size_t i = 0; i < row.values.size(); ++i) {
        const std::string where = row.label + ", " + significant(table.return_periods[i], 6) + " years: ";
        if (!(depth_of(table, row, i) >= depth_of(table, before, i) * (1 - slack)))
            throw fault_at(table.file, row.line,
                           where + "the depth falls below that of " + before.label +
                               "; a longer storm of one return period brings no less rain: check the number, and "
                               "whether the file holds depths or intensities");
        if (!table.unit.is_depth && !(row.values[i] <= before.values[i]))
            throw fault_at(table.file, row.line,
                           where + "the intensity rises above that of " + before.label +
                               "; check the number, and whether the file holds depths or intensities");
    }
}

void require_order(const PrintedTable& table, const PrintedRow& before, const PrintedRow& row) {
    if (!(row.duration > before.duration))
        throw fault_at(table.file, row.line,
                       "the duration " + row.label + " does not follow " + before.label +
                           "; put the rows in rising order, each duration once");
    require_depth_not_falling(table, before, row);
}

void require_size(const PrintedTable& table) {
    if (table.return_periods.empty())
        throw fault_at(table.file, table.header_line, "the table has no return period; it needs at least one");
    if (table.rows.size() < 2)
        throw fault_at(table.file, table.header_line,
                       "the table has " + std::to_string(table.rows.size()) +
                           " durations below its header; between at least two must be read");
}

Intensity intensity_of(const PrintedTable& table, const PrintedRow& row, double value) {
    const double si = table.unit.in_si(value);
    return Intensity::from_si(table.unit.is_depth ? si / row.duration.si() : si);
}

}  // namespace

Error fault_at(std::string_view file, int line, const std::string& what) {
    return input_error(std::string(file) + ", line " + std::to_string(line) + ": " + what);
}

IntensityTable checked_table(const PrintedTable& printed) {
    require_size(printed);
    require_rising_periods(printed);
    IntensityTable table;
    table.return_periods = printed.return_periods;
    for (std::size_t i = 0; i < printed.rows.size(); ++i) {
        const PrintedRow& row = printed.rows[i];
        require_rain(printed, row);
        if (i > 0) require_order(printed, printed.rows[i - 1], row);
        table.durations.push_back(row.duration);
        for (const double value : row.values) table.intensities.push_back(intensity_of(printed, row, value));
    }
    return table;
}

}  // namespace rillclock
