#include "rillclock/deliver/comparison.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>
#include <nlohmann/json.hpp>
#include <numeric>

#include "rillclock/core/number_text.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

using Json = nlohmann::ordered_json;

std::string decimals_or_nothing(const std::optional<double>& value, int decimals) {
    return value && std::isfinite(*value) ? fixed_decimals(*value, decimals) : std::string();
}

std::string digits_or_nothing(const std::optional<double>& value) { return value ? five_digits(*value) : std::string(); }

std::optional<double> in_percent(const std::optional<double>& share) {
    return share ? std::optional(100.0 * *share) : std::nullopt;
}

/// "+12.3 %".
std::string signed_percent(const std::optional<double>& share) {
    if (!share) return "";
    return (*share > 0 ? "+" : "") + fixed_decimals(100.0 * *share, 1) + " %";
}

Json figure(const std::optional<double>& value) { return value && std::isfinite(*value) ? Json(std::stod(significant(*value, 9))) : Json(nullptr); }

Json figures(const TwoFigures& two) {
    return {{"before", figure(two.before)}, {"after", figure(two.after)}, {"change", figure(two.change())},
            {"change_percent", figure(in_percent(two.relative_change()))}};
}

Json text_or_null(const std::string& text) { return text.empty() ? Json(nullptr) : Json(text); }

Json point_json(const Comparison& comparison, const ComparedPoint& point) {
    Json periods = Json::array();
    for (const ComparedPeriod& period : point.periods) {
        periods.push_back({{"return_period", period.return_period}, {"runoff_coefficient", figures(period.coefficient)},
                           {"whole_area_peak_" + comparison.flow_unit, figures(period.whole_area_peak)},
                           {"peak_" + comparison.flow_unit, figures(period.peak)}});
    }
    return {{"name", point.name},
            {"time_min", figures(point.time_min)},
            {"ground_time_min", figures(point.ground_time_min)},
            {"path_length_" + comparison.length_unit, figures(point.length)},
            {"same_head", point.has_same_head},
            {"same_path", point.has_same_path ? Json(*point.has_same_path) : Json(nullptr)},
            {"last_subarea", {{"before", text_or_null(point.last_before)}, {"after", text_or_null(point.last_after)}}},
            {"lead_min", figures(point.lead_min)},
            {"peaks", periods},
            {"worse_by_percent", figure(100.0 * point.worsening())}};
}

/// The greatest relative change of a peak, whole or partial area, over all return periods, by its size.
std::optional<double> greatest_peak_change(const ComparedPoint& point) {
    std::optional<double> greatest;
    for (const ComparedPeriod& period : point.periods) {
        for (const TwoFigures* peak : {&period.peak, &period.whole_area_peak}) {
            const auto change = peak->relative_change();
            if (change && (!greatest || std::abs(*change) > std::abs(*greatest))) greatest = change;
        }
    }
    return greatest;
}

using TextRow = std::array<std::string, 6>;

TextRow text_row(const Comparison& comparison, const ComparedPoint& point) {
    return {point.name, decimals_or_nothing(point.time_min.before, 1), decimals_or_nothing(point.time_min.after, 1),
            signed_percent(point.time_min.relative_change()), signed_percent(greatest_peak_change(point)),
            point.worsening() > comparison.tolerance ? "worse" : ""};
}

std::size_t letters_of(const std::string& text) {
    return static_cast<std::size_t>(std::count_if(text.begin(), text.end(), [](char c) {
        return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U;
    }));
}

std::string aligned(const std::vector<TextRow>& rows) {
    TextRow none;
    std::array<std::size_t, none.size()> widths{};
    for (const TextRow& row : rows) {
        for (std::size_t i = 0; i < row.size(); ++i) widths[i] = std::max(widths[i], letters_of(row[i]));
    }
    std::string text;
    for (const TextRow& row : rows) {
        std::string line;
        for (std::size_t i = 0; i < row.size(); ++i) {
            const std::string blanks(widths[i] - letters_of(row[i]), ' ');
            line += (i == 0 ? "" : "  ") + (i == 0 ? row[i] + blanks : blanks + row[i]);
        }
        line.erase(line.find_last_not_of(' ') + 1);
        text += line + '\n';
    }
    return text;
}

struct PeriodRow {
    const ComparedPoint* point = nullptr;
    const ComparedPeriod* period = nullptr;
};

/// Columns NAME_before, NAME_after and NAME_change.
template <class Row, class Get>
void add_figures(TableWriter<Row>& table, const std::string& name, const std::string& unit, Get get) {
    const std::string ending = unit.empty() ? "" : "_" + unit;
    table.column(name + "_before" + ending, [get](const Row& r) { return digits_or_nothing(get(r).before); })
        .column(name + "_after" + ending, [get](const Row& r) { return digits_or_nothing(get(r).after); })
        .column(name + "_change" + ending, [get](const Row& r) { return digits_or_nothing(get(r).change()); });
}

}  // namespace

std::optional<double> TwoFigures::change() const { return are_both() ? std::optional(*after - *before) : std::nullopt; }

std::optional<double> TwoFigures::relative_change() const {
    if (!are_both() || !(*before > 0)) return std::nullopt;
    return (*after - *before) / *before;
}

std::optional<double> ComparedPeriod::peak_growth() const {
    const std::optional<double> whole = whole_area_peak.relative_change();
    const std::optional<double> partial = peak.relative_change();
    return whole && partial ? std::max(whole, partial) : whole ? whole : partial;
}

double ComparedPoint::worsening() const {
    double worst = -time_min.relative_change().value_or(0.0);
    for (const ComparedPeriod& period : periods) worst = std::max(worst, period.peak_growth().value_or(0.0));
    return worst;
}

bool Comparison::knows_paths() const {
    return std::all_of(points.begin(), points.end(), [](const ComparedPoint& p) { return p.has_same_path.has_value(); });
}

std::vector<std::size_t> Comparison::worse() const {
    std::vector<std::size_t> places;
    for (std::size_t i = 0; i < points.size(); ++i) {
        if (points[i].worsening() > tolerance) places.push_back(i);
    }
    std::stable_sort(places.begin(), places.end(), [&](std::size_t a, std::size_t b) {
        return points[a].worsening() > points[b].worsening();
    });
    return places;
}

std::string comparison_sentence(const Comparison& comparison) {
    const std::string tolerance = significant(100.0 * comparison.tolerance, 3) + " %";
    const std::vector<std::size_t> worse = comparison.worse();
    const std::string all = std::to_string(comparison.points.size());
    if (worse.empty()) return "None of " + all + " points gets worse by more than " + tolerance + ".";
    return std::to_string(worse.size()) + " of " + all + " points get worse by more than " + tolerance +
           " (time of concentration shorter or peak greater); the worst is '" + comparison.points[worse.front()].name + "', by " +
           significant(100.0 * comparison.points[worse.front()].worsening(), 3) + " %.";
}

std::string paths_sentence(const Comparison& comparison) {
    if (!comparison.knows_paths())
        return "Whether governing paths run through the same cells is not known: tables/outlets.csv of one of the results has no column "
               "governing_path_digest; run its study again.";
    const auto others = std::count_if(comparison.points.begin(), comparison.points.end(), [](const ComparedPoint& p) { return !*p.has_same_path; });
    if (others == 0) return "All governing paths run through the same cells.";
    return std::to_string(others) + " of " + std::to_string(comparison.points.size()) + " governing paths run through other cells than before.";
}

std::vector<std::size_t> places_by_change(const Comparison& comparison) {
    std::vector<std::size_t> order(comparison.points.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    const auto rank = [&](std::size_t i) {
        const ComparedPoint& point = comparison.points[i];
        const bool is_worse = point.worsening() > comparison.tolerance;
        return std::pair(is_worse ? 1 : 0, is_worse ? point.worsening() : std::abs(point.time_min.relative_change().value_or(0.0)));
    };
    std::stable_sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) { return rank(a) > rank(b); });
    return order;
}

std::string comparison_text(const Comparison& comparison, std::size_t most) {
    std::vector<TextRow> rows{{"point", "before min", "after min", "time", comparison.flow_unit.empty() ? "" : "peak", ""}};
    const std::vector<std::size_t> order = places_by_change(comparison);
    for (std::size_t i = 0; i < std::min(most, order.size()); ++i) rows.push_back(text_row(comparison, comparison.points[order[i]]));
    std::string text = comparison_sentence(comparison) + "\n\n" + aligned(rows);
    if (order.size() > most) text += "… and " + std::to_string(order.size() - most) + " more; --json prints them all\n";
    text += "\n" + paths_sentence(comparison) + "\n";
    return text;
}

std::string comparison_table(const Comparison& comparison) {
    TableWriter<ComparedPoint> table;
    table.column("point", [](const ComparedPoint& p) { return p.name; });
    add_figures(table, "time", "min", [](const ComparedPoint& p) { return p.time_min; });
    table.column("time_change_percent", [](const ComparedPoint& p) { return decimals_or_nothing(in_percent(p.time_min.relative_change()), 3); });
    add_figures(table, "ground_time", "min", [](const ComparedPoint& p) { return p.ground_time_min; });
    add_figures(table, "path_length", comparison.length_unit, [](const ComparedPoint& p) { return p.length; });
    table.column("same_head", [](const ComparedPoint& p) { return yes_or_no(p.has_same_head); })
        .column("same_path", [](const ComparedPoint& p) { return p.has_same_path ? std::string(yes_or_no(*p.has_same_path)) : std::string(); })
        .column("last_subarea_before", [](const ComparedPoint& p) { return p.last_before; })
        .column("last_subarea_after", [](const ComparedPoint& p) { return p.last_after; });
    add_figures(table, "lead", "min", [](const ComparedPoint& p) { return p.lead_min; });
    table.column("greatest_peak_change_percent", [](const ComparedPoint& p) { return decimals_or_nothing(in_percent(greatest_peak_change(p)), 3); })
        .column("worse_by_percent", [](const ComparedPoint& p) { return fixed_decimals(100.0 * p.worsening(), 3); })
        .column("worse", [&](const ComparedPoint& p) { return yes_or_no(p.worsening() > comparison.tolerance); });
    std::string text = table.header();
    for (const std::size_t place : places_by_change(comparison)) text += table.line(comparison.points[place]);
    return text;
}

std::string compared_peaks_table(const Comparison& comparison) {
    TableWriter<PeriodRow> table;
    table.column("point", [](const PeriodRow& r) { return r.point->name; })
        .column("return_period_years", [](const PeriodRow& r) { return significant(r.period->return_period, 6); });
    add_figures(table, "runoff_coefficient", "", [](const PeriodRow& r) { return r.period->coefficient; });
    add_figures(table, "whole_area_peak", comparison.flow_unit, [](const PeriodRow& r) { return r.period->whole_area_peak; });
    table.column("whole_area_peak_change_percent", [](const PeriodRow& r) { return decimals_or_nothing(in_percent(r.period->whole_area_peak.relative_change()), 3); });
    add_figures(table, "peak", comparison.flow_unit, [](const PeriodRow& r) { return r.period->peak; });
    table.column("peak_change_percent", [](const PeriodRow& r) { return decimals_or_nothing(in_percent(r.period->peak.relative_change()), 3); });
    std::vector<PeriodRow> rows;
    for (const ComparedPoint& point : comparison.points) {
        for (const ComparedPeriod& period : point.periods) rows.push_back({&point, &period});
    }
    const auto growth = [](const PeriodRow& r) { return r.period->peak_growth().value_or(-std::numeric_limits<double>::infinity()); };
    std::stable_sort(rows.begin(), rows.end(), [&](const PeriodRow& a, const PeriodRow& b) { return growth(a) > growth(b); });
    std::string text = table.header();
    for (const PeriodRow& row : rows) text += table.line(row);
    return text;
}

std::string comparison_json(const Comparison& comparison) {
    Json points = Json::array();
    for (const ComparedPoint& point : comparison.points) points.push_back(point_json(comparison, point));
    Json worse = Json::array();
    for (const std::size_t place : comparison.worse()) worse.push_back(comparison.points[place].name);
    const Json json = {{"before", comparison.before},
                       {"after", comparison.after},
                       {"tolerance_percent", figure(100.0 * comparison.tolerance)},
                       {"worse", worse},
                       {"points", points}};
    return json.dump(1, ' ', false, Json::error_handler_t::replace) + "\n";
}

}  // namespace rillclock
