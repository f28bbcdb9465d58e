#include <algorithm>

#include "rillclock/core/quantity.hpp"
#include "sheet_writer.hpp"

namespace rillclock {
namespace {

struct StormWriter {
    const SheetMatter& matter;
    const SheetJson& storm;
    SheetWriter& sheet;

    [[nodiscard]] std::string intensity_text(double mm_per_h) const { return matter.intensity_text(mm_per_h); }
    void write_reading(double minutes, double mm_per_h) const {
        rillclock::write_reading(matter, {.return_period = number_of(storm, "return_period"), .minutes = minutes, .mm_per_h = mm_per_h}, sheet);
    }
};

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
        to.write_reading(assumed, number_of(round, "intensity_mm_per_h"));
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
    to.write_reading(minutes, number_of(to.storm, "intensity_mm_per_h"));
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
