#include "rillclock/deliver/study_geopackage.hpp"

#include <algorithm>
#include <set>

#include "ground_layers.hpp"
#include "isochrone_rows.hpp"
#include "layer_writer.hpp"
#include "network_layers.hpp"
#include "network_words.hpp"
#include "palette.hpp"
#include "path_layers.hpp"

namespace rillclock {
namespace {

using layer_value::minutes_value;
using layer_value::number_value;
using layer_value::square_metres_of;
using layer_value::whole_value;
using layer_value::yes_no_value;

void add_outlet_fields(const StudyResult& result, LayerWriter<Outlet>& layer) {
    layer.field("point", FieldKind::text, "name of the design point", [](const Outlet& o) { return o.point.name; })
        .field("number", FieldKind::whole_number, "its number, as in catchment.tif", [](const Outlet& o) { return whole_value(o.number); })
        .field("next_point", FieldKind::text, "the next point below",
               [&result](const Outlet& o) { return o.next == 0 ? FieldValue() : FieldValue(result.outlets[o.next - 1].point.name); })
        .field("area_m2", FieldKind::number, "area of the whole catchment", [](const Outlet& o) { return square_metres_of(o.area); })
        .field("own_area_m2", FieldKind::number, "area that reaches no other point first", [](const Outlet& o) { return square_metres_of(o.own_area); })
        .field("network_area_m2", FieldKind::number, "area of all whose water comes to the point, by pipes too",
               [&result](const Outlet& o) { return square_metres_of(result.network.points[o.number - 1].area); })
        .field("time_used_min", FieldKind::number, "time with which the point's peaks are made: in the network, where there are pipes or stated figures",
               [&result](const Outlet& o) { return minutes_value(time_shown_s(result, o)); })
        .field("stated_acts", FieldKind::text, "whether pipes or stated figures act on area, time or peak",
               [&result](const Outlet& o) { return yes_no_value(is_stated_felt(result.network, o)); })
        .field("time_of_concentration_min", FieldKind::number, "time along the governing path, over the ground alone",
               [](const Outlet& o) { return minutes_value(o.time_of_concentration_s()); })
        .field("half_arrived_min", FieldKind::number, "when half of the area has arrived", [](const Outlet& o) { return minutes_value(o.arrival_s[0]); })
        .field("governing_length_m", FieldKind::number, "length of the governing path",
               [](const Outlet& o) { return number_value(from_fixed(o.governing.summary.length)); })
        .field("touches_edge", FieldKind::text, "whether the catchment reaches the edge of the data: area and time are then lower bounds",
               [](const Outlet& o) { return yes_no_value(o.touches_edge()); });
}

void write_outlets(const StudyResult& result, VectorFile& file) {
    LayerWriter<Outlet> layer(file, {.name = "outlets", .description = "design points", .geometry = LayerGeometry::points,
                                     .style = alike({.fill = "#ffffff", .stroke = "#000000", .stroke_mm = 0.6}, "point")});
    add_outlet_fields(result, layer);
    layer.begin();
    for (const Outlet& outlet : result.outlets) layer.add(result.grid.centre(outlet.point.cell), outlet);
}

/// Large catchments first, so that small ones lie on them.
void write_catchments(const StudyResult& result, const StudyRegions& regions, VectorFile& file) {
    LayerWriter<Outlet> layer(file, {.name = "catchments", .description = "all that drains through each point", .geometry = LayerGeometry::polygons,
                                     .style = alike({.stroke = "#404040", .stroke_mm = 0.5})});
    add_outlet_fields(result, layer);
    layer.begin();
    const bool has_all = has_all_catchments(result.study, result.outlets.size());
    for (const Outlet& outlet : result.outlets) {
        if (has_all || outlet.next == 0) layer.add(placed(regions.catchment(outlet.number), result.grid), outlet);
    }
}

void write_subareas(const StudyResult& result, const StudyRegions& regions, VectorFile& file) {
    LayerWriter<Outlet> layer(file, {.name = "subareas", .description = "what reaches each point before any other", .geometry = LayerGeometry::polygons,
                                     .style = alike({.fill = "#a0a0a0", .fill_opacity = 0.15, .stroke = "#707070", .stroke_mm = 0.2})});
    add_outlet_fields(result, layer);
    layer.begin();
    for (const Outlet& outlet : result.outlets) layer.add(placed(regions.subarea(outlet.number), result.grid), outlet);
}

std::string band_text(const IsochroneRow& row) { return significant(row.from_min, 6) + " to " + significant(row.to_min, 6) + " min"; }

LayerStyle band_style(const std::vector<IsochroneRow>& rows) {
    LayerStyle style{.field = "band"};
    double greatest = 0.0;
    std::set<double> begun;
    for (const IsochroneRow& row : rows) greatest = std::max(greatest, row.from_min);
    for (const IsochroneRow& row : rows) {
        if (!begun.insert(row.from_min).second) continue;
        style.looks.push_back({.value = band_text(row), .label = band_text(row), .fill = colour_of_time(row.from_min, greatest), .fill_opacity = 0.6,
                               .stroke = "#303030", .stroke_mm = 0.15});
    }
    return style;
}

/// Null where the study has no rain by duration or no runoff coefficients.
void add_runoff_fields(const StudyResult& result, LayerWriter<IsochroneRow>& layer) {
    const auto where_any = [](auto value) {
        return [value](const IsochroneRow& r) { return r.runoff ? value(*r.runoff) : FieldValue(); };
    };
    layer.field("return_period_years", FieldKind::number, "of the storm that the next fields are for",
                where_any([&result](const BandRunoff&) { return number_value(result.rain.raster_storm().return_period); }))
        .field("ca_m2", FieldKind::number, "runoff coefficient times area, of the band",
               where_any([](const BandRunoff& b) { return number_value(in_square_metres(b.runoff), 9); }))
        .field("ca_until_m2", FieldKind::number, "the same of this and all earlier bands",
               where_any([](const BandRunoff& b) { return number_value(in_square_metres(b.running), 9); }))
        .field("rain_duration_min", FieldKind::number, "by when all of the band has arrived: rain as long as that is read, or as the least time",
               where_any([](const BandRunoff& b) { return minutes_value(in_seconds(b.time)); }))
        .field("intensity_mm_per_h", FieldKind::number, "of that rain; null where the rain ends before",
               where_any([](const BandRunoff& b) { return b.intensity ? number_value(in_millimetres_per_hour(*b.intensity), 9) : FieldValue(); }))
        .field("flow_m3_per_s", FieldKind::number, "intensity times ca_until_m2",
               where_any([](const BandRunoff& b) { return b.flow ? number_value(in_cubic_metres_per_second(*b.flow), 9) : FieldValue(); }));
}

void write_isochrones(const StudyResult& result, const StudyRegions& regions, VectorFile& file) {
    const std::vector<IsochroneRow> rows = isochrone_rows(result, regions);
    LayerWriter<IsochroneRow> layer(file, {.name = "isochrones", .description = isochrone_description(result),
                                           .geometry = LayerGeometry::polygons, .style = band_style(rows)});
    layer.field("point", FieldKind::text, "name of the design point", [](const IsochroneRow& r) { return r.outlet->point.name; })
        .field("of", FieldKind::text, "subarea, or the whole catchment of a last point", [](const IsochroneRow& r) { return std::string(words(r.band->scope)); })
        .field("band", FieldKind::text, "between which times", [](const IsochroneRow& r) { return band_text(r); })
        .field("from_min", FieldKind::number, "least time", [](const IsochroneRow& r) { return number_value(r.from_min); })
        .field("to_min", FieldKind::number, "time that is not reached", [](const IsochroneRow& r) { return number_value(r.to_min); })
        .field("area_m2", FieldKind::number, "area of the band", [](const IsochroneRow& r) { return square_metres_of(r.band->area); })
        .field("area_until_m2", FieldKind::number, "area of this and all earlier bands", [](const IsochroneRow& r) { return square_metres_of(r.area_until); })
        .field("share_until", FieldKind::number, "the same as a share of all", [](const IsochroneRow& r) {
            return number_value(static_cast<double>(r.area_until) / static_cast<double>(r.area_in_all));
        })
        .field("subareas", FieldKind::text, "the subareas within it, with the area of each in m2",
               [&result](const IsochroneRow& r) { return parts_in_words(result, *r.band); })
        .field("borders", FieldKind::text, "cells, or smoothed: by less than half a cell; areas are those of the cells",
               [&result](const IsochroneRow&) { return std::string(border_words(*result.isochrones)); })
        .field("stated_above", FieldKind::text, "what is stated here or above in place of what is computed; stated times and those of pipes are not in the bands",
               [&result](const IsochroneRow& r) {
                   const std::string stated = stated_in_words(result, result.network.points[r.band->point - 1].stated_above);
                   return stated.empty() ? FieldValue() : FieldValue(stated);
               });
    add_runoff_fields(result, layer);
    layer.begin();
    for (const IsochroneRow& row : rows) layer.add(placed(regions.outline(*row.band), result.grid), row);
}

/// One of the two sides of a difference.
struct DifferenceRow {
    const DrawnDifference* of = nullptr;
    bool drawn = false;
};

void write_differences(const StudyResult& result, VectorFile& file) {
    const std::string drawn_only = "drawn only";
    const std::string elevations_only = "elevations only";
    LayerWriter<DifferenceRow> layer(
        file, {.name = "catchment_differences", .description = "where hand-drawn catchments and those of the elevations disagree",
               .geometry = LayerGeometry::polygons,
               .style = {.field = "who_has_it", .looks = {{.value = drawn_only, .label = drawn_only, .fill = "#e69f00", .fill_opacity = 0.6},
                                                    {.value = elevations_only, .label = elevations_only, .fill = "#0072b2", .fill_opacity = 0.6}}}});
    layer.field("point", FieldKind::text, "name of the design point", [&result](const DifferenceRow& r) { return point_name(result, r.of->point); })
        .field("who_has_it", FieldKind::text, "drawn only, or elevations only", [&](const DifferenceRow& r) { return r.drawn ? drawn_only : elevations_only; })
        .field("area_m2", FieldKind::number, "its area", [](const DifferenceRow& r) {
            return square_metres_of(r.drawn ? r.of->drawn_only_area() : r.of->found_only_area());
        });
    layer.begin();
    for (const DrawnDifference& one : result.drawn) {
        if (!one.drawn_only.empty()) layer.add(placed(one.drawn_only, result.grid), {&one, true});
        if (!one.found_only.empty()) layer.add(placed(one.found_only, result.grid), {&one, false});
    }
}

}  // namespace

bool has_all_catchments(const Study& study, std::size_t points) {
    return study.output.all_catchments.value_or(points <= most_points_with_catchments);
}

std::string words_on_left_out_catchments(const Study& study, std::size_t points) {
    if (study.output.all_catchments || has_all_catchments(study, points)) return {};
    return "whole catchments in study.gpkg are those of the last points alone, since there are more than " + std::to_string(most_points_with_catchments) +
           " points; it has the subareas of all, and output.catchments = \"all\" asks for all";
}

void write_study_geopackage(const std::filesystem::path& path, const StudyResult& result, const StudyShapes& shapes) {
    const StudyRegions& regions = shapes.regions;
    VectorFile file(path, result.system);
    if (regions.isochrones()) write_isochrones(result, regions, file);
    write_subareas(result, regions, file);
    write_catchments(result, regions, file);
    if (!result.drawn.empty()) write_differences(result, file);
    write_depressions(result, shapes.depressions, file);
    if (shapes.own_ways) write_own_paths(result, *shapes.own_ways, file);
    write_paths(result, file);
    write_network(result, file);
    write_outlets(result, file);
    if (result.peaks.are_there()) write_peaks(result, file);
    file.close();
}

}  // namespace rillclock
