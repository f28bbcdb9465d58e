#pragma once

#include <cmath>
#include <nlohmann/json.hpp>
#include <string>
#include <string_view>
#include <utility>

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

/// The parts of a sheet, in their order.
void write_formulas(const SheetMatter& matter, SheetWriter& sheet);
void write_path(const SheetMatter& matter, const SheetJson& path, SheetWriter& sheet);
void write_storms(const SheetMatter& matter, SheetWriter& sheet);
void write_methods(const SheetMatter& matter, SheetWriter& sheet);

}  // namespace rillclock
