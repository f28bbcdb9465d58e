#include "rillclock/deliver/uncertainty_tables.hpp"

#include <algorithm>
#include <numeric>
#include <vector>

#include "input_words.hpp"
#include "rillclock/deliver/report_units.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_points_of_draws = 20;

std::string minutes_text(double s) { return fixed_decimals(s / 60.0, 3); }

std::string short_minutes(double s) {
    const double m = s / 60.0;
    return m < 120.0 ? significant(m, 3) + " min" : significant(m / 60.0, 3) + " h";
}

struct EffectRow {
    const Outlet* outlet = nullptr;
    const PointUncertainty* point = nullptr;
    const InputEffect* effect = nullptr;
    const UncertainInput* input = nullptr;
};

struct LastRow {
    const Outlet* outlet = nullptr;
    const LastShare* last = nullptr;
};

struct TimesRow {
    const Outlet* outlet = nullptr;
    const PointUncertainty* point = nullptr;
};

TableWriter<EffectRow> effect_columns(const ReportScale& scale) {
    TableWriter<EffectRow> table;
    table.column("point", [](const EffectRow& r) { return r.outlet->point.name; })
        .column("input", [](const EffectRow& r) { return r.input->name; })
        .column("unit", [=](const EffectRow& r) { return unit_text(scale, *r.input); })
        .column("low", [=](const EffectRow& r) { return value_text(scale, *r.input, r.input->low); })
        .column("typical", [=](const EffectRow& r) { return value_text(scale, *r.input, r.input->typical); })
        .column("high", [=](const EffectRow& r) { return value_text(scale, *r.input, r.input->high); })
        .column("time_at_low_min", [](const EffectRow& r) { return minutes_text(r.effect->low_s); })
        .column("time_typical_min", [](const EffectRow& r) { return minutes_text(r.point->typical_s); })
        .column("time_at_high_min", [](const EffectRow& r) { return minutes_text(r.effect->high_s); })
        .column("swing_min", [](const EffectRow& r) { return minutes_text(r.effect->swing_s(r.point->typical_s)); })
        .column("range_from", [](const EffectRow& r) { return r.input->source; });
    return table;
}

/// Positions of the points by catchment, the largest first; of equal ones the earlier number.
std::vector<std::size_t> largest_points(const StudyResult& result) {
    std::vector<std::size_t> order(result.outlets.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::stable_sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) {
        return result.outlets[a].area > result.outlets[b].area;
    });
    order.resize(std::min(order.size(), most_points_of_draws));
    return order;
}

/// A draw's value in SI, or "unlimited".
std::string draw_value(double value) { return std::isfinite(value) ? significant(value, 17) : "unlimited"; }

std::string draw_column(const UncertainInput& input) {
    std::string unit = input.unit;
    std::replace(unit.begin(), unit.end(), '/', '_');
    return input.name + (unit.empty() ? "" : " " + unit);
}

}  // namespace

std::string uncertainty_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    const TableWriter<EffectRow> table = effect_columns(scale);
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) {
        const PointUncertainty& point = result.uncertainty->points[outlet.number - 1];
        for (const InputEffect& effect : point.effects) {
            text += table.line({&outlet, &point, &effect, &result.uncertainty->inputs[effect.input]});
        }
    }
    return text;
}

std::string uncertain_times_table(const StudyResult& result) {
    TableWriter<TimesRow> table;
    table.column("point", [](const TimesRow& r) { return r.outlet->point.name; })
        .column("all_fast_min", [](const TimesRow& r) { return minutes_text(r.point->fast_s); })
        .column("typical_min", [](const TimesRow& r) { return minutes_text(r.point->typical_s); })
        .column("all_slow_min", [](const TimesRow& r) { return minutes_text(r.point->slow_s); });
    for (std::size_t i = 0; i < told_percentiles.size(); ++i) {
        table.column("percentile_" + significant(100.0 * told_percentiles[i], 3) + "_min",
                     [i](const TimesRow& r) { return minutes_text(r.point->percentile_s[i]); });
    }
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) text += table.line({&outlet, &result.uncertainty->points[outlet.number - 1]});
    return text;
}

std::string last_subareas_table(const StudyResult& result) {
    const auto draws = static_cast<double>(result.uncertainty->draws.size());
    TableWriter<LastRow> table;
    table.column("point", [](const LastRow& r) { return r.outlet->point.name; })
        .column("subarea", [&](const LastRow& r) { return result.outlets[r.last->subarea - 1].point.name; })
        .column("draws", [](const LastRow& r) { return std::to_string(r.last->draws); })
        .column("share", [=](const LastRow& r) { return five_digits(r.last->draws / draws); });
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) {
        for (const LastShare& last : result.uncertainty->points[outlet.number - 1].last) text += table.line({&outlet, &last});
    }
    return text;
}

std::string draws_table(const StudyResult& result) {
    const Uncertainty& found = *result.uncertainty;
    TableWriter<std::size_t> table;
    table.column("draw", [](const std::size_t& draw) { return std::to_string(draw + 1); });
    for (std::size_t i = 0; i < found.inputs.size(); ++i) {
        table.column(draw_column(found.inputs[i]), [&found, i](const std::size_t& draw) { return draw_value(found.draws[draw][i]); });
    }
    for (const std::size_t point : largest_points(result)) {
        table.column("time at " + result.outlets[point].point.name + " min",
                     [&found, point](const std::size_t& draw) { return minutes_text(found.draw_times_s[draw][point]); });
    }
    std::string text = table.header();
    for (std::size_t draw = 0; draw < found.draws.size(); ++draw) text += table.line(draw);
    return text;
}

std::string uncertainty_sentence(const StudyResult& result, const Outlet& outlet) {
    const Uncertainty& found = *result.uncertainty;
    const PointUncertainty& point = found.points[outlet.number - 1];
    std::string text = "Within the ranges of its inputs that time lies between " + short_minutes(point.fast_s) + " and " +
                       short_minutes(point.slow_s) + " (typical " + short_minutes(point.typical_s) + "), in nine of ten of " +
                       std::to_string(found.draws.size()) + " draws between " + short_minutes(point.percentile_s.front()) + " and " +
                       short_minutes(point.percentile_s.back());
    if (!point.effects.empty()) {
        const InputEffect& most = point.effects.front();
        text += "; " + found.inputs[most.input].name + " moves it most, from " +
                short_minutes(std::min({most.low_s, most.high_s, point.typical_s})) + " to " +
                short_minutes(std::max({most.low_s, most.high_s, point.typical_s}));
    }
    return text + ". Left out are the choice of method and the elevations.";
}

}  // namespace rillclock
