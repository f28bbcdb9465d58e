#include "rillclock/deliver/tables.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

std::string number_or_nothing(const std::optional<double>& value) { return value ? five_digits(*value) : std::string(); }

}  // namespace

std::string review_table(const StudyResult& result) {
    TableWriter<Notice> table;
    table.column("point", [](const Notice& n) { return n.point; })
        .column("notice", [](const Notice& n) { return n.code; })
        .column("value", [](const Notice& n) { return number_or_nothing(n.value); })
        .column("threshold", [](const Notice& n) { return number_or_nothing(n.threshold); })
        .column("return_period_years", [](const Notice& n) { return n.return_period ? significant(*n.return_period, 6) : std::string(); })
        .column("x", [&result](const Notice& n) { return n.place ? coordinate(result.system, n.place->x) : std::string(); })
        .column("y", [&result](const Notice& n) { return n.place ? coordinate(result.system, n.place->y) : std::string(); })
        .column("effect_min", [](const Notice& n) { return n.effect_s > 0 ? fixed_decimals(n.effect_s / 60.0, 3) : std::string(); })
        .column("text", [](const Notice& n) { return n.text; })
        .column("reviewed", [&result](const Notice& n) {
            const auto place = static_cast<std::size_t>(&n - result.notices.data());
            return place < result.reviewed.size() ? result.reviewed[place] : std::string();
        });
    std::string text = table.header();
    for (const Notice& notice : result.notices) text += table.line(notice);
    return text;
}

}  // namespace rillclock
