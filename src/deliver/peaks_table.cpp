#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "network_words.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

struct PeakRow {
    const Outlet* outlet = nullptr;
    const PointNetwork* network = nullptr;
    const std::vector<PointPeak>* periods = nullptr;
    std::size_t period = 0;
    std::size_t raster = 0;
    double return_period = 0.0;

    [[nodiscard]] const PointPeak& peak() const { return (*periods)[period]; }
    [[nodiscard]] const NetworkStorm& storm() const { return network->storms[period]; }
};

using Table = TableWriter<PeakRow>;

/// Prints of a peak that is there; nothing else.
template <class Print>
Table::Print where_there(Print print) {
    return [print](const PeakRow& r) { return r.peak().is_there() ? std::string(print(r.peak())) : std::string(); };
}

std::string peak_minutes(Duration time) { return fixed_decimals(in_minutes(time), 4); }
std::string rain_text(const ReportScale& scale, Intensity intensity) { return significant(scale.intensity(intensity), 7); }

void add_coefficient_columns(const ReportScale& scale, Table& table) {
    table.column("point", [](const PeakRow& r) { return r.outlet->point.name; })
        .column("return_period_years", [](const PeakRow& r) { return significant(r.return_period, 6); })
        .column("area_" + scale.area_unit(), [=](const PeakRow& r) { return significant(scale.area(from_fixed_area(r.network->area)), 7); })
        .column("runoff_coefficient_before_factor", where_there([](const PointPeak& p) { return significant(p.coefficient.plain, 6); }))
        .column("frequency_factor", where_there([](const PointPeak& p) { return five_digits(p.coefficient.frequency_factor); }))
        .column("coefficient_uncut", where_there([](const PointPeak& p) { return significant(p.coefficient.uncapped, 6); }))
        .column("runoff_coefficient_with_factor", where_there([](const PointPeak& p) { return significant(p.coefficient.value, 6); }));
}

void add_whole_columns(const ReportScale& scale, Table& table) {
    table.column("time_of_concentration_min", [](const PeakRow& r) { return peak_minutes(r.peak().whole_time); })
        .column("intensity_" + scale.intensity_unit(), where_there([=](const PointPeak& p) { return rain_text(scale, p.whole_intensity); }))
        .column("whole_area_peak_" + scale.flow_unit(), where_there([=](const PointPeak& p) { return five_digits(scale.flow(p.whole)); }));
}

void add_partial_columns(const StudyResult& result, const ReportScale& scale, Table& table) {
    table.column("peak_" + scale.flow_unit(), where_there([=](const PointPeak& p) { return five_digits(scale.flow(p.partial)); }))
        .column("peak_duration_min", where_there([](const PointPeak& p) { return peak_minutes(p.window.duration); }))
        .column("peak_intensity_" + scale.intensity_unit(), where_there([=](const PointPeak& p) { return rain_text(scale, p.peak_intensity); }))
        .column("peak_share_of_area_percent", where_there([](const PointPeak& p) { return five_digits(100.0 * p.window_share); }))
        .column("peak_share_of_runoff_percent", where_there([](const PointPeak& p) {
            return five_digits(100.0 * from_fixed_area(p.window.runoff) / from_fixed_area(p.coefficient.runoff));
        }))
        .column("peak_unbinned_at_least_" + scale.flow_unit(), where_there([=](const PointPeak& p) { return five_digits(scale.flow(p.partial_at_least)); }))
        .column("peak_unbinned_at_most_" + scale.flow_unit(), where_there([=](const PointPeak& p) { return five_digits(scale.flow(p.partial_at_most)); }))
        .column("subareas_in_window", where_there([](const PointPeak& p) { return std::to_string(p.subareas_in_window); }))
        .column("peak_subareas", where_there([&result](const PointPeak& p) { return makers_in_words(result, p); }));
}

/// What is not as under the storm that paths are for.
std::string differences(const PeakRow& row) {
    std::string text;
    const auto add = [&](const char* what) { text += (text.empty() ? "" : ", ") + std::string(what); };
    const PointStorm& storm = row.outlet->storms[row.period];
    const PointStorm& raster = row.outlet->storms[row.raster];
    if (storm.governing.cell != raster.governing.cell) add("governing path");
    if (row.storm().last != row.network->storms[row.raster].last) add("last subarea");
    const auto names = [](const PointPeak& peak) {
        std::vector<PointNumber> numbers;
        for (const SubareaShare& share : peak.makers) numbers.push_back(share.subarea);
        return numbers;
    };
    if (names(row.peak()) != names((*row.periods)[row.raster])) add("peak subareas");
    return text;
}

void add_comparison_columns(const StudyResult& result, const ReportScale& scale, Table& table) {
    table.column("last_subarea", [&result](const PeakRow& r) { return point_name(result, r.storm().last); })
        .column("differs_from_raster_storm", differences)
        .column("handbook_part_alone_" + scale.flow_unit(), where_there([=](const PointPeak& p) { return five_digits(scale.flow(p.cases.part_alone)); }))
        .column("handbook_part_and_share_" + scale.flow_unit(), where_there([=](const PointPeak& p) { return five_digits(scale.flow(p.cases.part_and_share)); }))
        .column("handbook_part_min", where_there([](const PointPeak& p) { return peak_minutes(p.cases.time_of_part); }))
        .column("stated_above", [&result](const PeakRow& r) { return stated_in_words(result, r.network->stated_above); })
        .column("why_not", [](const PeakRow& r) { return r.peak().why_not; });
}

struct TimeAreaLine {
    PeakRow point;
    const TimeAreaRow* row = nullptr;
};

std::string runoff_text(const ReportScale& scale, FixedArea runoff) { return significant(scale.area(from_fixed_area(runoff)), 7); }

TableWriter<TimeAreaLine> time_area_columns(const ReportScale& scale) {
    TableWriter<TimeAreaLine> table;
    table.column("point", [](const TimeAreaLine& l) { return l.point.outlet->point.name; })
        .column("return_period_years", [](const TimeAreaLine& l) { return significant(l.point.return_period, 6); })
        .column("duration_min", [](const TimeAreaLine& l) { return peak_minutes(l.row->duration); })
        .column("arriving_since_ca_" + scale.area_unit(), [=](const TimeAreaLine& l) { return runoff_text(scale, l.row->in_band); })
        .column("arrived_ca_" + scale.area_unit(), [=](const TimeAreaLine& l) { return runoff_text(scale, l.row->running); })
        .column("window_begins_min", [](const TimeAreaLine& l) { return peak_minutes(l.row->window_begins); })
        .column("most_ca_" + scale.area_unit(), [=](const TimeAreaLine& l) { return runoff_text(scale, l.row->window.runoff); })
        .column("intensity_" + scale.intensity_unit(), [=](const TimeAreaLine& l) { return rain_text(scale, l.row->intensity); })
        .column("flow_" + scale.flow_unit(), [=](const TimeAreaLine& l) { return five_digits(scale.flow(l.row->flow)); })
        .column("searched", [](const TimeAreaLine& l) { return yes_or_no(l.row->is_searched); })
        .column("governs", [](const TimeAreaLine& l) { return yes_or_no(l.row->duration == l.point.peak().window.duration); });
    return table;
}

std::vector<PeakRow> peak_rows(const StudyResult& result) {
    std::vector<PeakRow> rows;
    for (const Outlet& outlet : result.outlets) {
        const std::vector<PointPeak>& periods = result.peaks.points[outlet.number - 1];
        for (std::size_t i = 0; i < periods.size(); ++i) {
            rows.push_back({&outlet, &result.network.points[outlet.number - 1], &periods, i, result.rain.raster, result.rain.storms[i].return_period});
        }
    }
    return rows;
}

}  // namespace

std::string peaks_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    Table table;
    add_coefficient_columns(scale, table);
    add_whole_columns(scale, table);
    add_partial_columns(result, scale, table);
    add_comparison_columns(result, scale, table);
    std::string text = table.header();
    for (const PeakRow& row : peak_rows(result)) text += table.line(row);
    return text;
}

std::string time_area_table(const StudyResult& result) {
    const TableWriter<TimeAreaLine> table = time_area_columns(ReportScale(result.study.report_units));
    std::string text = table.header();
    for (const PeakRow& point : peak_rows(result)) {
        for (const TimeAreaRow& row : point.peak().rows) text += table.line({point, &row});
    }
    return text;
}

}  // namespace rillclock
