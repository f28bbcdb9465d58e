#include <algorithm>

#include "rillclock/core/quantity.hpp"
#include "sheet_writer.hpp"

namespace rillclock {
namespace {

struct StormWriter {
    const SheetMatter& matter;
    const SheetJson& storm;
    SheetWriter& sheet;

    [[nodiscard]] double intensity(double mm_per_h) const { return matter.scale.intensity(millimetres_per_hour(mm_per_h)); }
    [[nodiscard]] std::string unit() const { return matter.scale.length_unit() == "ft" ? " in/h" : " mm/h"; }
    [[nodiscard]] std::string intensity_text(double mm_per_h) const { return significant(intensity(mm_per_h), 7); }
};

const SheetJson* curve_of(const StormWriter& to) {
    for (const SheetJson& curve : to.matter.rain().at("curves")) {
        if (curve.at("return_period") == to.storm.at("return_period")) return &curve;
    }
    return nullptr;
}

/// Minutes at which the intensity is read when these are asked for.
double read_at(const StormWriter& to, double minutes) {
    const SheetJson& parameters = to.matter.result.at("parameters").at("rain");
    return std::max({minutes, number_of(parameters, "least_time_min"), number_of(to.matter.rain(), "first_duration_min")});
}

/// Between two durations of a table: on a straight line on log-log paper.
std::string interpolation(const SheetJson& points, double minutes, const StormWriter& to) {
    std::size_t upper = 1;
    while (upper + 1 < points.size() && points.at(upper).at(0).get<double>() < minutes) ++upper;
    const auto text = [&](std::size_t i) { return to.intensity_text(points.at(i).at(1).get<double>()); };
    const std::string t0 = significant(points.at(upper - 1).at(0).get<double>(), 7);
    const std::string t1 = significant(points.at(upper).at(0).get<double>(), 7);
    return text(upper - 1) + " x (" + significant(minutes, 8) + " / " + t0 + ")^(ln(" + text(upper) + " / " + text(upper - 1) + ") / ln(" + t1 +
           " / " + t0 + "))";
}

std::string formula_part(const SheetJson& part, double minutes) {
    std::string top = significant(number_of(part, "weighted_factor"), 8);
    const std::string time = significant(minutes / number_of(part, "time_unit_min"), 8);
    const double e = number_of(part, "time_exponent");
    const std::string base = e == 1.0 ? time : time + "^" + significant(e, 8);
    return top + " / (" + base + " + " + significant(number_of(part, "added"), 8) + ")^" + significant(number_of(part, "outer_exponent"), 8);
}

std::string reading(const SheetJson& curve, double minutes, const StormWriter& to) {
    if (curve.contains("points")) return interpolation(curve.at("points"), minutes, to);
    std::string text;
    for (const SheetJson& part : curve.at("formula_parts")) {
        const double unit = to.intensity(number_of(part, "intensity_unit_mm_per_h"));
        text += (text.empty() ? "" : " + ") + (unit == 1.0 ? "" : significant(unit, 8) + " x ") + formula_part(part, minutes);
    }
    return text;
}

void write_reading(double minutes, double mm_per_h, const StormWriter& to) {
    const SheetJson* curve = curve_of(to);
    if (curve == nullptr) return;
    const double at = read_at(to, minutes);
    if (at > minutes) to.sheet.words("No intensity is read below " + printed(at) + " min.");
    to.sheet.calculation("i", reading(*curve, at, to), to.intensity_text(mm_per_h) + to.unit());
}

/// The time under another intensity of the same cell: its sheet flow goes with i^-0.4, the rest stays. A round in which another cell comes
/// last is told as such.
void write_computed(const SheetJson& round, const StormWriter& to) {
    const double settled = number_of(to.storm, "intensity_mm_per_h");
    const double sheet_min = number_of(to.storm, "sheet_time_s") / 60.0;
    const bool whole = words_of(to.matter.result.at("parameters").at("sheet"), "storm") == "whole path";
    const double rest_min = whole ? number_of(to.storm, "time_s") / 60.0 - sheet_min : 0.0;
    const double computed = number_of(round, "computed_min");
    const double i = number_of(round, "intensity_mm_per_h");
    const double same_cell = sheet_min * std::pow(settled / i, 0.4) + rest_min;
    if (!(std::abs(same_cell / computed - 1) < 5e-4)) {
        to.sheet.fact("T", printed(computed) + " min, from another cell, which comes last under this intensity");
        return;
    }
    std::string expression = significant(sheet_min, 7) + " x (" + to.intensity_text(settled) + " / " + to.intensity_text(i) + ")^0.4";
    if (whole) expression += " + " + significant(rest_min, 7);
    to.sheet.calculation("T", expression, printed(computed) + " min");
}

void write_rounds(const StormWriter& to) {
    std::size_t number = 0;
    for (const SheetJson& round : to.storm.at("iteration")) {
        const double assumed = number_of(round, "assumed_min");
        to.sheet.item("round " + std::to_string(++number) + ": assume " + printed(assumed) + " min");
        write_reading(assumed, number_of(round, "intensity_mm_per_h"), to);
        write_computed(round, to);
    }
}

void write_storm(const StormWriter& to) {
    const std::string name = significant(number_of(to.storm, "return_period"), 6) + "-year storm";
    const double minutes = number_of(to.storm, "time_s") / 60.0;
    if (to.storm.contains("iteration")) {
        to.sheet.item(name + ": " + printed(minutes) + " min, of which " + printed(number_of(to.storm, "sheet_time_s") / 60.0) +
                      " min are sheet flow; found by rounds");
        write_rounds(to);
        return;
    }
    to.sheet.item(name + ", as long as the path takes: " + printed(minutes) + " min");
    if (!is_number(to.storm, "intensity_mm_per_h")) {
        to.sheet.words("The rain does not reach that duration.");
        return;
    }
    write_reading(minutes, number_of(to.storm, "intensity_mm_per_h"), to);
}

}  // namespace

const SheetJson& SheetMatter::rain() const {
    const SheetJson& parameters = result.at("parameters").at("rain");
    if (!outlet.contains("rain_zone")) return parameters;
    for (const SheetJson& zone : parameters.at("zones")) {
        if (zone.at("source") == outlet.at("rain_zone").at("rain")) return zone;
    }
    return parameters;
}

double SheetMatter::two_year_depth_mm() const {
    if (has_rain() && is_number(rain(), "rain_2_year_24_hour_mm")) return number_of(rain(), "rain_2_year_24_hour_mm");
    return number_of(result.at("parameters").at("sheet"), "rain_2_year_24_hour_mm");
}

void write_storms(const SheetMatter& matter, SheetWriter& sheet) {
    const SheetJson& rain = matter.rain();
    sheet.heading("Rain");
    sheet.fact("source", words_of(rain, "source") + ": " + words_of(rain, "kind") + ", " + words_of(rain, "quantity") + " in " +
                             words_of(rain, "unit"));
    if (matter.outlet.contains("rain_zone")) {
        const SheetJson& zone = matter.outlet.at("rain_zone");
        sheet.fact("rain zone", words_of(zone, "rain") + ", " + printed(100.0 * number_of(zone, "share_of_area")) + " % of the catchment");
    }
    if (matter.is_kinematic()) {
        sheet.words("Sheet flow depends on the intensity, and the intensity on how long the storm lasts: assume a time, read the intensity, "
                    "compute the time, assume that, until two agree to 0.1 s. The time of sheet flow goes with i^-0.4; the rest of the path "
                    "does not change.");
    }
    for (const SheetJson& storm : matter.outlet.at("storms")) write_storm({matter, storm, sheet});
}

}  // namespace rillclock
