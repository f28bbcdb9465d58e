#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "network_words.hpp"
#include "table_writer.hpp"

namespace rillclock {

std::string pipes_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    const std::string m = scale.length_unit();
    TableWriter<PipeRun> table;
    table.column("from", [](const PipeRun& r) { return r.pipe->from; })
        .column("to", [](const PipeRun& r) { return r.pipe->to; })
        .column("length_" + m, [=](const PipeRun& r) { return five_digits(scale.length(in_metres(r.pipe->length))); })
        .column("diameter_" + m, [=](const PipeRun& r) { return five_digits(scale.length(in_metres(r.pipe->pipe.diameter))); })
        .column("n", [](const PipeRun& r) { return five_digits(r.pipe->bed.n); })
        .column("slope", [](const PipeRun& r) { return five_digits(r.pipe->bed.slope); })
        .column("capacity_" + scale.flow_unit(), [=](const PipeRun& r) { return five_digits(scale.flow(r.capacity)); })
        .column("design_flow_" + scale.flow_unit(), [=](const PipeRun& r) { return r.design_flow ? five_digits(scale.flow(*r.design_flow)) : std::string(); })
        .column("peak_" + scale.flow_unit(), [=, &result](const PipeRun& r) {
            const PointPeak* peak = raster_peak(result, r.inlet);
            return peak == nullptr ? std::string() : five_digits(scale.flow(peak->partial));
        })
        .column("too_small", [&result](const PipeRun& r) {
            const PointPeak* peak = raster_peak(result, r.inlet);
            return peak == nullptr ? std::string() : yes_or_no(peak->partial > r.capacity);
        })
        .column("velocity_" + scale.speed_unit(), [=](const PipeRun& r) { return five_digits(scale.speed(in_metres_per_second(r.velocity))); })
        .column("time_min", [](const PipeRun& r) { return fixed_decimals(in_minutes(r.time), 4); })
        .column("runs_full", [](const PipeRun& r) { return yes_or_no(!r.design_flow || *r.design_flow > r.capacity); });
    std::string text = table.header();
    for (const PipeRun& run : result.network.pipes) text += table.line(run);
    return text;
}

}  // namespace rillclock
