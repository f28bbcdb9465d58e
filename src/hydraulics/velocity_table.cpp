#include "rillclock/hydraulics/velocity_table.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/core/csv_text.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/quantity_text.hpp"

namespace rillclock {
namespace {

constexpr std::string_view right_header =
    "write the header as in \"slope_percent,short grass_ft_s,paved_ft_s\" (slope_percent or slope; each surface's name "
    "with _ft_s or _m_s)";

/// A column's name taken apart.
struct Surface {
    std::string name;
    bool in_feet = false;
};

Surface surface_of(const std::string& column, std::string_view file) {
    const bool in_feet = column.ends_with("_ft_s");
    const std::size_t ending = in_feet ? 5 : 4;
    if ((in_feet || column.ends_with("_m_s")) && column.size() > ending)
        return {.name = column.substr(0, column.size() - ending), .in_feet = in_feet};
    throw input_error(std::string(file) + ": the column \"" + column + "\" does not name a surface and its unit; " +
                      std::string(right_header));
}

double slope_unit(const CsvTable& csv, std::string_view file) {
    const std::string& name = csv.header.front();
    if (name == "slope") return 1.0;
    if (name == "slope_percent") return 0.01;
    throw input_error(std::string(file) + ": the first column is named \"" + name + "\"; " + std::string(right_header));
}

std::string place(std::string_view file, const CsvRow& row, const std::string& column) {
    return std::string(file) + ", line " + std::to_string(row.line) + ", " + column;
}

void append_point(VelocityLine& line, const VelocityPoint& point, const std::string& where) {
    if (!line.points.empty() && !(point.velocity > line.points.back().velocity))
        throw input_error(where + ": the velocity does not grow with the slope; check the reading");
    line.points.push_back(point);
}

std::vector<double> slopes_of(const CsvTable& csv, std::string_view file) {
    const double unit = slope_unit(csv, file);
    std::vector<double> slopes;
    for (const CsvRow& row : csv.rows) {
        const std::string where = place(file, row, csv.header.front());
        const double slope = unit * number_from_text(row.fields.front(), {.subject = where, .example = "0.5"});
        if (!slopes.empty() && !(slope > slopes.back()))
            throw input_error(where + ": the slope does not rise from row to row; put the rows in rising order");
        slopes.push_back(slope);
    }
    return slopes;
}

VelocityLine line_of(const CsvTable& csv, std::size_t column, const std::vector<double>& slopes,
                     std::string_view file) {
    const Surface surface = surface_of(csv.header[column], file);
    VelocityLine line{.surface = surface.name, .points = {}};
    for (std::size_t i = 0; i < slopes.size(); ++i) {
        const std::string& field = csv.rows[i].fields[column];
        if (field.empty()) continue;
        const std::string where = place(file, csv.rows[i], csv.header[column]);
        const double number = number_from_text(field, {.subject = where, .example = "1.44"});
        const Speed velocity = surface.in_feet ? feet_per_second(number) : metres_per_second(number);
        append_point(line, {slopes[i], velocity}, where);
    }
    if (line.points.size() < 2)
        throw input_error(std::string(file) + ": the line of \"" + surface.name +
                          "\" has fewer than two points; between two at least it must be read");
    return line;
}

}  // namespace

namespace {

/// The upper of the two points between which a slope lies.
auto upper_point(const std::vector<VelocityPoint>& points, double slope) {
    return std::partition_point(points.begin() + 1, points.end() - 1,
                                [&](const VelocityPoint& p) { return p.slope < slope; });
}

double exponent_between(const VelocityPoint& below, const VelocityPoint& above) {
    return std::log(above.velocity / below.velocity) / std::log(above.slope / below.slope);
}

}  // namespace

Speed VelocityLine::at(double slope) const {
    const auto upper = upper_point(points, slope);
    const VelocityPoint& below = *(upper - 1);
    if (slope == upper->slope) return upper->velocity;
    return below.velocity * std::pow(slope / below.slope, exponent_between(below, *upper));
}

VelocityLaw VelocityLine::law_at(double slope) const {
    const auto upper = upper_point(points, slope);
    const VelocityPoint& below = *(upper - 1);
    const double exponent = exponent_between(below, *upper);
    return {.interval = static_cast<std::size_t>(upper - points.begin()) - 1,
            .at_slope_1 = below.velocity * std::pow(below.slope, -exponent),
            .exponent = exponent};
}

bool VelocityLine::holds(std::size_t interval, double slope) const {
    constexpr double leeway = 1e-4;
    const bool above_lower = interval == 0 || slope >= points[interval].slope * (1 - leeway);
    const bool below_upper = interval + 2 >= points.size() || slope <= points[interval + 1].slope * (1 + leeway);
    return above_lower && below_upper;
}

bool VelocityLine::covers(double slope) const {
    return slope >= points.front().slope && slope <= points.back().slope;
}

const VelocityLine* VelocityTable::find(std::string_view surface) const {
    const auto found =
        std::find_if(lines.begin(), lines.end(), [&](const VelocityLine& line) { return line.surface == surface; });
    return found == lines.end() ? nullptr : &*found;
}

VelocityTable parse_velocity_table(std::string_view text, std::string_view file) {
    const CsvTable csv = parse_csv(text, file);
    const std::vector<double> slopes = slopes_of(csv, file);
    VelocityTable table{.source = std::string(file), .lines = {}};
    if (csv.header.size() < 2) throw input_error(std::string(file) + " names no surface; " + std::string(right_header));
    for (std::size_t column = 1; column < csv.header.size(); ++column) {
        VelocityLine line = line_of(csv, column, slopes, file);
        if (table.find(line.surface))
            throw input_error(std::string(file) + " has two columns of \"" + line.surface + "\"; leave one");
        table.lines.push_back(std::move(line));
    }
    return table;
}

}  // namespace rillclock
