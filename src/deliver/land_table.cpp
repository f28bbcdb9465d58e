#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

/// One kind of land of a point: in its whole catchment, and in its own subarea.
struct LandRow {
    const Outlet* outlet = nullptr;
    const CoverClass* cover = nullptr;
    LandShare whole;
    LandShare own;
};

std::string digits_of(const std::optional<double>& value) {
    return value ? significant(*value, 6) : std::string();
}

TableWriter<LandRow> land_columns(const ReportScale& scale) {
    const auto area = [scale](FixedArea a) { return five_digits(scale.area(from_fixed_area(a))); };
    TableWriter<LandRow> table;
    table.column("point", [](const LandRow& r) { return r.outlet->point.name; })
        .column("cover_code", [](const LandRow& r) { return std::to_string(r.cover->code); })
        .column("cover", [](const LandRow& r) { return r.cover->name; })
        .column("soil_group", [](const LandRow& r) { return letter_of(r.whole.kind.soil); })
        .column("land_slope", [](const LandRow& r) { return words(r.whole.kind.slope); })
        .column("cells", [](const LandRow& r) { return std::to_string(r.whole.cells); })
        .column("area_" + scale.area_unit(), [=](const LandRow& r) { return area(r.whole.area); })
        .column("own_cells", [](const LandRow& r) { return std::to_string(r.own.cells); })
        .column("own_area_" + scale.area_unit(), [=](const LandRow& r) { return area(r.own.area); })
        .column("curve_number",
                [](const LandRow& r) {
                    const auto group = group_of(r.whole.kind.soil);
                    return group ? digits_of(r.cover->curve_number(*group)) : std::string();
                })
        .column("runoff_coefficient",
                [](const LandRow& r) { return digits_of(r.cover->coefficient(group_of(r.whole.kind.soil))); });
    return table;
}

LandShare land_share_of(const std::vector<LandShare>& land, const LandKind& kind) {
    for (const LandShare& share : land)
        if (share.kind == kind) return share;
    return {.kind = kind};
}

}  // namespace

std::string land_table(const StudyResult& result) {
    const TableWriter<LandRow> table = land_columns(ReportScale(result.study.report_units));
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) {
        const std::vector<LandShare> own = outlet.own_land.shares();
        for (const LandShare& share : outlet.ground.land().shares()) {
            text += table.line({.outlet = &outlet,
                                .cover = &result.book.classes()[share.kind.cover],
                                .whole = share,
                                .own = land_share_of(own, share.kind)});
        }
    }
    return text;
}

}  // namespace rillclock
