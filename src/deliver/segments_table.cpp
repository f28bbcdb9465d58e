#include <algorithm>
#include <cmath>

#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "segment_rows.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

using Table = TableWriter<SegmentRow>;

/// A number where the regime's formula uses it, nothing elsewhere.
template <class Value>
Table::Print only_in(Regime regime, Value value) {
    return [regime, value](const SegmentRow& row) {
        return row.segment->regime == regime ? five_digits(value(row)) : std::string();
    };
}

/// Both ends of u are printed so finely that their difference has five significant digits: the row's time hangs on it.
std::string index_text(const ReportScale& scale, const Segment& segment, double index_m) {
    const double growth = scale.length(segment.index_to_m - segment.index_from_m);
    if (!(growth > 0)) return five_digits(scale.length(index_m));
    const int decimals = std::clamp(4 - static_cast<int>(std::floor(std::log10(growth))), 2, 12);
    return fixed_decimals(scale.length(index_m), decimals);
}

void add_name_columns(const StudyResult& result, Table& table) {
    table.column("point", [](const SegmentRow& r) { return r.outlet->point.name; })
        .column("path", [](const SegmentRow& r) { return std::string(r.path_name); })
        .column("segment", [](const SegmentRow& r) { return std::to_string(r.number); })
        .column("regime", [](const SegmentRow& r) { return std::string(name_of(r.segment->regime)); })
        .column("cover", [&](const SegmentRow& r) {
            const CoverClass* cover = cover_of(result, *r.segment);
            return cover == nullptr ? std::string() : cover->name;
        });
}

/// The rain that the sheet-flow formula asks for.
std::string rain_column(const StudyResult& result, const ReportScale& scale) {
    if (result.study.timing.is_kinematic()) return "rain_intensity_" + scale.intensity_unit();
    return "rain_2_year_24_hour_" + scale.rain_unit();
}

void add_formula_columns(const StudyResult& result, const ReportScale& scale, Table& table) {
    const std::string m = scale.length_unit();
    table.column("length_" + m, [=](const SegmentRow& r) { return five_digits(scale.length(r.segment->length_m)); })
        .column("n", [&](const SegmentRow& r) {
            if (r.segment->regime == Regime::sheet) return five_digits(cover_of(result, *r.segment)->n_typical);
            return r.segment->regime == Regime::channel ? five_digits(result.rules.channel.n) : std::string();
        })
        .column("k_" + scale.speed_unit(), only_in(Regime::shallow, [&result, scale](const SegmentRow& r) {
            return scale.speed(in_metres_per_second(result.surface_classes[*r.segment->surface].shallow_k));
        }))
        .column("slope_equivalent", [](const SegmentRow& r) {
            return r.segment->slope_equivalent > 0 ? five_digits(r.segment->slope_equivalent) : std::string();
        })
        .column("index_from_" + m, [=](const SegmentRow& r) {
            return r.segment->regime == Regime::sheet ? index_text(scale, *r.segment, r.segment->index_from_m) : "";
        })
        .column("index_to_" + m, [=](const SegmentRow& r) {
            return r.segment->regime == Regime::sheet ? index_text(scale, *r.segment, r.segment->index_to_m) : "";
        })
        .column(rain_column(result, scale), only_in(Regime::sheet, [&result, scale](const SegmentRow& r) {
            const std::optional<Intensity> intensity = sheet_intensity(result, *r.outlet);
            return intensity ? scale.intensity(*intensity) : scale.rain(*result.rain.two_year_24_hour);
        }))
        .column("hydraulic_radius_" + m, only_in(Regime::channel, [=](const SegmentRow& r) {
            return scale.length(r.segment->radius_equivalent_m);
        }))
        .column("water_depth_" + m, only_in(Regime::water, [&result, scale](const SegmentRow& r) {
            return scale.length(in_metres(*cover_of(result, *r.segment)->water_depth));
        }));
}

void add_result_columns(const ReportScale& scale, Table& table) {
    const std::string m = scale.length_unit();
    table.column("velocity_" + scale.speed_unit(), [=](const SegmentRow& r) {
            return r.formula_s() > 0 ? five_digits(scale.speed(r.segment->length_m / r.formula_s())) : std::string();
        })
        .column("formula_time_s", [](const SegmentRow& r) { return fixed_decimals(r.formula_s(), 6); })
        .column("ponded_length_" + m, [=](const SegmentRow& r) { return five_digits(scale.length(r.segment->pond_length_m)); })
        .column("ponded_time_s", [](const SegmentRow& r) { return fixed_decimals(r.pond_time_s, 6); })
        .column("time_s", [](const SegmentRow& r) { return fixed_decimals(r.time_s, 6); })
        .column("time_min", [](const SegmentRow& r) { return fixed_decimals(r.time_s / 60.0, 3); })
        .column("running_time_min", [](const SegmentRow& r) { return fixed_decimals(r.running_s / 60.0, 3); });
}

void add_side_columns(const ReportScale& scale, Table& table) {
    const std::string m = scale.length_unit();
    table.column("slope_least", [](const SegmentRow& r) { return five_digits(r.segment->slope_least); })
        .column("slope_greatest", [](const SegmentRow& r) { return five_digits(r.segment->slope_greatest); })
        .column("fall_" + m, [=](const SegmentRow& r) { return five_digits(scale.length(r.segment->fall_m)); })
        .column("end_to_end_slope", [](const SegmentRow& r) { return five_digits(r.segment->end_to_end_slope()); })
        .column("end_to_end_time_min", [](const SegmentRow& r) { return fixed_decimals(r.segment->end_to_end_s / 60.0, 3); })
        .column("radius_from_" + m, only_in(Regime::channel, [=](const SegmentRow& r) { return scale.length(r.segment->radius_from_m); }))
        .column("radius_to_" + m, only_in(Regime::channel, [=](const SegmentRow& r) { return scale.length(r.segment->radius_to_m); }))
        .column("area_from_" + scale.area_unit(), [=](const SegmentRow& r) { return five_digits(scale.area(from_fixed_area(r.segment->area_from))); })
        .column("area_to_" + scale.area_unit(), [=](const SegmentRow& r) { return five_digits(scale.area(from_fixed_area(r.segment->area_to))); });
}

void add_place_columns(const StudyResult& result, Table& table) {
    table.column("x_from", [&](const SegmentRow& r) { return coordinate(result.system, segment_places(result, r).front().x); })
        .column("y_from", [&](const SegmentRow& r) { return coordinate(result.system, segment_places(result, r).front().y); })
        .column("x_to", [&](const SegmentRow& r) { return coordinate(result.system, segment_places(result, r).back().x); })
        .column("y_to", [&](const SegmentRow& r) { return coordinate(result.system, segment_places(result, r).back().y); });
}

}  // namespace

std::string segments_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    Table table;
    add_name_columns(result, table);
    add_formula_columns(result, scale, table);
    add_result_columns(scale, table);
    add_side_columns(scale, table);
    add_place_columns(result, table);
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) {
        for (const SegmentRow& row : segment_rows(outlet)) text += table.line(row);
    }
    return text;
}

}  // namespace rillclock
