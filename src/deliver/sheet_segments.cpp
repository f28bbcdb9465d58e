#include <algorithm>
#include <array>
#include <set>

#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/methods.hpp"
#include "rillclock/hydraulics/open_water.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"
#include "sheet_writer.hpp"

namespace rillclock {
namespace {

/// What a path's segments are written with.
struct PathWriter {
    const SheetMatter& matter;
    SheetWriter& sheet;
    double running_s = 0.0;
    double index_m = 0.0;  ///< or distance from the divide, at the end of the segment before

    [[nodiscard]] std::string metres_text(double m) const { return printed(matter.scale.length(m)); }
    [[nodiscard]] std::string unit() const { return " " + matter.scale.length_unit(); }
    [[nodiscard]] std::string speed_unit() const { return matter.scale.length_unit() == "ft" ? " ft/s" : " m/s"; }
};

double length_of(const SheetJson& segment) { return number_of(segment, "length_m"); }
double formula_seconds(const SheetJson& segment) { return number_of(segment, "time_s") - number_of(segment, "ponded_time_s"); }

/// u printed so finely that what it grows by in the segment has five significant digits.
std::string printed_index(double u, double growth) {
    if (!(growth > 0)) return printed(u);
    return fixed_decimals(u, std::clamp(4 - static_cast<int>(std::floor(std::log10(growth))), 2, 12));
}

/// The constant of the sheet formula for times in minutes, in the units of the report.
std::string sheet_constant(const SheetMatter& matter) {
    const bool us = matter.scale.length_unit() == "ft";
    if (matter.is_kinematic()) {
        const double printed_us = number_of(matter.result.at("parameters").at("sheet"), "constant");
        const double si = printed_us / std::pow(in_metres(feet(1)), 0.6) / std::pow(in_millimetres(inches(1)), -0.4);
        return printed(us ? printed_us : si);
    }
    const double si = nrcs_sheet_constant / std::pow(in_metres(feet(1)), 0.8) * std::sqrt(in_millimetres(inches(1)));
    return "60 x " + printed(us ? nrcs_sheet_constant : si);
}

/// Seven digits, as iterations print it, so that the time holds.
std::string sheet_rain(const SheetMatter& matter) {
    if (matter.is_kinematic()) {
        return significant(matter.scale.intensity(millimetres_per_hour(number_of(matter.path_storm(), "intensity_mm_per_h"))), 7);
    }
    return printed(matter.scale.rain(millimetres(matter.two_year_depth_mm())));
}

/// Kinematic sheet flow from one distance below the divide to another.
void write_kinematic(const SheetJson& segment, PathWriter& to) {
    const double from_m = segment.at("sheet_distance_m").at(0).get<double>();
    const double to_m = segment.at("sheet_distance_m").at(1).get<double>();
    const ReportScale& scale = to.matter.scale;
    const std::string x0 = printed_index(scale.length(from_m), scale.length(to_m - from_m));
    const std::string x1 = printed_index(scale.length(to_m), scale.length(to_m - from_m));
    if (from_m - to.index_m > 1e-3 * std::max(1.0, from_m)) {
        to.sheet.words("A longer branch joins here: x goes on at " + x0 + to.unit() + ".");
    }
    to.index_m = to_m;
    to.sheet.calculation("x", x0 + " + " + to.metres_text(length_of(segment)), x1 + to.unit());
    const std::string rain = sheet_rain(to.matter);
    const bool runoff = is_number(segment, "runoff_coefficient");
    const std::string under = runoff ? "(" + printed(number_of(segment, "runoff_coefficient")) + " x " + rain + ")" : rain;
    to.sheet.calculation("T", sheet_constant(to.matter) + " x (" + printed(number_of(segment, "n")) + " / sqrt(" +
                                  printed(number_of(segment, "slope_equivalent")) + "))^0.6 x (" + x1 + "^0.6 - " + x0 + "^0.6) / " + under + "^0.4",
                         printed_minutes(formula_seconds(segment)));
}

void write_sheet_flow(const SheetJson& segment, PathWriter& to) {
    if (to.matter.is_kinematic()) return write_kinematic(segment, to);
    const double from_m = segment.at("sheet_index_m").at(0).get<double>();
    const double to_m = segment.at("sheet_index_m").at(1).get<double>();
    const ReportScale& scale = to.matter.scale;
    const double growth = scale.length(to_m - from_m);
    const std::string u0 = printed_index(scale.length(from_m), growth);
    const std::string u1 = printed_index(scale.length(to_m), growth);
    if (from_m - to.index_m > 1e-3 * std::max(1.0, from_m)) {
        to.sheet.words("A longer branch joins here: u goes on at " + u0 + to.unit() + ".");
    }
    to.index_m = to_m;
    to.sheet.calculation("u", u0 + " + " + printed(number_of(segment, "n")) + " x " + to.metres_text(length_of(segment)) + " / sqrt(" +
                                  printed(number_of(segment, "slope_equivalent")) + ")", u1 + to.unit());
    to.sheet.calculation("T", sheet_constant(to.matter) + " x (" + u1 + "^0.8 - " + u0 + "^0.8) / " + sheet_rain(to.matter) + "^0.5",
                         printed_minutes(formula_seconds(segment)));
}

void write_velocity(const SheetJson& segment, const std::string& expression, PathWriter& to) {
    const double speed = length_of(segment) / formula_seconds(segment);
    const std::string velocity = printed(to.matter.scale.speed(speed));
    to.sheet.calculation("V", expression, velocity + to.speed_unit());
    to.sheet.calculation("T", to.metres_text(length_of(segment)) + " / (60 x " + velocity + ")", printed_minutes(formula_seconds(segment)));
}

void write_shallow(const SheetJson& segment, PathWriter& to) {
    const std::string slope = printed(number_of(segment, "slope_equivalent"));
    const double exponent = number_of(segment, "slope_exponent");
    const std::string power = exponent == 0.5 ? "sqrt(" + slope + ")" : slope + "^" + printed(exponent);
    write_velocity(segment, printed(to.matter.scale.speed(number_of(segment, "k_m_per_s"))) + " x " + power, to);
}

void write_channel(const SheetJson& segment, PathWriter& to) {
    const std::string factor = to.matter.scale.length_unit() == "ft" ? printed(manning_factor_us_exact) : "1";
    write_velocity(segment, factor + " / " + printed(number_of(segment, "n")) + " x " +
                                to.metres_text(number_of(segment, "hydraulic_radius_m")) + "^(2/3) x sqrt(" +
                                printed(number_of(segment, "slope_equivalent")) + ")", to);
}

/// How the last cell of a channel carries the design storm.
void write_design_flow(const SheetJson& flow, PathWriter& to) {
    const ReportScale& scale = to.matter.scale;
    const bool us = scale.length_unit() == "ft";
    to.sheet.words("At its end the water arrives after " + printed(number_of(flow, "arrival_min")) + " min; the bottom is " +
                   to.metres_text(number_of(flow, "bottom_width_m")) + to.unit() + " wide, the sides " + printed(number_of(flow, "side_slope")) +
                   " to 1, the slope " + printed(number_of(flow, "slope")) + " and the normal depth " + to.metres_text(number_of(flow, "depth_m")) + to.unit() + ".");
    to.sheet.calculation("Q", printed(scale.intensity(millimetres_per_hour(number_of(flow, "intensity_mm_per_h")))) + " x " +
                                  printed(scale.area(number_of(flow, "runoff_area_m2"))) + (us ? " x 1.0083" : " / 360"),
                         printed(scale.flow(number_of(flow, "flow_m3_per_s"))) + (us ? " ft3/s" : " m3/s"));
}

void write_water(const SheetJson& segment, PathWriter& to) {
    write_velocity(segment, "sqrt(" + printed(to.matter.scale.length(standard_gravity)) + " x " +
                                to.metres_text(number_of(segment, "water_depth_m")) + ")", to);
}

void write_pond(const SheetJson& segment, PathWriter& to) {
    const double length = number_of(segment, "ponded_length_m");
    const double seconds = number_of(segment, "ponded_time_s");
    to.sheet.calculation("T ponded", to.metres_text(length) + " / (60 x " + printed(to.matter.scale.speed(length / seconds)) + ")",
                         printed_minutes(seconds));
}

/// What stands at the head of a segment: what it is and what goes into it.
std::string item_of(const SheetJson& segment, std::size_t number, const PathWriter& to) {
    const std::string regime = words_of(segment, "regime");
    const std::string cover = words_of(segment, "cover");
    std::string text = std::to_string(number) + ". " + regime + (cover.empty() ? "" : " over " + cover);
    text += ": L = " + to.metres_text(length_of(segment)) + to.unit();
    if (is_number(segment, "n")) text += ", n = " + printed(number_of(segment, "n"));
    if (is_number(segment, "k_m_per_s")) text += ", k = " + printed(to.matter.scale.speed(number_of(segment, "k_m_per_s"))) + to.speed_unit();
    if (is_number(segment, "hydraulic_radius_m")) text += ", R = " + to.metres_text(number_of(segment, "hydraulic_radius_m")) + to.unit();
    if (number_of(segment, "slope_equivalent") > 0) text += ", S = " + printed(number_of(segment, "slope_equivalent"));
    if (is_number(segment, "water_depth_m")) text += ", depth = " + to.metres_text(number_of(segment, "water_depth_m")) + to.unit();
    const double ponded = number_of(segment, "ponded_length_m");
    if (ponded > 0) text += "; besides " + to.metres_text(ponded) + to.unit() + " ponded";
    return text + "; fall " + to.metres_text(number_of(segment, "fall_m")) + to.unit();
}

void write_sum(const SheetJson& segment, PathWriter& to) {
    const double pond = number_of(segment, "ponded_time_s");
    std::string expression = fixed_decimals(to.running_s / 60.0, 4);
    if (length_of(segment) > 0) expression += " + " + printed(formula_seconds(segment) / 60.0);
    if (pond > 0) expression += " + " + printed(pond / 60.0);
    to.running_s += number_of(segment, "time_s");
    to.sheet.calculation("sum", expression, fixed_decimals(to.running_s / 60.0, 4) + " min");
}

void write_segment(const SheetJson& segment, std::size_t number, PathWriter& to) {
    to.sheet.item(item_of(segment, number, to));
    const std::string regime = words_of(segment, "regime");
    if (length_of(segment) > 0) {
        if (regime == "sheet") write_sheet_flow(segment, to);
        if (regime == "shallow") write_shallow(segment, to);
        if (regime == "channel") write_channel(segment, to);
        if (segment.contains("flow_at_end")) write_design_flow(segment.at("flow_at_end"), to);
        if (regime == "water") write_water(segment, to);
    }
    if (number_of(segment, "ponded_time_s") > 0) write_pond(segment, to);
    write_sum(segment, to);
}

/// The regimes of a point's two paths.
std::set<std::string> regimes_of(const SheetMatter& matter) {
    std::set<std::string> regimes;
    for (const char* path : {"governing_path", "longest_path"}) {
        for (const SheetJson& segment : matter.outlet.at(path).at("segments")) {
            regimes.insert(words_of(segment, "regime"));
            if (number_of(segment, "ponded_length_m") > 0) regimes.insert("ponded");
        }
    }
    return regimes;
}

/// Where the hydraulic radii of its channels come from.
std::set<std::string> sections_along(const SheetMatter& matter) {
    std::set<std::string> sections;
    for (const char* path : {"governing_path", "longest_path"}) {
        for (const SheetJson& segment : matter.outlet.at(path).at("segments")) {
            if (words_of(segment, "regime") == "channel") sections.insert(words_of(segment, "section"));
        }
    }
    return sections;
}

std::string sheet_words(const SheetMatter& matter) {
    const std::string m = matter.scale.length_unit();
    const std::string rain = m == "ft" ? " in" : " mm";
    if (matter.is_kinematic()) {
        const bool runoff = words_of(matter.result.at("parameters").at("sheet"), "rain") == "runoff";
        return "T = " + sheet_constant(matter) + " x (n / sqrt(S))^0.6 x (x1^0.6 - x0^0.6) / " + (runoff ? "(C x i)" : "i") +
               "^0.4 in min, with x = distance from the divide in " + m + " and i = " + sheet_rain(matter) + rain + "/h";
    }
    return "T = " + sheet_constant(matter) + " x (u1^0.8 - u0^0.8) / P2^0.5 in min, with u = sum of n L / sqrt(S) in " + m + " and P2 = " +
           sheet_rain(matter) + rain;
}

/// The covers that the point's paths run over, with where their values are from.
void write_cover_sources(const SheetMatter& matter, SheetWriter& sheet) {
    std::set<std::string> used;
    for (const char* path : {"governing_path", "longest_path"}) {
        for (const SheetJson& segment : matter.outlet.at(path).at("segments")) used.insert(words_of(segment, "cover"));
    }
    for (const SheetJson& cover : matter.result.at("data").at("cover_classes")) {
        const std::string source = words_of(cover, "source");
        if (!used.contains(words_of(cover, "name")) || source.empty()) continue;
        sheet.fact(words_of(cover, "name"), source + (cover.value("from_memory", false) ? " (value from memory)" : ""));
    }
}

}  // namespace

void write_source(const char* id, SheetWriter& sheet) {
    const Method* method = find_method(id);
    sheet.fact(std::string(method->name), std::string(method->source) + " (" + std::string(words(method->trust)) + ")");
}

const SheetJson& SheetMatter::path_storm() const {
    const SheetJson& period = result.at("parameters").at("rain").at("raster_return_period");
    const SheetJson& storms = outlet.at("storms");
    for (const SheetJson& storm : storms) {
        if (storm.at("return_period") == period) return storm;
    }
    return storms.at(0);
}

void write_formulas(const SheetMatter& matter, SheetWriter& sheet) {
    const std::set<std::string> regimes = regimes_of(matter);
    const std::string factor = matter.scale.length_unit() == "ft" ? printed(manning_factor_us_exact) : "1";
    sheet.heading("Formulas of the path and their sources");
    if (regimes.contains("sheet")) {
        sheet.fact("sheet", sheet_words(matter));
        write_source(matter.is_kinematic() ? "sheet-kinematic" : "sheet-nrcs", sheet);
    }
    if (regimes.contains("shallow")) {
        const std::string rule = words_of(matter.result.at("parameters"), "shallow");
        sheet.fact("shallow", rule == "chart" ? "V = k x S^b between two points of the chart, T = L / (60 V) in min" : "V = k x sqrt(S), T = L / (60 V) in min");
        write_source(rule == "by cover" ? "shallow-by-cover" : rule == "chart" ? "shallow-chart" : "shallow-paved-unpaved", sheet);
    }
    if (regimes.contains("channel")) {
        sheet.fact("channel", "V = " + factor + " / n x R^(2/3) x sqrt(S), T = L / (60 V) in min");
        write_source("channel-manning", sheet);
        const std::set<std::string> sections = sections_along(matter);
        if (sections.contains("by area")) write_source("channel-size-by-area", sheet);
        if (sections.contains("trapezoid")) write_source("channel-section", sheet);
        if (sections.contains("gutter")) write_source("gutter", sheet);
        if (words_of(matter.result.at("parameters").at("channel"), "flow") == "design storm") write_source("channel-design-storm", sheet);
    }
    if (regimes.contains("water")) {
        sheet.fact("water", "V = sqrt(g D), T = L / (60 V) in min");
        write_source("open-water", sheet);
    }
    if (regimes.contains("ponded")) {
        sheet.fact("ponded", "T = L / (60 V) in min, V the mean speed over cells of different depth");
        write_source("ponded", sheet);
    }
    write_source("slope-ahead", sheet);
    write_cover_sources(matter, sheet);
}

void write_path(const SheetMatter& matter, const SheetJson& path, SheetWriter& sheet) {
    PathWriter to{.matter = matter, .sheet = sheet};
    std::size_t number = 0;
    for (const SheetJson& segment : path.at("segments")) write_segment(segment, ++number, to);
    if (number == 0) sheet.words("The path is one cell long and takes no time.");
}

}  // namespace rillclock
