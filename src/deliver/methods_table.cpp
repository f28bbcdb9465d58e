#include "rillclock/deliver/tables.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

struct MethodRow {
    const Outlet* outlet = nullptr;
    const MethodTime* time = nullptr;
};

TableWriter<MethodRow> method_columns() {
    TableWriter<MethodRow> table;
    table.column("point", [](const MethodRow& r) { return r.outlet->point.name; })
        .column("method", [](const MethodRow& r) { return std::string(r.time->method->about.id); })
        .column("name", [](const MethodRow& r) { return std::string(r.time->method->about.name); })
        .column("applicable", [](const MethodRow& r) { return yes_or_no(r.time->answer.is_applicable()); })
        .column("why_not", [](const MethodRow& r) { return r.time->answer.why_not; })
        .column("time_min",
                [](const MethodRow& r) {
                    return r.time->answer.time ? fixed_decimals(in_minutes(*r.time->answer.time), 3) : std::string();
                })
        .column("ratio_to_segments",
                [](const MethodRow& r) { return r.time->ratio ? five_digits(*r.time->ratio) : std::string(); });
    return table;
}

}  // namespace

std::string methods_table(const StudyResult& result) {
    const TableWriter<MethodRow> table = method_columns();
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) {
        for (const MethodTime& time : result.methods[outlet.number - 1].times) text += table.line({&outlet, &time});
    }
    return text;
}

}  // namespace rillclock
