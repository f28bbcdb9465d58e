#include "ground_layers.hpp"

#include "layer_writer.hpp"
#include "shown_depth.hpp"

namespace rillclock {
namespace {

using layer_value::number_value;
using layer_value::square_metres_of;
using layer_value::whole_value;
using layer_value::yes_no_value;

struct OwnWayRow {
    const OwnWay* way = nullptr;
    std::size_t number = 0;
};

}  // namespace

void write_depressions(const StudyResult& result, std::span<const OutlinedDepression> depressions, VectorFile& file) {
    const double metres_per_unit = result.format.metres_per_stored_unit();
    LayerWriter<OutlinedDepression> layer(
        file, {.name = "depressions", .description = "ground below the level at which its water gets out: the deepest, and those on governing paths",
               .geometry = LayerGeometry::polygons, .indexed_field = "depression",
               .style = {.field = "on_governing_path",
                         .looks = {{.value = "yes", .label = "on a governing path", .fill = "#0072b2", .fill_opacity = 0.6,
                                    .stroke = "#d55e00", .stroke_mm = 0.5},
                                   {.value = "no", .label = "on none", .fill = "#56b4e9", .fill_opacity = 0.4, .stroke = "#0072b2", .stroke_mm = 0.15}}}});
    layer.field("depression", FieldKind::whole_number, "its row in depressions.csv, from 1, the deepest first",
                [](const OutlinedDepression& d) { return whole_value(d.number); })
        .field("depth_m", FieldKind::number, "greatest depth",
               [=](const OutlinedDepression& d) { return number_value(shown_depth(d.depression.depth * metres_per_unit)); })
        .field("area_m2", FieldKind::number, "area of its cells", [](const OutlinedDepression& d) { return square_metres_of(d.depression.area); })
        .field("volume_m3", FieldKind::number, "up to the level at which water gets out",
               [=](const OutlinedDepression& d) { return number_value(d.depression.volume * metres_per_unit); })
        .field("on_governing_path", FieldKind::text, "whether a governing path runs through it",
               [](const OutlinedDepression& d) { return yes_no_value(d.depression.on_path); })
        .field("pass_x", FieldKind::number, "where its water gets out",
               [&result](const OutlinedDepression& d) { return result.grid.centre(d.depression.pass).x; })
        .field("pass_y", FieldKind::number, "where its water gets out",
               [&result](const OutlinedDepression& d) { return result.grid.centre(d.depression.pass).y; });
    layer.begin();
    for (const OutlinedDepression& one : depressions) layer.add(one.outline, one);
}

void write_own_paths(const StudyResult& result, std::span<const OwnWay> ways, VectorFile& file) {
    LayerWriter<OwnWayRow> layer(file, {.name = "own_paths", .description = "where the water of mapped lines would go by the ground alone, drawn downstream",
                                        .geometry = LayerGeometry::lines, .indexed_field = "own_path",
                                        .style = alike({.stroke = "#d55e00", .stroke_mm = 0.7})});
    layer.field("own_path", FieldKind::whole_number, "its number, from 1, the one that departs farthest first",
                [](const OwnWayRow& r) { return whole_value(r.number); })
        .field("departure_m", FieldKind::number, "greatest distance from the way on which the lines lead the water",
               [](const OwnWayRow& r) { return number_value(in_metres(r.way->departure)); })
        .field("comes_back", FieldKind::text, "whether it comes back to that way", [](const OwnWayRow& r) { return yes_no_value(r.way->comes_back); });
    layer.begin();
    for (std::size_t i = 0; i < ways.size(); ++i) {
        Line line;
        for (const Cell cell : ways[i].cells) line.push_back(result.grid.centre(cell));
        layer.add(std::vector<Line>{std::move(line)}, {.way = &ways[i], .number = i + 1});
    }
}

}  // namespace rillclock
