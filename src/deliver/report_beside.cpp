#include <algorithm>
#include <cmath>
#include <numeric>

#include "html_text.hpp"
#include "report_parts.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/report_units.hpp"

namespace rillclock {
namespace {

using Cells = std::vector<std::string>;

constexpr std::size_t most_compared = 20;

/// "12.4 → 10.1 (−18.5 %)"; a dash where either lacks.
std::string two_figures(const TwoFigures& two) {
    if (!two.are_both()) return "–";
    std::string text = significant(*two.before, 4) + "\u00a0→\u00a0" + significant(*two.after, 4);
    if (const auto share = two.relative_change()) {
        const double percent = 100.0 * *share;
        const std::string sign = percent > 0 ? "+" : percent < 0 ? "−" : "±";
        text += "\u00a0(" + sign + fixed_decimals(std::abs(percent), 1) + "\u00a0%)";
    }
    return text;
}

std::string flow_unit_words(const std::string& unit) { return unit == "ft3_per_s" ? "ft³/s" : "m³/s"; }

/// Of which return periods there are peaks, from the first point that has any.
std::vector<double> periods_of(const Comparison& comparison) {
    std::vector<double> periods;
    for (const ComparedPoint& point : comparison.points) {
        for (const ComparedPeriod& period : point.periods) periods.push_back(period.return_period);
        if (!periods.empty()) break;
    }
    return periods;
}

std::string peak_of_period(const ComparedPoint& point, double period) {
    const auto found = std::find_if(point.periods.begin(), point.periods.end(), [&](const ComparedPeriod& p) { return p.return_period == period; });
    return found == point.periods.end() ? "–" : two_figures(found->peak);
}

std::string compared_last_words(const ComparedPoint& point) {
    if (point.last_before.empty() || point.last_after.empty()) return "–";
    if (point.last_before == point.last_after) return html_text(point.last_before);
    return html_text(point.last_before) + " → " + html_text(point.last_after);
}

std::string compared_table(const Comparison& comparison) {
    const std::vector<double> periods = periods_of(comparison);
    Cells head{"point", "time min"};
    for (const double period : periods) head.push_back("peak of " + significant(period, 6) + " years " + flow_unit_words(comparison.flow_unit));
    head.insert(head.end(), {"same path", "arrives last", "gets worse"});
    std::vector<Cells> rows;
    for (const std::size_t place : places_by_change(comparison)) {
        if (rows.size() == most_compared) break;
        const ComparedPoint& point = comparison.points[place];
        Cells row{html_text(point.name), two_figures(point.time_min)};
        for (const double period : periods) row.push_back(peak_of_period(point, period));
        row.insert(row.end(), {point.has_same_path ? (*point.has_same_path ? "yes" : "no") : "–", compared_last_words(point),
                               point.worsening() > comparison.tolerance ? "yes" : "no"});
        rows.push_back(std::move(row));
    }
    return plain_table(head, rows);
}

std::string one_scenario(const ScenarioBeside& scenario) {
    const std::string name = html_text(scenario.name);
    std::string html = "<h3>Scenario " + name + "</h3><p>It differs from the study in:</p><ul class=\"changes\">";
    for (const std::string& change : scenario.changes) html += "<li><code>" + html_text(change) + "</code></li>";
    html += "</ul><p>" + html_text(comparison_sentence(scenario.comparison)) + " Each figure is that of the study → that of the scenario (change).</p>" +
            compared_table(scenario.comparison);
    const std::size_t points = scenario.comparison.points.size();
    if (points > most_compared) html += "<p>The " + std::to_string(most_compared) + " of " + std::to_string(points) + " points that get worse or change most are shown.</p>";
    return html + "<p>The scenario has <a href=\"" + html_text(scenario.folder) + "/report.html\">a report of its own</a>; all points are in " +
           html_text(scenario.comparison_folder) + "/tables/comparison.csv.</p>\n";
}

}  // namespace

std::string scenarios_section(const std::vector<ScenarioBeside>& scenarios) {
    if (scenarios.empty()) return "";
    std::string html = "<section class=\"scenarios\"><h2>Scenarios beside the study</h2>\n";
    for (const ScenarioBeside& scenario : scenarios) html += one_scenario(scenario);
    return html + "</section>\n";
}

std::string drawn_section(const StudyResult& result) {
    if (result.drawn.empty()) return "";
    const ReportScale scale(result.study.report_units);
    std::vector<std::size_t> order(result.drawn.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::stable_sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) { return result.drawn[a].overlap() < result.drawn[b].overlap(); });
    const auto area = [&](FixedArea of) { return significant(scale.area(from_fixed_area(of)), 4); };
    std::vector<Cells> rows;
    for (const std::size_t i : order) {
        if (rows.size() == most_compared) break;
        const DrawnDifference& one = result.drawn[i];
        rows.push_back({"<a href=\"#p" + std::to_string(one.point) + "\">" + html_text(result.outlets[one.point - 1].point.name) + "</a>", area(one.drawn),
                        area(one.found), area(one.both), area(one.drawn_only_area()), area(one.found_only_area()), fixed_decimals(100.0 * one.overlap(), 1)});
    }
    const std::string unit = " " + scale.area_unit();
    const DrawnDifference& worst = result.drawn[order.front()];
    std::string html = "<section class=\"drawn\"><h2>Hand-drawn catchments beside those of the elevations</h2>\n<p>Least in common has '" +
                       html_text(point_name(result, worst.point)) + "': " + fixed_decimals(100.0 * worst.overlap(), 1) +
                       " % of what either has. Times and peaks are those of the elevations' catchments.</p>";
    html += plain_table({"point", "drawn" + unit, "by the elevations" + unit, "in both" + unit, "drawn only" + unit, "elevations only" + unit, "in common %"}, rows);
    const std::string more = rows.size() < result.drawn.size() ? "The " + std::to_string(rows.size()) + " of " + std::to_string(result.drawn.size()) +
                                                                     " with the least in common are shown. " : "";
    return html + "<p>" + more + "tables/drawn_catchments.csv has the figures of all, the layer catchment_differences of study.gpkg the land that is in one alone; "
                  "the map shows it where drawn and elevations disagree.</p></section>\n";
}

}  // namespace rillclock
