#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

struct SubareaRow {
    const Outlet* point = nullptr;
    const Outlet* subarea = nullptr;
    FixedArea area = 0;         ///< of all that drains to the point
    std::string return_period;  ///< empty where the study has no rain by duration
    const NetworkStorm* storm = nullptr;
    const SubareaArrival* arrival = nullptr;
    const SubareaShare* share = nullptr;  ///< none where there is no peak
};

std::string subarea_minutes(FixedTime time) { return fixed_decimals(from_fixed(time) / 60.0, 4); }

TableWriter<SubareaRow> subarea_columns(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    TableWriter<SubareaRow> table;
    table.column("point", [](const SubareaRow& r) { return r.point->point.name; })
        .column("return_period_years", [](const SubareaRow& r) { return r.return_period; })
        .column("subarea", [](const SubareaRow& r) { return r.subarea->point.name; })
        .column("own_area_" + scale.area_unit(),
                [=](const SubareaRow& r) { return five_digits(scale.area(from_fixed_area(r.subarea->own_area))); })
        .column("share_of_area_percent",
                [](const SubareaRow& r) {
                    return five_digits(100.0 * from_fixed_area(r.subarea->own_area) / from_fixed_area(r.area));
                })
        .column("share_of_runoff_percent",
                [](const SubareaRow& r) { return r.share == nullptr ? "" : five_digits(100.0 * r.share->of_runoff); })
        .column("share_of_peak_window_percent",
                [](const SubareaRow& r) { return r.share == nullptr ? "" : five_digits(100.0 * r.share->of_window); })
        .column("own_time_min", [](const SubareaRow& r) { return subarea_minutes(r.arrival->own); })
        .column("way_min", [](const SubareaRow& r) { return subarea_minutes(r.arrival->way); })
        .column("arrival_min", [](const SubareaRow& r) { return subarea_minutes(r.arrival->arrival()); })
        .column("slack_min", [](const SubareaRow& r) { return subarea_minutes(r.arrival->slack); })
        .column("stated", [&result](const SubareaRow& r) { return marks_of(result.network.edits[r.subarea->number - 1]); })
        .column("arrives_last", [](const SubareaRow& r) { return yes_or_no(r.arrival->subarea == r.storm->last); });
    return table;
}

const SubareaShare* share_of(const StudyResult& result, const Outlet& outlet, std::size_t period, std::size_t row) {
    if (!result.peaks.are_there()) return nullptr;
    const PointPeak& peak = result.peaks.points[outlet.number - 1][period];
    return peak.is_there() ? &peak.shares[row] : nullptr;
}

}  // namespace

std::string subareas_table(const StudyResult& result) {
    const TableWriter<SubareaRow> table = subarea_columns(result);
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) {
        const std::vector<NetworkStorm>& storms = result.network.points[outlet.number - 1].storms;
        for (std::size_t i = 0; i < storms.size(); ++i) {
            const std::string period = result.rain.storms.empty() ? "" : significant(result.rain.storms[i].return_period, 6);
            for (std::size_t row = 0; row < storms[i].subareas.size(); ++row) {
                const SubareaArrival& arrival = storms[i].subareas[row];
                text += table.line({&outlet, &result.outlets[arrival.subarea - 1], result.network.points[outlet.number - 1].area, period, &storms[i], &arrival,
                                    share_of(result, outlet, i, row)});
            }
        }
    }
    return text;
}

}  // namespace rillclock
