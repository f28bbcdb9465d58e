#include <algorithm>
#include <array>
#include <optional>

#include "rillclock/study/peaks.hpp"
#include "sheet_writer.hpp"

namespace rillclock {
namespace {

// A result has fewer digits than what it is made from, so that it holds to its last one.
constexpr int area_digits = 10;  // and those of C
constexpr int product_digits = 9;
constexpr int sum_digits = 8;
constexpr int coefficient_digits = 6;
constexpr int time_digits = 9;

/// One return period of a point's peaks.
struct PeakWriter {
    const SheetMatter& matter;
    const SheetJson& peak;
    std::size_t period = 0;
    SheetWriter& sheet;

    [[nodiscard]] const SheetJson& land() const { return matter.outlet.at("runoff_land"); }
    [[nodiscard]] double years() const { return number_of(peak, "return_period"); }
    [[nodiscard]] std::string unit() const { return " " + matter.scale.area_unit(); }
    [[nodiscard]] std::string area(double m2, int count) const { return significant(matter.scale.area(m2), count); }
    [[nodiscard]] std::string flow(const SheetJson& of, const char* key) const {
        return printed(matter.scale.flow(number_of(of, key))) + " " + matter.flow_unit();
    }
    /// A figure of a row of land under this return period.
    [[nodiscard]] double figure(const SheetJson& row, const char* key) const { return row.at(key).at(period).get<double>(); }
};

std::string years_text(double years) { return significant(years, 6) + (years == 1.0 ? " year" : " years"); }
std::string long_minutes(double minutes) { return significant(minutes, time_digits); }
std::string percent_text(double share, int count) { return significant(100.0 * share, count) + " %"; }
std::string c_text(double c) { return significant(c, area_digits); }

bool is_rounded(const SheetMatter& matter) { return words_of(matter.result.at("parameters").at("peaks"), "conversion") == "rounded"; }

/// What i x CA is multiplied with.
std::string conversion(const SheetMatter& matter) {
    if (matter.is_us()) return is_rounded(matter) ? "" : " x 43560 / 43200";
    return is_rounded(matter) ? " x 43200 / 43560 / 360" : " / 360";
}

std::string conversion_words(const SheetMatter& matter) {
    const std::string acre = is_rounded(matter) ? "rounded: an acre under an inch an hour is taken to give 1 ft3/s, where it gives 43560 / 43200"
                                                : "exact: an acre under an inch an hour gives 43560 / 43200 = 1.0083 ft3/s";
    if (matter.is_us()) return acre;
    return is_rounded(matter) ? acre + "; in mm/h, ha and m3/s the factor is 43200 / 43560 / 360 = 1 / 363" : "exact: mm/h times ha gives 1 / 360 m3/s";
}

/// "Pasture, soil B, slope 2 to 6 %".
std::string land_text(const SheetJson& row) {
    if (row.at("cover").is_null()) return std::to_string(row.at("kinds").get<int>()) + " more kinds of land";
    const std::string soil = words_of(row, "soil_group");
    const std::string slope = words_of(row, "land_slope");
    return words_of(row, "cover") + (soil.empty() ? "" : ", soil " + soil) + (slope.empty() ? "" : ", slope " + slope);
}

/// The smaller of 1 and Cf C in numbers; of land that was put together, its mean.
std::string used_text(const SheetJson& row, const PeakWriter& to) {
    if (row.at("frequency_factors").is_null()) return c_text(to.figure(row, "coefficients_with_factor"));
    return "min(1, " + c_text(to.figure(row, "frequency_factors")) + " x " + c_text(to.figure(row, "runoff_coefficients")) + ")";
}

std::string uncut_text(const SheetJson& row, const PeakWriter& to) {
    if (row.at("frequency_factors").is_null()) return c_text(to.figure(row, "coefficients_uncut"));
    return c_text(to.figure(row, "frequency_factors")) + " x " + c_text(to.figure(row, "runoff_coefficients"));
}

std::string product_text(const SheetJson& row, const PeakWriter& to) {
    return to.area(number_of(row, "area_m2") * to.figure(row, "coefficients_with_factor"), product_digits);
}

void write_land_row(const SheetJson& row, std::size_t number, const PeakWriter& to) {
    const std::string area = to.area(number_of(row, "area_m2"), area_digits);
    std::string facts = "A = " + area + to.unit() + ", C = " + c_text(to.figure(row, "runoff_coefficients"));
    if (row.at("frequency_factors").is_null()) {
        facts += " and the smaller of 1 and Cf C = " + c_text(to.figure(row, "coefficients_with_factor")) + ", both means by area";
    } else {
        facts += ", Cf = " + c_text(to.figure(row, "frequency_factors"));
    }
    to.sheet.fact(std::to_string(number) + ". " + land_text(row), facts);
    to.sheet.calculation("CA " + std::to_string(number), used_text(row, to) + " x " + area, product_text(row, to) + to.unit());
}

/// The terms of all rows of land, with plus between them.
template <class Term>
std::string sum_of(const PeakWriter& to, Term term) {
    std::string text;
    for (const SheetJson& row : to.land()) text += (text.empty() ? "" : " + ") + term(row);
    return text;
}

double whole_area_m2(const PeakWriter& to) {
    double m2 = 0.0;
    for (const SheetJson& row : to.land()) m2 += number_of(row, "area_m2");
    return m2;
}

std::string catchment_ca(const PeakWriter& to) { return to.area(number_of(to.peak, "runoff_area_m2"), sum_digits); }

void write_composites(const PeakWriter& to) {
    const auto area = [&](const SheetJson& row) { return to.area(number_of(row, "area_m2"), area_digits); };
    const auto runoff = [&](const SheetJson& row) { return product_text(row, to); };
    const auto plain = [&](const SheetJson& row) { return c_text(to.figure(row, "runoff_coefficients")) + " x " + area(row); };
    const auto uncut = [&](const SheetJson& row) { return uncut_text(row, to) + " x " + area(row); };
    const std::string whole = to.area(whole_area_m2(to), sum_digits);
    to.sheet.calculation("A", sum_of(to, area), whole + to.unit());
    to.sheet.calculation("CA", sum_of(to, runoff), catchment_ca(to) + to.unit());
    to.sheet.calculation("C before Cf", "(" + sum_of(to, plain) + ") / " + whole,
                         significant(number_of(to.peak, "runoff_coefficient_before_factor"), coefficient_digits));
    to.sheet.calculation("C with Cf", catchment_ca(to) + " / " + whole, significant(number_of(to.peak, "runoff_coefficient"), coefficient_digits));
    const bool is_cut = number_of(to.peak, "coefficient_uncut") > number_of(to.peak, "runoff_coefficient");
    if (!is_cut) return to.sheet.words("No Cf C passes 1, so nothing is cut, and C uncut is C with Cf.");
    to.sheet.calculation("C uncut", "(" + sum_of(to, uncut) + ") / " + whole,
                         significant(number_of(to.peak, "coefficient_uncut"), coefficient_digits));
}

/// Whether land has the same coefficients under two return periods.
bool is_same_land(const SheetJson& land, std::size_t a, std::size_t b) {
    constexpr std::array keys{"runoff_coefficients", "frequency_factors", "coefficients_with_factor", "coefficients_uncut"};
    return std::all_of(land.begin(), land.end(), [&](const SheetJson& row) {
        return std::all_of(keys.begin(), keys.end(), [&](const char* key) { return row.at(key).is_null() || row.at(key).at(a) == row.at(key).at(b); });
    });
}

/// The return period before this one whose land stands on the sheet and is the same; none where there is none.
std::optional<std::size_t> told_land(const PeakWriter& to) {
    const SheetJson& peaks = to.matter.outlet.at("peaks");
    for (std::size_t before = 0; before < to.period; ++before) {
        if (peaks.at(before).at("why_not").is_null() && is_same_land(to.land(), before, to.period)) return before;
    }
    return std::nullopt;
}

void write_land(const PeakWriter& to) {
    if (const std::optional<std::size_t> told = told_land(to)) {
        const double years = number_of(to.matter.outlet.at("peaks").at(*told), "return_period");
        to.sheet.fact("land", "C, Cf and CA of every class are those of " + years_text(years) + ", " + catchment_ca(to) + to.unit() + " of CA in all");
        return;
    }
    std::size_t number = 0;
    for (const SheetJson& row : to.land()) write_land_row(row, ++number, to);
    write_composites(to);
}

void write_flow(const std::string& ca, double mm_per_h, const std::string& flow, const PeakWriter& to) {
    to.sheet.calculation("Q", to.matter.intensity_text(mm_per_h) + " x " + ca + conversion(to.matter), flow);
}

void write_whole(const PeakWriter& to) {
    const SheetJson& whole = to.peak.at("whole_area");
    const double minutes = number_of(whole, "time_min");
    const double read_at = to.matter.read_at_min(minutes);
    to.sheet.fact("whole area", "the water has all arrived after " + long_minutes(minutes) + " min; time used " + long_minutes(read_at) + " min");
    const double mm_per_h = number_of(whole, "intensity_mm_per_h");
    write_reading(to.matter, {.return_period = to.years(), .minutes = minutes, .mm_per_h = mm_per_h}, to.sheet);
    write_flow(catchment_ca(to), mm_per_h, to.flow(whole, "flow_m3_per_s"), to);
}

bool is_part(const PeakWriter& to) {
    return number_of(to.peak.at("partial_area"), "flow_m3_per_s") > number_of(to.peak.at("whole_area"), "flow_m3_per_s");
}

void write_part(const PeakWriter& to) {
    const SheetJson& partial = to.peak.at("partial_area");
    const double minutes = number_of(partial, "duration_min");
    const double begins = number_of(partial, "begins_min");
    const std::string ca = to.area(number_of(partial, "runoff_area_m2"), sum_digits);
    to.sheet.fact("partial area", "rain of " + long_minutes(minutes) + " min makes the most of all durations; most CA arrives within the stretch from " +
                                      long_minutes(begins) + " min after the first water: " + ca + to.unit() + ", from " +
                                      percent_text(number_of(partial, "share_of_area"), 5) + " of the area");
    to.sheet.calculation("end of the stretch", long_minutes(begins) + " + " + long_minutes(minutes), significant(begins + minutes, sum_digits) + " min");
    const double share = number_of(partial, "runoff_area_m2") / number_of(to.peak, "runoff_area_m2");
    to.sheet.calculation("share of CA", ca + " / " + catchment_ca(to), significant(share, coefficient_digits));
    const double mm_per_h = number_of(partial, "intensity_mm_per_h");
    write_reading(to.matter, {.return_period = to.years(), .minutes = minutes, .mm_per_h = mm_per_h}, to.sheet);
    write_flow(ca, mm_per_h, to.flow(partial, "flow_m3_per_s"), to);
}

void write_makers(const PeakWriter& to) {
    const SheetJson& partial = to.peak.at("partial_area");
    for (const SheetJson& maker : partial.at("subareas")) {
        to.sheet.fact("made by the subarea of " + words_of(maker, "subarea"),
                      percent_text(number_of(maker, "share_of_window"), 5) + " of the CA within the stretch; of all CA it has " +
                          percent_text(number_of(maker, "share_of_runoff"), 5));
    }
    const auto named = partial.at("subareas").size();
    const auto all = partial.at("subareas_in_window").get<std::size_t>();
    if (all > named) to.sheet.fact("and by", std::to_string(all - named) + " more subareas with smaller shares");
}

void write_beside(const PeakWriter& to) {
    const SheetJson& partial = to.peak.at("partial_area");
    const SheetJson& cases = to.peak.at("handbook_cases");
    const double bin_s = number_of(to.matter.result.at("parameters").at("peaks"), "time_bin_s");
    to.sheet.fact("if times were not binned", "at least " + to.flow(partial, "flow_unbinned_at_least_m3_per_s") + ", at most " +
                                                  to.flow(partial, "flow_unbinned_at_most_m3_per_s") + "; bins are " + printed(bin_s) + " s wide");
    to.sheet.fact("shortcut of the handbooks", "subareas that have arrived alone " + to.flow(cases, "part_alone_m3_per_s") +
                                                   "; with a share of the later ones " + to.flow(cases, "part_and_share_m3_per_s") + ", from rain of " +
                                                   printed(number_of(cases, "time_min")) + " min; it takes each subarea of tables/handover.csv as a lump");
}

void write_period(const PeakWriter& to) {
    const std::string name = "Peak of " + years_text(to.years()) + ": ";
    if (!to.peak.at("why_not").is_null()) return to.sheet.item(name + "none, since " + words_of(to.peak, "why_not"));
    const bool part = is_part(to);
    to.sheet.item(name + to.flow(to.peak.at("partial_area"), "flow_m3_per_s") + (part ? ", from a part of the area" : ", from the whole area"));
    write_land(to);
    write_whole(to);
    if (part) {
        write_part(to);
    } else {
        to.sheet.fact("partial area", "no shorter rain makes more");
    }
    write_makers(to);
    write_beside(to);
}

constexpr std::array peak_notice_codes{"rational-area", "time-below-least", "coefficient-cut", "coefficient-outside-range",
                                       "frequency-factor-not-printed", "pipe-too-small", "no-peak"};

void write_flags(const SheetMatter& matter, const std::vector<std::size_t>& noticed, SheetWriter& sheet) {
    std::size_t told = 0;
    for (const std::size_t position : noticed) {
        const SheetJson& notice = matter.result.at("notices").at(position);
        const std::string code = words_of(notice, "notice");
        if (std::find(peak_notice_codes.begin(), peak_notice_codes.end(), code) == peak_notice_codes.end()) continue;
        if (told++ == 0) sheet.words("What peak flow was noticed for:");
        sheet.item(words_of(notice, "text"));
    }
    if (told == 0) sheet.words("No figure of these lies outside the limits of the method.");
}

/// The notice that the whole study has no peaks; else what such a study lacks. Not looked for among all notices, since those of
/// thousands of points would be gone through once for each of them.
std::string why_no_peaks(const SheetMatter& matter, const std::vector<std::size_t>& noticed) {
    for (const std::size_t position : noticed) {
        const SheetJson& notice = matter.result.at("notices").at(position);
        if (words_of(notice, "notice") == no_peaks_code) return words_of(notice, "text");
    }
    return "No peak flow was computed, since the study has no rain by duration: state file or formula and return_periods under [rain], and runoff "
           "coefficients in the cover book (a column c, c_a to c_d or land_use, or impervious_percent with peaks.coefficient = \"imperviousness\").";
}

}  // namespace

void write_peaks(const SheetMatter& matter, const std::vector<std::size_t>& noticed, SheetWriter& sheet) {
    sheet.heading("Peak flow");
    if (!matter.outlet.contains("peaks")) return sheet.words(why_no_peaks(matter, noticed));
    sheet.words("Q = i x CA, CA being the sum over the land of A times the smaller of 1 and Cf C: Cf is in it already. The whole area counts under "
                "rain as long as its time of concentration; a part of it may make more under shorter rain, and the greatest of all durations is the "
                "peak.");
    write_source("peak-rational", sheet);
    write_source("peak-partial-area", sheet);
    sheet.fact("conversion", conversion_words(matter));
    sheet.fact("the search", "every duration tried is in tables/time_area.csv in steps, the figures of all points in tables/peaks.csv");
    std::size_t period = 0;
    for (const SheetJson& peak : matter.outlet.at("peaks")) write_period({matter, peak, period++, sheet});
    write_flags(matter, noticed, sheet);
}

}  // namespace rillclock
