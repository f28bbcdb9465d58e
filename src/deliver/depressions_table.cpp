#include "rillclock/deliver/depressions_table.hpp"

#include "rillclock/deliver/report_units.hpp"
#include "shown_depth.hpp"
#include "table_writer.hpp"

namespace rillclock {

std::string depressions_table(const StudyResult& result, std::span<const Depression> depressions) {
    const ReportScale scale(result.study.report_units);
    const double metres_per_unit = result.format.metres_per_stored_unit();
    const double one_length = scale.length(1.0);
    TableWriter<Depression> table;
    table.column("depth_" + scale.length_unit(), [=](const Depression& d) { return five_digits(shown_depth(scale.length(d.depth * metres_per_unit))); })
        .column("area_" + scale.area_unit(), [=](const Depression& d) { return five_digits(scale.area(from_fixed_area(d.area))); })
        .column("volume_" + scale.length_unit() + "3",
                [=](const Depression& d) { return five_digits(d.volume * metres_per_unit * one_length * one_length * one_length); })
        .column("cells", [](const Depression& d) { return std::to_string(d.cells); })
        .column("on_governing_path", [](const Depression& d) { return yes_or_no(d.on_path); })
        .column("x", [&](const Depression& d) { return coordinate(result.system, result.grid.centre(d.deepest).x); })
        .column("y", [&](const Depression& d) { return coordinate(result.system, result.grid.centre(d.deepest).y); })
        .column("pass_x", [&](const Depression& d) { return coordinate(result.system, result.grid.centre(d.pass).x); })
        .column("pass_y", [&](const Depression& d) { return coordinate(result.system, result.grid.centre(d.pass).y); });
    std::string text = table.header();
    for (const Depression& depression : depressions) text += table.line(depression);
    return text;
}

}  // namespace rillclock
