#include <algorithm>

#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "network_words.hpp"
#include "path_digest.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

std::string in_minutes_text(double s) { return fixed_decimals(s / 60.0, 3); }

double regime_seconds(const Outlet& outlet, Regime regime) {
    StepTime time;
    for (const Segment& segment : outlet.governing.segments) {
        if (segment.regime == regime) time += segment.time;
    }
    return in_seconds(time.under(outlet.storm_factor));
}

void add_place_columns(const StudyResult& result, const ReportScale& scale, TableWriter<Outlet>& table) {
    table.column("number", [](const Outlet& o) { return std::to_string(o.number); })
        .column("name", [](const Outlet& o) { return o.point.name; })
        .column("x", [&](const Outlet& o) { return coordinate(result.system, result.grid.centre(o.point.cell).x); })
        .column("y", [&](const Outlet& o) { return coordinate(result.system, result.grid.centre(o.point.cell).y); })
        .column("moved_" + scale.length_unit(), [=](const Outlet& o) { return five_digits(scale.length(in_metres(o.point.moved))); })
        .column("next_point", [&](const Outlet& o) { return o.next == 0 ? "" : result.outlets[o.next - 1].point.name; });
}

void add_time_columns(const StudyResult& result, const ReportScale& scale, TableWriter<Outlet>& table) {
    table.column("area_" + scale.area_unit(), [=](const Outlet& o) { return five_digits(scale.area(from_fixed_area(o.area))); })
        .column("own_area_" + scale.area_unit(), [=](const Outlet& o) { return five_digits(scale.area(from_fixed_area(o.own_area))); })
        .column("network_area_" + scale.area_unit(),
                [=, &result](const Outlet& o) { return five_digits(scale.area(from_fixed_area(result.network.points[o.number - 1].area))); })
        .column("time_used_min", [&result](const Outlet& o) { return in_minutes_text(time_shown_s(result, o)); })
        .column("stated_acts", [&result](const Outlet& o) { return yes_or_no(is_stated_felt(result.network, o)); })
        .column("time_of_concentration_min", [](const Outlet& o) { return in_minutes_text(o.time_of_concentration_s()); })
        .column("greatest_time_min", [](const Outlet& o) { return in_minutes_text(o.greatest_s); });
    for (std::size_t i = 0; i < told_shares.size(); ++i) {
        table.column("time_" + significant(100.0 * told_shares[i], 3) + "_percent_of_area_min",
                     [i](const Outlet& o) { return in_minutes_text(o.arrival_s[i]); });
    }
    for (const Regime regime : {Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        table.column(std::string(name_of(regime)) + "_min", [regime](const Outlet& o) { return in_minutes_text(regime_seconds(o, regime)); });
    }
}

/// Beside the area of the elevations, that of a survey and how many times as large the former is.
void add_survey_columns(const StudyResult& result, const ReportScale& scale, TableWriter<Outlet>& table) {
    const auto is_surveyed = [](const Outlet& o) { return o.point.surveyed.has_value(); };
    if (std::none_of(result.outlets.begin(), result.outlets.end(), is_surveyed)) return;
    const auto where_any = [=](auto print) {
        return [=](const Outlet& o) { return is_surveyed(o) ? print(o) : std::string(); };
    };
    table.column("surveyed_area_" + scale.area_unit(), where_any([=](const Outlet& o) { return five_digits(scale.area(from_fixed_area(*o.point.surveyed))); }))
        .column("area_to_surveyed_ratio", where_any([](const Outlet& o) {
            return five_digits(static_cast<double>(o.area) / static_cast<double>(*o.point.surveyed));
        }));
}

void add_path_columns(const StudyResult& result, const ReportScale& scale, TableWriter<Outlet>& table) {
    const std::string m = scale.length_unit();
    const double weight = step_weight(result);
    const auto grid = [=](const PointPath& path) { return scale.length(from_fixed(path.summary.length)) / weight; };
    table.column("governing_length_" + m, [=](const Outlet& o) { return five_digits(scale.length(from_fixed(o.governing.summary.length))); })
        .column("governing_grid_length_" + m, [=](const Outlet& o) { return five_digits(grid(o.governing)); })
        .column("governing_unbiased_length_" + m, [=](const Outlet& o) { return five_digits(unbiased_step_weight * grid(o.governing)); })
        .column("governing_fall_" + m, [=](const Outlet& o) { return five_digits(scale.length(o.governing.summary.fall_m)); })
        .column("governing_head_x", [&](const Outlet& o) { return coordinate(result.system, result.grid.centre(o.governing.cells.front()).x); })
        .column("governing_head_y", [&](const Outlet& o) { return coordinate(result.system, result.grid.centre(o.governing.cells.front()).y); })
        .column("governing_path_digest", [](const Outlet& o) { return path_digest(o.governing.cells); })
        .column("longest_length_" + m, [=](const Outlet& o) { return five_digits(scale.length(from_fixed(o.longest.summary.length))); })
        .column("longest_grid_length_" + m, [=](const Outlet& o) { return five_digits(grid(o.longest)); })
        .column("longest_unbiased_length_" + m, [=](const Outlet& o) { return five_digits(unbiased_step_weight * grid(o.longest)); })
        .column("longest_time_min", [](const Outlet& o) { return in_minutes_text(o.longest.seconds); });
}

void add_trust_columns(TableWriter<Outlet>& table) {
    table.column("ponded_percent", [](const Outlet& o) {
            return five_digits(100.0 * o.governing.summary.share_of_length(o.governing.summary.ponded_length_m)); })
        .column("slope_floor_percent", [](const Outlet& o) {
            return five_digits(100.0 * o.governing.summary.share_of_length(o.governing.summary.floor_length_m)); })
        .column("fall_ratio", [](const Outlet& o) { return five_digits(o.governing.summary.fall_ratio()); })
        .column("end_to_end_time_min", [](const Outlet& o) { return in_minutes_text(o.governing.end_to_end_s); })
        .column("touches_edge", [](const Outlet& o) { return yes_or_no(o.touches_edge()); });
}

const std::optional<MethodSpread>& spread_of(const StudyResult& result, const Outlet& outlet) {
    return result.methods[outlet.number - 1].spread;
}

void add_method_columns(const StudyResult& result, TableWriter<Outlet>& table) {
    const auto time = [&result](Duration MethodSpread::*which) {
        return [&result, which](const Outlet& o) {
            const std::optional<MethodSpread>& spread = spread_of(result, o);
            return spread ? in_minutes_text(in_seconds((*spread).*which)) : std::string();
        };
    };
    table.column("methods_applicable", [&result](const Outlet& o) {
            const std::optional<MethodSpread>& spread = spread_of(result, o);
            return std::to_string(spread ? spread->methods : 0);
        })
        .column("methods_lowest_min", time(&MethodSpread::lowest))
        .column("methods_median_min", time(&MethodSpread::median))
        .column("methods_highest_min", time(&MethodSpread::highest));
}

void add_way_columns(const ReportScale& scale, TableWriter<Outlet>& table) {
    const std::string m = scale.length_unit();
    const auto where_any = [](auto print) {
        return [print](const Outlet& o) { return o.next == 0 ? std::string() : print(o); };
    };
    table.column("way_length_" + m, where_any([=](const Outlet& o) { return five_digits(scale.length(from_fixed(o.way.length))); }))
        .column("way_fall_" + m, where_any([=](const Outlet& o) { return five_digits(scale.length(o.way.fall_m)); }))
        .column("way_min", where_any([](const Outlet& o) { return in_minutes_text(in_seconds(o.way.time.under(o.storm_factor))); }));
    for (const Regime regime : {Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        table.column("way_" + std::string(name_of(regime)) + "_percent",
                     where_any([regime](const Outlet& o) { return five_digits(100.0 * o.way.share(regime)); }));
    }
}

void add_network_columns(const StudyResult& result, TableWriter<Outlet>& table) {
    const auto storm_of = [&result](const Outlet& o) -> const NetworkStorm& { return result.network.points[o.number - 1].raster_storm(); };
    table.column("network_next_point", [&result](const Outlet& o) {
            const PointNumber next = result.network.points[o.number - 1].next;
            return next == 0 ? "" : point_name(result, next);
        })
        .column("network_time_min", [=](const Outlet& o) { return in_minutes_text(from_fixed(storm_of(o).time)); })
        .column("stated_above", [&result](const Outlet& o) { return stated_in_words(result, result.network.points[o.number - 1].stated_above); })
        .column("subareas", [=](const Outlet& o) { return std::to_string(storm_of(o).subareas_above); })
        .column("last_subarea", [=, &result](const Outlet& o) { return point_name(result, storm_of(o).last); })
        .column("lead_min", [=](const Outlet& o) {
            return storm_of(o).lead ? in_minutes_text(from_fixed(*storm_of(o).lead)) : std::string();
        })
        .column("critical_way", [=, &result](const Outlet& o) { return way_in_words(result, storm_of(o).critical_way); });
}

void add_peak_columns(const StudyResult& result, const ReportScale& scale, TableWriter<Outlet>& table) {
    const auto where_any = [&result](auto print) {
        return [&result, print](const Outlet& o) {
            const PointPeak* peak = raster_peak(result, o.number);
            return peak != nullptr ? print(*peak) : std::string();
        };
    };
    table.column("whole_area_peak_" + scale.flow_unit(), where_any([=](const PointPeak& p) { return five_digits(scale.flow(p.whole)); }))
        .column("peak_" + scale.flow_unit(), where_any([=](const PointPeak& p) { return five_digits(scale.flow(p.partial)); }))
        .column("peak_subareas", where_any([&result](const PointPeak& p) { return makers_in_words(result, p); }));
}

void add_zone_columns(const StudyResult& result, TableWriter<Outlet>& table) {
    if (result.rain.zones.empty()) return;
    table.column("rain_zone", [&result](const Outlet& o) { return result.rain.zone_name(o.rain_zone.number); })
        .column("rain_zone_percent", [](const Outlet& o) { return five_digits(100.0 * o.rain_zone.share); });
}

}  // namespace

std::string outlets_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    TableWriter<Outlet> table;
    add_place_columns(result, scale, table);
    add_time_columns(result, scale, table);
    add_path_columns(result, scale, table);
    add_trust_columns(table);
    add_method_columns(result, table);
    add_way_columns(scale, table);
    add_network_columns(result, table);
    if (result.peaks.are_there()) add_peak_columns(result, scale, table);
    add_zone_columns(result, table);
    add_survey_columns(result, scale, table);
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) text += table.line(outlet);
    return text;
}

}  // namespace rillclock
