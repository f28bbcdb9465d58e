#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

struct StormRow {
    const Outlet* outlet = nullptr;
    const PointStorm* storm = nullptr;
    double return_period = 0.0;
    double used_s = 0.0;  ///< the time its peak is made with
};

struct IterationRow {
    StormRow storm;
    std::size_t number = 0;  ///< from 1
    const StormIteration* round = nullptr;
};

std::vector<StormRow> storm_rows(const StudyResult& result) {
    std::vector<StormRow> rows;
    for (const Outlet& outlet : result.outlets) {
        for (std::size_t i = 0; i < outlet.storms.size(); ++i) {
            rows.push_back({&outlet, &outlet.storms[i], result.rain.storms[i].return_period, time_used_s(result.network, outlet, i)});
        }
    }
    return rows;
}

std::vector<IterationRow> iteration_rows(const StudyResult& result) {
    std::vector<IterationRow> rows;
    for (const StormRow& storm : storm_rows(result)) {
        const std::vector<StormIteration>& rounds = storm.storm->iteration.rows;
        for (std::size_t i = 0; i < rounds.size(); ++i) rows.push_back({storm, i + 1, &rounds[i]});
    }
    return rows;
}

/// What the intensity is to kinematic sheet flow.
std::string rain_of_sheet(const StudyResult& result) { return result.study.timing.sheet_takes_runoff ? "C i" : "i"; }

std::string storm_minutes(double s) {
    return fixed_decimals(s / 60.0, 4);
}

/// Seven digits, so that a time recomputed from it holds far below the tolerance of the iteration.
std::string intensity_text(const ReportScale& scale, Intensity intensity) {
    return significant(scale.intensity(intensity), 7);
}

template <class Row>
std::string text_of(const TableWriter<Row>& table, const std::vector<Row>& rows) {
    std::string text = table.header();
    for (const Row& row : rows) text += table.line(row);
    return text;
}

}  // namespace

std::string storms_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    const std::string m = scale.length_unit();
    TableWriter<StormRow> table;
    table.column("point", [](const StormRow& r) { return r.outlet->point.name; })
        .column("return_period_years", [](const StormRow& r) { return significant(r.return_period, 6); })
        .column("time_of_concentration_min", [](const StormRow& r) { return storm_minutes(r.storm->seconds()); })
        .column("time_used_min", [](const StormRow& r) { return storm_minutes(r.used_s); })
        .column("intensity_" + scale.intensity_unit(),
                [=](const StormRow& r) {
                    return r.storm->iteration.rows.empty() ? std::string()
                                                           : intensity_text(scale, r.storm->iteration.intensity());
                })
        .column("sheet_flow_under", [&](const StormRow&) { return result.study.timing.is_kinematic() ? rain_of_sheet(result) : std::string(); })
        .column("sheet_time_min", [](const StormRow& r) { return storm_minutes(r.storm->sheet_seconds()); })
        .column(
            "governing_head_x",
            [&](const StormRow& r) { return coordinate(result.system, result.grid.centre(r.storm->governing.cell).x); })
        .column(
            "governing_head_y",
            [&](const StormRow& r) { return coordinate(result.system, result.grid.centre(r.storm->governing.cell).y); })
        .column("governing_length_" + m,
                [=](const StormRow& r) { return five_digits(scale.length(from_fixed(r.storm->length))); })
        .column("rounds", [](const StormRow& r) { return std::to_string(r.storm->iteration.rows.size()); })
        .column("ended", [](const StormRow& r) { return std::string(words(r.storm->iteration.end)); });
    return text_of(table, storm_rows(result));
}

std::string iterations_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    TableWriter<IterationRow> table;
    table.column("point", [](const IterationRow& r) { return r.storm.outlet->point.name; })
        .column("return_period_years", [](const IterationRow& r) { return significant(r.storm.return_period, 6); })
        .column("round", [](const IterationRow& r) { return std::to_string(r.number); })
        .column("assumed_min", [](const IterationRow& r) { return storm_minutes(in_seconds(r.round->assumed)); })
        .column("intensity_" + scale.intensity_unit(),
                [=](const IterationRow& r) { return intensity_text(scale, r.round->intensity); })
        .column("sheet_flow_under", [&](const IterationRow&) { return rain_of_sheet(result); })
        .column("computed_min", [](const IterationRow& r) { return storm_minutes(in_seconds(r.round->computed)); });
    return text_of(table, iteration_rows(result));
}

}  // namespace rillclock
