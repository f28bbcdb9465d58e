#include <algorithm>
#include <cmath>

#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/tables.hpp"
#include "segment_rows.hpp"
#include "table_writer.hpp"

namespace rillclock {
namespace {

using SegmentTable = TableWriter<SegmentRow>;

/// A number where the regime's formula uses it, nothing elsewhere.
template <class Value>
SegmentTable::Print only_in(Regime regime, Value value) {
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

void add_name_columns(const StudyResult& result, SegmentTable& table) {
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

/// What shallow flow's k was made from, where the book gives that and it counts.
const ShallowConveyance* conveyance_of(const StudyResult& result, const Segment& segment) {
    if (segment.regime != Regime::shallow || result.study.timing.shallow != ShallowRule::by_cover) return nullptr;
    const std::optional<ShallowConveyance>& conveyance = cover_of(result, segment)->conveyance;
    return conveyance ? &*conveyance : nullptr;
}

std::string n_text(const StudyResult& result, const Segment& segment) {
    if (segment.regime == Regime::sheet) return five_digits(cover_of(result, segment)->n_typical);
    if (segment.regime == Regime::channel) return five_digits(segment.channel_n);
    const ShallowConveyance* conveyance = conveyance_of(result, segment);
    return conveyance == nullptr ? std::string() : five_digits(conveyance->n);
}

std::string radius_text(const StudyResult& result, const ReportScale& scale, const Segment& segment) {
    if (segment.regime == Regime::channel) return five_digits(scale.length(segment.radius_equivalent_m));
    const ShallowConveyance* conveyance = conveyance_of(result, segment);
    return conveyance == nullptr ? std::string() : five_digits(scale.length(in_metres(conveyance->hydraulic_radius)));
}

void add_sheet_columns(const StudyResult& result, const ReportScale& scale, SegmentTable& table) {
    const std::string m = scale.length_unit();
    // NRCS goes by the sheet index, the kinematic wave by the distance from the divide.
    const std::string place = result.study.timing.is_kinematic() ? "distance" : "index";
    table.column(place + "_from_" + m, [=](const SegmentRow& r) {
            return r.segment->regime == Regime::sheet ? index_text(scale, *r.segment, r.segment->index_from_m) : "";
        })
        .column(place + "_to_" + m, [=](const SegmentRow& r) {
            return r.segment->regime == Regime::sheet ? index_text(scale, *r.segment, r.segment->index_to_m) : "";
        })
        .column(rain_column(result, scale), only_in(Regime::sheet, [&result, scale](const SegmentRow& r) {
            const std::optional<Intensity> intensity = sheet_intensity(result, *r.outlet);
            return intensity ? scale.intensity(*intensity) : scale.rain(*two_year_depth(result, *r.outlet));
        }));
    if (!result.study.timing.sheet_takes_runoff) return;
    table.column("runoff_coefficient", only_in(Regime::sheet, [&result](const SegmentRow& r) {
        return *cover_of(result, *r.segment)->coefficient(result.study.surface.soil_group);
    }));
}

void add_formula_columns(const StudyResult& result, const ReportScale& scale, SegmentTable& table) {
    const std::string m = scale.length_unit();
    table.column("length_" + m, [=](const SegmentRow& r) { return five_digits(scale.length(r.segment->length_m)); })
        .column("n", [&](const SegmentRow& r) { return n_text(result, *r.segment); })
        .column("k_" + scale.speed_unit(), only_in(Regime::shallow, [=](const SegmentRow& r) {
            return scale.speed(r.segment->shallow_k_m_per_s);
        }))
        .column("slope_equivalent", [](const SegmentRow& r) {
            return r.segment->slope_equivalent > 0 ? five_digits(r.segment->slope_equivalent) : std::string();
        })
        .column("slope_exponent", only_in(Regime::shallow, [](const SegmentRow& r) { return r.segment->shallow_exponent; }))
        .column("hydraulic_radius_" + m, [&result, scale](const SegmentRow& r) { return radius_text(result, scale, *r.segment); })
        .column("water_depth_" + m, only_in(Regime::water, [&result, scale](const SegmentRow& r) {
            return scale.length(in_metres(*cover_of(result, *r.segment)->water_depth));
        }));
}

void add_result_columns(const ReportScale& scale, SegmentTable& table) {
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

void add_side_columns(const StudyResult& result, const ReportScale& scale, SegmentTable& table) {
    const std::string m = scale.length_unit();
    const double weight = step_weight(result);
    const auto whole = [=](const SegmentRow& r) { return scale.length(r.segment->whole_length_m()) / weight; };
    table.column("grid_length_" + m, [=](const SegmentRow& r) { return five_digits(whole(r)); })
        .column("unbiased_length_" + m, [=](const SegmentRow& r) { return five_digits(unbiased_step_weight * whole(r)); })
        .column("slope_least", [](const SegmentRow& r) { return five_digits(r.segment->slope_least); })
        .column("slope_greatest", [](const SegmentRow& r) { return five_digits(r.segment->slope_greatest); })
        .column("fall_" + m, [=](const SegmentRow& r) { return five_digits(scale.length(r.segment->fall_m)); })
        .column("end_to_end_slope", [](const SegmentRow& r) { return five_digits(r.segment->end_to_end_slope()); })
        .column("end_to_end_time_min", [](const SegmentRow& r) { return fixed_decimals(r.segment->end_to_end_s / 60.0, 3); })
        .column("radius_from_" + m, only_in(Regime::channel, [=](const SegmentRow& r) { return scale.length(r.segment->radius_from_m); }))
        .column("radius_to_" + m, only_in(Regime::channel, [=](const SegmentRow& r) { return scale.length(r.segment->radius_to_m); }))
        .column("area_from_" + scale.area_unit(), [=](const SegmentRow& r) { return five_digits(scale.area(from_fixed_area(r.segment->area_from))); })
        .column("area_to_" + scale.area_unit(), [=](const SegmentRow& r) { return five_digits(scale.area(from_fixed_area(r.segment->area_to))); });
}

/// How a channel's last cell carries the design storm: enough to find its flow and depth again.
void add_design_columns(const StudyResult& result, const ReportScale& scale, SegmentTable& table) {
    if (!result.study.timing.channel.design_storm) return;
    const std::string m = scale.length_unit();
    const auto at_end = [](auto number) {
        return [number](const SegmentRow& r) {
            const ChannelReach* reach = r.segment->reach_to;
            return reach != nullptr && reach->flow.m3_per_s > 0 ? five_digits(number(reach->flow)) : std::string();
        };
    };
    table.column("arrival_to_min", at_end([](const DesignFlow& f) { return f.arrival_s / 60.0; }))
        .column("intensity_to_" + scale.intensity_unit(), at_end([=](const DesignFlow& f) { return scale.intensity(f.intensity); }))
        .column("runoff_area_to_" + scale.area_unit(), at_end([=](const DesignFlow& f) { return scale.area(f.runoff_area_m2); }))
        .column("flow_to_" + scale.flow_unit(), at_end([=](const DesignFlow& f) { return scale.flow(f.m3_per_s); }))
        .column("slope_to", at_end([](const DesignFlow& f) { return f.slope; }))
        .column("width_to_" + m, at_end([=](const DesignFlow& f) { return scale.length(f.bottom_width_m); }))
        .column("side_slope_to", at_end([](const DesignFlow& f) { return f.side_slope; }))
        .column("depth_to_" + m, at_end([=](const DesignFlow& f) { return scale.length(f.depth_m); }));
}

/// What mapped channels state of their sections; only where any does. Under the design storm depth and spread give way to its own.
void add_section_columns(const StudyResult& result, const ReportScale& scale, SegmentTable& table) {
    if (result.sections.empty()) return;
    const std::string m = scale.length_unit();
    const auto of_shape = [&result](SectionShape shape, auto number) {
        return [&result, shape, number](const SegmentRow& r) {
            const MappedSection* section = section_of(result, *r.segment);
            return section != nullptr && section->shape == shape ? five_digits(number(*section)) : std::string();
        };
    };
    const auto in_unit = [scale](Length length) { return scale.length(in_metres(length)); };
    table.column("bottom_width_" + m, of_shape(SectionShape::trapezoid, [=](const MappedSection& s) { return in_unit(s.trapezoid.bottom_width); }))
        .column("side_slope", of_shape(SectionShape::trapezoid, [](const MappedSection& s) { return s.trapezoid.side_slope; }))
        .column("cross_fall", of_shape(SectionShape::gutter, [](const MappedSection& s) { return s.cross_fall; }));
    if (result.study.timing.channel.design_storm) return;
    table.column("flow_depth_" + m, of_shape(SectionShape::trapezoid, [=](const MappedSection& s) { return in_unit(s.depth); }))
        .column("spread_" + m, of_shape(SectionShape::gutter, [=](const MappedSection& s) { return in_unit(s.spread); }));
}

void add_end_columns(const StudyResult& result, SegmentTable& table) {
    table.column("x_from", [&](const SegmentRow& r) { return coordinate(result.system, segment_begin(result, r).x); })
        .column("y_from", [&](const SegmentRow& r) { return coordinate(result.system, segment_begin(result, r).y); })
        .column("x_to", [&](const SegmentRow& r) { return coordinate(result.system, segment_end(result, r).x); })
        .column("y_to", [&](const SegmentRow& r) { return coordinate(result.system, segment_end(result, r).y); });
}

}  // namespace

std::string segments_table(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    SegmentTable table;
    add_name_columns(result, table);
    add_formula_columns(result, scale, table);
    add_sheet_columns(result, scale, table);
    add_result_columns(scale, table);
    add_side_columns(result, scale, table);
    add_section_columns(result, scale, table);
    add_design_columns(result, scale, table);
    add_end_columns(result, table);
    std::string text = table.header();
    for (const Outlet& outlet : result.outlets) {
        for (const SegmentRow& row : segment_rows(outlet)) text += table.line(row);
    }
    return text;
}

}  // namespace rillclock
