#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

std::string seconds_text(FixedTime time) { return fixed_decimals(from_fixed(time), 6); }

/// The parts of a time, s: what no storm changes, and what the storm factor multiplies.
std::string parts_text(const StepTime& time) { return seconds_text(time.fixed) + " + s * " + seconds_text(time.storm); }

/// The parts of the own time, s: the greatest of these is it, under any storm.
std::string own_parts_text(const StudyResult& result, const Outlet& outlet) {
    const PointEdit& edit = result.network.edits[outlet.number - 1];
    if (edit.stated != nullptr && edit.stated->time) return parts_text({.fixed = to_fixed(in_seconds(*edit.stated->time))});
    if (edit.stated != nullptr && edit.stated->restated) return parts_text(*edit.stated->restated);
    std::string text;
    for (const Head& head : outlet.own_front.heads()) text += (text.empty() ? "" : "; ") + parts_text(head.time - outlet.time_to_root);
    return text;
}

void add_arrival_columns(const StudyResult& result, TableWriter<Outlet>& table) {
    const auto point = [&result](const Outlet& o) -> const PointNetwork& { return result.network.points[o.number - 1]; };
    const auto factor = [=](const Outlet& o) { return point(o).raster_storm().storm_factor; };
    table.column("storm_factor", [=](const Outlet& o) { return significant(factor(o), 12); })
        .column("own_time_s", [=, &result](const Outlet& o) {
            return seconds_text(result.network.network.own_time(o.number, factor(o)));
        })
        .column("next_point", [=, &result](const Outlet& o) { return point(o).next == 0 ? "" : point_name(result, point(o).next); })
        .column("way_time_s", [=](const Outlet& o) {
            return point(o).next == 0 ? "" : fixed_decimals(in_seconds(point(o).way.under(factor(o))), 6);
        })
        .column("own_time_parts_s", [&result](const Outlet& o) { return own_parts_text(result, o); })
        .column("way_time_parts_s", [=](const Outlet& o) { return point(o).next == 0 ? "" : parts_text(point(o).way); })
        .column("stated", [&result](const Outlet& o) { return marks_of(result.network.edits[o.number - 1]); });
}

void add_storm_coefficient_columns(const StudyResult& result, const ReportScale& scale, TableWriter<Outlet>& table) {
    for (std::size_t i = 0; i < result.rain.storms.size(); ++i) {
        const std::string years = "_" + significant(result.rain.storms[i].return_period, 6) + "yr";
        const auto where_any = [&result, i](auto print) {
            return [&result, i, print](const Outlet& o) {
                const auto& coefficients = result.peaks.subareas[o.number - 1].coefficients;
                return coefficients.empty() ? std::string() : print(coefficients[i]);
            };
        };
        table.column("runoff_coefficient_before_factor" + years, where_any([](const CompositeCoefficient& c) { return significant(c.plain, 9); }))
            .column("runoff_coefficient_with_factor" + years, where_any([](const CompositeCoefficient& c) { return significant(c.value, 9); }))
            .column("ca" + years + "_" + scale.area_unit(), where_any([scale](const CompositeCoefficient& c) {
                return significant(scale.area(from_fixed_area(c.runoff)), 9);
            }));
    }
}

}  // namespace

std::string handover_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    TableWriter<Outlet> table;
    table.column("subarea", [](const Outlet& o) { return o.point.name; })
        .column("area_" + scale.area_unit(), [=](const Outlet& o) { return significant(scale.area(from_fixed_area(o.own_area)), 9); });
    if (result.peaks.are_there()) add_storm_coefficient_columns(result, scale, table);
    add_arrival_columns(result, table);
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) text += table.line(outlet);
    return text;
}

}  // namespace rillclock
