#include <array>
#include <optional>

#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/lump_methods.hpp"
#include "sheet_writer.hpp"

namespace rillclock {
namespace {

/// A lump method's formula with places for its numbers, in the units it was published in.
struct NumberedFormula {
    std::string_view id;
    std::string_view expression;  ///< of the time in `unit`
    std::string_view unit;
};

constexpr std::array numbered_formulas = {
    NumberedFormula{"lump-nrcs-lag", "{L ft}^0.8 x (1000 / {CN} - 9)^0.7 / (1140 x {Y %}^0.5)", "h"},
    NumberedFormula{"lump-kirpich", "{F} x 0.0078 x {L ft}^0.77 x {S}^-0.385", "min"},
    NumberedFormula{"lump-california", "(11.9 x {L mi}^3 / {H ft})^0.385", "h"},
    NumberedFormula{"lump-bransby-williams", "21.3 x {L mi} / ({A mi2}^0.1 x {S}^0.2)", "min"},
    NumberedFormula{"lump-bransby-williams-equal-area", "58.5 x {L km} / ({A km2}^0.1 x {Se m/km}^0.2)", "min"},
    NumberedFormula{"lump-giandotti", "(4 x sqrt({A km2}) + 1.5 x {L km}) / (0.8 x sqrt({Hm m}))", "h"},
    NumberedFormula{"lump-faa", "1.8 x (1.1 - {C}) x sqrt({L ft}) / {S %}^(1/3)", "min"},
    NumberedFormula{"lump-kerby", "0.828 x ({L ft} x {N})^0.467 x {S}^-0.235", "min"},
    NumberedFormula{"lump-kerby-kirpich",
                    "0.828 x ({Lo ft} x {N})^0.467 x {So}^-0.235 + 0.0078 x ({L ft} - {Lo ft})^0.77 x {S}^-0.385", "min"},
    NumberedFormula{"lump-kerby-kirpich-low-slope",
                    "0.828 x ({Lo ft} x {N})^0.467 x {So adjusted}^-0.235 + 0.0078 x ({L ft} - {Lo ft})^0.77 x {S adjusted}^-0.385",
                    "min"},
    NumberedFormula{"lump-izzard", "41.025 x (0.0007 x {i in/h} + {c}) x ({L ft} / {S})^(1/3) / {i in/h}^(2/3)", "min"},
    NumberedFormula{"lump-los-angeles",
                    "10^-0.507 x ((0.9 x {IMP} + (1 - {IMP}) x {Cu}) x {i in/h})^-0.519 x {L ft}^0.483 x {S}^-0.135", "min"},
    NumberedFormula{"lump-county-initial", "{K} x ({L ft}^3 / {H ft})^0.2", "min"},
    NumberedFormula{"lump-papadakis-kazan", "0.66 x sqrt({L ft}) x {n}^0.52 x {S}^-0.31 x {i in/h}^-0.38", "min"},
};

/// The number that stands for a place; none where the result lacks it.
std::optional<double> number_for(std::string_view place, const SheetJson& measures, const SheetJson& time) {
    const auto measure = [&](const char* key) -> std::optional<double> {
        return is_number(measures, key) ? std::optional(number_of(measures, key)) : std::nullopt;
    };
    const auto adjusted = [](std::optional<double> slope) { return slope ? std::optional(texas_low_slope(*slope)) : slope; };
    const auto scaled = [](std::optional<double> value, double factor) { return value ? std::optional(*value * factor) : value; };
    if (place == "L ft") return scaled(measure("longest_path_m"), in_feet(metres(1)));
    if (place == "L mi") return scaled(measure("longest_path_m"), in_feet(metres(1)) / 5280.0);
    if (place == "L km") return scaled(measure("longest_path_m"), 1e-3);
    if (place == "H ft") return scaled(measure("fall_m"), in_feet(metres(1)));
    if (place == "Hm m") return measure("mean_height_m");
    if (place == "A mi2") return scaled(measure("area_m2"), square_metres(1) / square_miles(1));
    if (place == "A km2") return scaled(measure("area_m2"), 1e-6);
    if (place == "S") return measure("path_slope");
    if (place == "S %") return scaled(measure("path_slope"), 100.0);
    if (place == "Se m/km") return scaled(measure("equal_area_slope"), 1000.0);
    if (place == "Y %") return scaled(measure("land_slope"), 100.0);
    if (place == "CN") return measure("curve_number");
    if (place == "C") return measure("runoff_coefficient");
    if (place == "n") return measure("overland_n");
    if (place == "F") return measure("kirpich_factor");
    if (place == "N") return measure("kerby_n");
    if (place == "c") return measure("izzard_c");
    if (place == "K") return measure("county_k");
    if (place == "IMP") return measure("impervious");
    if (place == "Cu") return measure("undeveloped_coefficient");
    if (place == "Lo ft") return scaled(measure("overland_length_m"), in_feet(metres(1)));
    if (place == "So") return measure("overland_slope");
    if (place == "S adjusted") return adjusted(measure("path_slope"));
    if (place == "So adjusted") return adjusted(measure("overland_slope"));
    if (place == "i in/h" && time.contains("iteration") && !time.at("iteration").empty()) {
        return in_inches_per_hour(millimetres_per_hour(number_of(time.at("iteration").back(), "intensity_mm_per_h")));
    }
    return std::nullopt;
}

/// The formula with its numbers, and what each of them is; none where a number is missing.
struct FilledFormula {
    std::string expression;
    std::string inputs;  ///< "L = 1234 ft, S = 0.021"
};

std::optional<FilledFormula> filled(const NumberedFormula& formula, const SheetJson& measures, const SheetJson& time) {
    FilledFormula answer;
    std::string_view rest = formula.expression;
    while (true) {
        const std::size_t open = rest.find('{');
        answer.expression += rest.substr(0, open);
        if (open == std::string_view::npos) return answer;
        const std::size_t close = rest.find('}', open);
        const std::string_view place = rest.substr(open + 1, close - open - 1);
        const std::optional<double> value = number_for(place, measures, time);
        if (!value) return std::nullopt;
        const std::string number = significant(*value, 6);
        answer.expression += number;
        const std::size_t blank = place.find(' ');
        rest.remove_prefix(close + 1);
        const auto at = static_cast<std::size_t>(place.data() - formula.expression.data()) - 1;
        if (formula.expression.find("{" + std::string(place) + "}") < at) continue;  // told before
        answer.inputs += (answer.inputs.empty() ? "" : ", ") + std::string(place.substr(0, blank)) + " = " + number;
        if (blank != std::string_view::npos) answer.inputs += std::string(place.substr(blank));
    }
}

const NumberedFormula* numbered_formula(std::string_view id) {
    for (const NumberedFormula& formula : numbered_formulas) {
        if (formula.id == id) return &formula;
    }
    return nullptr;
}

void write_time(const SheetJson& time, const SheetJson& measures, const LumpMethod& method, SheetWriter& sheet) {
    const double minutes = number_of(time, "time_min");
    const NumberedFormula* formula = numbered_formula(method.about.id);
    const std::optional<FilledFormula> numbers = formula == nullptr ? std::nullopt : filled(*formula, measures, time);
    if (!numbers) {
        sheet.fact("time", printed(minutes) + " min; not all its numbers stand in the result");
        return;
    }
    sheet.fact("with", numbers->inputs);
    const double in_unit = formula->unit == "h" ? minutes / 60.0 : minutes;
    sheet.calculation("T", numbers->expression, significant(in_unit, 5) + " " + std::string(formula->unit));
    if (formula->unit == "h") sheet.calculation("T", "60 x " + significant(in_unit, 5), printed(minutes) + " min");
}

void write_method(const SheetJson& time, const SheetJson& measures, SheetWriter& sheet) {
    const LumpMethod* method = find_lump_method(words_of(time, "method"));
    if (method == nullptr) return;
    const Method& about = method->about;
    const std::string why_not = words_of(time, "why_not");
    sheet.item(std::string(about.name) + (why_not.empty() ? "" : ", not applicable: " + why_not));
    sheet.fact("source", std::string(about.source) + " (" + std::string(words(about.trust)) + ")");
    if (is_number(time, "time_min")) write_time(time, measures, *method, sheet);
}

}  // namespace

void write_methods(const SheetMatter& matter, SheetWriter& sheet) {
    const SheetJson& methods = matter.outlet.at("methods");
    sheet.heading("Other methods beside it");
    sheet.words("Formulas that take the catchment as one lump, each in the units it was published in. They scatter: how far they lie apart is "
                "how far any one of them can be trusted.");
    if (methods.at("spread").is_object()) {
        const SheetJson& spread = methods.at("spread");
        sheet.fact("applicable", std::to_string(spread.at("applicable").get<int>()) + " of " + std::to_string(methods.at("times").size()) +
                                     ": lowest " + printed(number_of(spread, "lowest_min")) + " min, median " +
                                     printed(number_of(spread, "median_min")) + " min, highest " +
                                     printed(number_of(spread, "highest_min")) + " min; along the path " +
                                     printed(number_of(matter.outlet, "time_of_concentration_min")) + " min");
    } else {
        sheet.fact("applicable", "none");
    }
    for (const SheetJson& time : methods.at("times")) write_method(time, methods.at("measures"), sheet);
}

}  // namespace rillclock
