#include <algorithm>

#include "rillclock/core/quantity.hpp"
#include "sheet_writer.hpp"

namespace rillclock {
namespace {

/// Two digits more than what is read with them has.
constexpr int reading_digits = 9;

std::string reading_number(double value) { return significant(value, reading_digits); }

const SheetJson* curve_of(const SheetMatter& matter, double return_period) {
    for (const SheetJson& curve : matter.rain().at("curves")) {
        if (number_of(curve, "return_period") == return_period) return &curve;
    }
    return nullptr;
}

/// Between two durations of a table: on a straight line on log-log paper.
std::string interpolation(const SheetJson& points, double minutes, const SheetMatter& matter) {
    std::size_t upper = 1;
    while (upper + 1 < points.size() && points.at(upper).at(0).get<double>() < minutes) ++upper;
    const auto text = [&](std::size_t i) { return matter.intensity_text(points.at(i).at(1).get<double>(), reading_digits); };
    const std::string t0 = reading_number(points.at(upper - 1).at(0).get<double>());
    const std::string t1 = reading_number(points.at(upper).at(0).get<double>());
    return text(upper - 1) + " x (" + reading_number(minutes) + " / " + t0 + ")^(ln(" + text(upper) + " / " + text(upper - 1) + ") / ln(" + t1 +
           " / " + t0 + "))";
}

std::string formula_part(const SheetJson& part, double minutes) {
    std::string top = reading_number(number_of(part, "weighted_factor"));
    const std::string time = reading_number(minutes / number_of(part, "time_unit_min"));
    const double e = number_of(part, "time_exponent");
    const std::string base = e == 1.0 ? time : time + "^" + reading_number(e);
    return top + " / (" + base + " + " + reading_number(number_of(part, "added")) + ")^" + reading_number(number_of(part, "outer_exponent"));
}

std::string reading(const SheetJson& curve, double minutes, const SheetMatter& matter) {
    if (curve.contains("points")) return interpolation(curve.at("points"), minutes, matter);
    std::string text;
    for (const SheetJson& part : curve.at("formula_parts")) {
        const double unit_mm_per_h = number_of(part, "intensity_unit_mm_per_h");
        const std::string unit = matter.intensity_text(unit_mm_per_h, reading_digits);
        text += (text.empty() ? "" : " + ") + (unit == "1" ? "" : unit + " x ") + formula_part(part, minutes);
    }
    return text;
}

}  // namespace

std::string SheetMatter::intensity_text(double mm_per_h, int digits) const {
    return significant(scale.intensity(millimetres_per_hour(mm_per_h)), digits);
}

double SheetMatter::read_at_min(double minutes) const {
    return std::max({minutes, number_of(result.at("parameters").at("rain"), "least_time_min"), number_of(rain(), "first_duration_min")});
}

void write_reading(const SheetMatter& matter, const ReadIntensity& read, SheetWriter& sheet) {
    const SheetJson* curve = curve_of(matter, read.return_period);
    if (curve == nullptr) return;
    const double at = matter.read_at_min(read.minutes);
    if (at > read.minutes) sheet.words("No intensity is read below " + printed(at) + " min.");
    sheet.calculation("i", reading(*curve, at, matter), matter.intensity_text(read.mm_per_h) + " " + matter.intensity_unit());
}

}  // namespace rillclock
