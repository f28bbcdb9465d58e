#pragma once

#include <cmath>
#include <nlohmann/json.hpp>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/calculation_sheet.hpp"
#include "rillclock/deliver/report_units.hpp"

namespace rillclock {

using SheetJson = nlohmann::json;

/// What a sheet is made from: the whole result, one point of it, and the units it is reported in.
struct SheetMatter {
    const SheetJson& result;
    const SheetJson& outlet;
    ReportScale scale;

    [[nodiscard]] bool is_kinematic() const { return result.at("parameters").at("sheet").at("method") == "kinematic"; }
    [[nodiscard]] bool has_rain() const { return outlet.contains("storms"); }
    /// The storm that paths and segments are for. Only where there is rain by duration.
    [[nodiscard]] const SheetJson& path_storm() const;
    /// What was read of the rain that the point has: of its rain zone, where there are zones. Only where there is rain by duration.
    [[nodiscard]] const SheetJson& rain() const;
    /// An intensity in the units of the report, and their name.
    [[nodiscard]] std::string intensity_text(double mm_per_h, int digits = 7) const;
    [[nodiscard]] std::string intensity_unit() const { return is_us() ? "in/h" : "mm/h"; }
    [[nodiscard]] std::string flow_unit() const { return is_us() ? "ft3/s" : "m3/s"; }
    [[nodiscard]] bool is_us() const { return scale.length_unit() == "ft"; }
    /// The duration at which the intensity is read when this one is asked for. Only where there is rain by duration.
    [[nodiscard]] double read_at_min(double minutes) const;
    /// The 2-year 24-hour depth that its sheet flow takes. Only where that depends on it.
    [[nodiscard]] double two_year_depth_mm() const;
};

/// Adds lines to a sheet.
class SheetWriter {
public:
    void title(std::string text) { add(SheetLine::Kind::title, {}, std::move(text)); }
    void heading(std::string text) { add(SheetLine::Kind::heading, {}, std::move(text)); }
    void words(std::string text) { add(SheetLine::Kind::words, {}, std::move(text)); }
    void item(std::string text) { add(SheetLine::Kind::item, {}, std::move(text)); }
    void fact(std::string label, std::string text) { add(SheetLine::Kind::fact, std::move(label), std::move(text)); }
    void calculation(std::string label, const std::string& expression, const std::string& result) {
        add(SheetLine::Kind::calculation, std::move(label), expression + " = " + result);
    }
    [[nodiscard]] CalculationSheet take() { return std::move(sheet_); }

private:
    void add(SheetLine::Kind kind, std::string label, std::string text) {
        sheet_.push_back({kind, std::move(label), std::move(text)});
    }
    CalculationSheet sheet_;
};

/// Five significant digits, as sheets print what is calculated with.
inline std::string printed(double value) { return significant(value, 5); }
inline std::string printed_minutes(double s) { return printed(s / 60.0) + " min"; }
/// Of a number that may be missing.
inline bool is_number(const SheetJson& json, const char* key) { return json.contains(key) && json.at(key).is_number(); }
inline double number_of(const SheetJson& json, const char* key) { return json.at(key).get<double>(); }
inline std::string words_of(const SheetJson& json, const char* key) {
    return json.contains(key) && json.at(key).is_string() ? json.at(key).get<std::string>() : std::string();
}

/// An intensity that was read for a duration under a return period.
struct ReadIntensity {
    double return_period = 0.0;
    double minutes = 0.0;
    double mm_per_h = 0.0;
};

/// The line that reads it from the table or formula of the rain.
void write_reading(const SheetMatter& matter, const ReadIntensity& read, SheetWriter& sheet);
/// Where a method is from, by its id.
void write_source(const char* id, SheetWriter& sheet);

/// The parts of a sheet, in their order. `noticed`: the positions of the notices that concern the point.
void write_formulas(const SheetMatter& matter, SheetWriter& sheet);
void write_path(const SheetMatter& matter, const SheetJson& path, SheetWriter& sheet);
void write_storms(const SheetMatter& matter, SheetWriter& sheet);
void write_peaks(const SheetMatter& matter, const std::vector<std::size_t>& noticed, SheetWriter& sheet);
void write_methods(const SheetMatter& matter, SheetWriter& sheet);

}  // namespace rillclock
