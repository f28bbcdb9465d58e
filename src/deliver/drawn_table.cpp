#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "table_writer.hpp"

namespace rillclock {

std::string drawn_catchments_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    TableWriter<DrawnDifference> table;
    const auto outlet = [&result](const DrawnDifference& d) -> const Outlet& { return result.outlets[d.point - 1]; };
    const auto area = [&](const std::string& name, auto of) {
        table.column(name + "_" + scale.area_unit(), [=](const DrawnDifference& d) { return five_digits(scale.area(from_fixed_area(of(d)))); });
    };
    table.column("point", [&](const DrawnDifference& d) { return outlet(d).point.name; })
        .column("crossing_x", [&](const DrawnDifference& d) { return coordinate(result.system, outlet(d).point.stated.x); })
        .column("crossing_y", [&](const DrawnDifference& d) { return coordinate(result.system, outlet(d).point.stated.y); })
        .column("moved_" + scale.length_unit(), [&](const DrawnDifference& d) { return five_digits(scale.length(in_metres(outlet(d).point.moved))); });
    area("drawn_area", [](const DrawnDifference& d) { return d.drawn; });
    area("area_by_elevations", [](const DrawnDifference& d) { return d.found; });
    area("in_both", [](const DrawnDifference& d) { return d.both; });
    area("drawn_only", [](const DrawnDifference& d) { return d.drawn_only_area(); });
    area("elevations_only", [](const DrawnDifference& d) { return d.found_only_area(); });
    table.column("overlap_percent", [](const DrawnDifference& d) { return five_digits(100.0 * d.overlap()); });
    std::string text = table.header();
    for (const DrawnDifference& difference : result.drawn) text += table.line(difference);
    return text;
}

}  // namespace rillclock
