#include <algorithm>

#include "chart.hpp"
#include "html_text.hpp"
#include "input_words.hpp"
#include "report_parts.hpp"
#include "rillclock/deliver/uncertainty_tables.hpp"

namespace rillclock {
namespace {

using Cells = std::vector<std::string>;

constexpr std::size_t most_inputs = 8;
constexpr std::size_t most_last = 5;

std::string range_note(double from_s, double to_s) { return shown_minutes(from_s) + " to " + shown_minutes(to_s) + " min"; }

ChartRow all_inputs(const PointUncertainty& point) {
    return {.label = "all inputs together", .note = range_note(point.fast_s, point.slow_s),
            .parts = {{point.fast_s / 60.0, point.slow_s / 60.0, "reach"}, {point.percentile_s.front() / 60.0, point.percentile_s.back() / 60.0, "bar"},
                      {0.0, point.percentile_s[told_percentiles.size() / 2] / 60.0, "tick"}}};
}

ChartRow one_input(const PointUncertainty& point, const InputEffect& effect, const UncertainInput& input) {
    const double least = std::min({effect.low_s, effect.high_s, point.typical_s});
    const double greatest = std::max({effect.low_s, effect.high_s, point.typical_s});
    return {.label = input.name, .note = range_note(least, greatest), .parts = {{least / 60.0, greatest / 60.0, "open"}}};
}

Cells effect_cells(const StudyResult& result, const InputEffect& effect) {
    const ReportScale scale(result.study.report_units);
    const UncertainInput& input = result.uncertainty->inputs[effect.input];
    const std::string unit = unit_text(scale, input);
    return {html_text(input.name), unit.empty() ? "–" : unit, value_text(scale, input, input.low), value_text(scale, input, input.typical),
            value_text(scale, input, input.high), fixed_decimals(effect.low_s / 60.0, 2), fixed_decimals(effect.high_s / 60.0, 2), html_text(input.source)};
}

/// In how many draws whose water arrives last; the most first.
std::string last_words(const StudyResult& result, const PointUncertainty& point) {
    if (point.last.size() < 2) return "";
    const auto draws = static_cast<double>(result.uncertainty->draws.size());
    std::string text;
    for (std::size_t i = 0; i < std::min(most_last, point.last.size()); ++i) {
        text += (i == 0 ? "" : ", ") + point_name(result, point.last[i].subarea) + " in " + significant(100.0 * point.last[i].draws / draws, 3) + " %";
    }
    return " Last to arrive is " + text + (point.last.size() > most_last ? ", others in the rest" : "") + " of the draws.";
}

}  // namespace

std::string uncertainty_figure(const StudyResult& result, const Outlet& outlet) {
    if (result.uncertainty == nullptr) return "";
    const PointUncertainty& point = result.uncertainty->points[outlet.number - 1];
    std::vector<ChartRow> rows{all_inputs(point)};
    std::vector<Cells> cells;
    for (const InputEffect& effect : point.effects) {
        if (rows.size() <= most_inputs) rows.push_back(one_input(point, effect, result.uncertainty->inputs[effect.input]));
        cells.push_back(effect_cells(result, effect));
    }
    const std::string finding = "The time of concentration is " + shown_minutes(point.typical_s) + " min. " + uncertainty_sentence(result, outlet) + last_words(result, point);
    return figure("Range of the time of concentration", row_chart(finding, {.title = "time of concentration, min", .mark = point.typical_s / 60.0, .begins_at_zero = false}, rows),
                  html_text(finding) + chart_keys({{"reach", "all inputs fast, all slow"}, {"bar", "nine of ten draws"}, {"tick", "half of the draws"},
                                                       {"open", "one input over its range"}, {"mark", "as in the study"}}),
                  hidden_table("Table of inputs", {"input", "unit", "low", "typical", "high", "time at low min", "time at high min", "range from"}, cells));
}

}  // namespace rillclock
