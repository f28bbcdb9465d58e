#include "path_layers.hpp"

#include <algorithm>

#include "layer_writer.hpp"
#include "network_words.hpp"
#include "palette.hpp"
#include "path_branches.hpp"
#include "segment_rows.hpp"

namespace rillclock {
namespace {

using layer_value::minutes_value;
using layer_value::number_value;
using layer_value::whole_value;

struct PathRow {
    const Outlet* outlet = nullptr;
    const PointPath* path = nullptr;
    const PathBranch* branch = nullptr;
    std::string name;
};

/// A place alone is no line.
std::vector<Line> as_lines(Line line) { return line.size() < 2 ? std::vector<Line>() : std::vector<Line>{std::move(line)}; }

std::vector<Line> line_of(const StudyResult& result, const PathRow& row) {
    Line line;
    for (std::size_t position = 0; position <= row.branch->steps; ++position) line.push_back(result.grid.centre(row.path->cells[position]));
    return as_lines(std::move(line));
}

std::string path_name(bool governing) { return governing ? "governing" : "longest"; }

using PathLayer = LayerWriter<PathRow>;

/// A field that only a path has which goes on along another.
template <class Value>
PathLayer::Value where_joining(Value value) {
    return [value](const PathRow& r) { return r.branch->joins == nullptr ? FieldValue() : FieldValue(value(*r.branch)); };
}

void add_path_fields(const StudyResult& result, PathLayer& layer) {
    layer.field("point", FieldKind::text, "name of the design point", [](const PathRow& r) { return r.outlet->point.name; })
        .field("path", FieldKind::text, "governing: its water arrives last; longest: its water has the longest way", [](const PathRow& r) { return r.name; })
        .field("length_m", FieldKind::number, "length of the whole path", [](const PathRow& r) { return number_value(from_fixed(r.path->summary.length)); })
        .field("fall_m", FieldKind::number, "fall of the spill elevation, of the whole path", [](const PathRow& r) { return number_value(r.path->summary.fall_m); })
        .field("time_min", FieldKind::number, "travel time of the whole path", [](const PathRow& r) { return minutes_value(r.path->seconds); })
        .field("head_x", FieldKind::number, "where the path begins", [&result](const PathRow& r) { return result.grid.centre(r.path->cells.front()).x; })
        .field("head_y", FieldKind::number, "where the path begins", [&result](const PathRow& r) { return result.grid.centre(r.path->cells.front()).y; })
        .field("drawn_length_m", FieldKind::number, "of the way from the head that is drawn here; what runs with other paths is drawn with one of them",
               [](const PathRow& r) { return number_value(r.path->distance_m[r.branch->steps]); })
        .field("joins_point", FieldKind::text, "the path goes on from there along that of this point; null where it is drawn to its end",
               where_joining([](const PathBranch& branch) { return branch.joins->point.name; }))
        .field("joins_path", FieldKind::text, "which of that point's paths", where_joining([](const PathBranch& branch) { return path_name(branch.joins_governing); }));
}

void write_whole_paths(const StudyResult& result, const PathBranches& branches, VectorFile& file) {
    PathLayer layer(file, {.name = "paths", .description = "governing and longest path of each point, drawn downstream, each stretch once",
                           .geometry = LayerGeometry::lines,
                           .style = {.field = "path", .looks = {{.value = "governing", .label = "governing", .stroke = "#000000", .stroke_mm = 0.9},
                                                                {.value = "longest", .label = "longest", .stroke = "#cc79a7", .stroke_mm = 0.5}}}});
    add_path_fields(result, layer);
    layer.begin();
    for (std::size_t i = 0; i < result.outlets.size(); ++i) {
        const Outlet& outlet = result.outlets[i];
        for (const PathRow& row : {PathRow{&outlet, &outlet.governing, &branches.governing[i], path_name(true)},
                                   PathRow{&outlet, &outlet.longest, &branches.longest[i], path_name(false)}}) {
            layer.add(line_of(result, row), row);
        }
    }
}

LayerStyle regime_style() {
    LayerStyle style{.field = "regime"};
    for (const Regime regime : {Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        style.looks.push_back({.value = std::string(name_of(regime)), .label = std::string(name_of(regime)), .stroke = colour_of(regime),
                               .stroke_mm = regime == Regime::sheet ? 1.1 : 0.7});
    }
    return style;
}

void write_segments(const StudyResult& result, const PathBranches& branches, VectorFile& file) {
    LayerWriter<SegmentRow> layer(file, {.name = "segments", .description = "pieces of the paths that one formula times, as in segments.csv, each stretch drawn once",
                                         .geometry = LayerGeometry::lines, .style = regime_style()});
    layer.field("point", FieldKind::text, "name of the design point", [](const SegmentRow& r) { return r.outlet->point.name; })
        .field("path", FieldKind::text, "governing or longest", [](const SegmentRow& r) { return std::string(r.path_name); })
        .field("segment", FieldKind::whole_number, "number along the path", [](const SegmentRow& r) { return whole_value(r.number); })
        .field("regime", FieldKind::text, "how the water moves", [](const SegmentRow& r) { return std::string(name_of(r.segment->regime)); })
        .field("cover", FieldKind::text, "land cover; none in channels", [&result](const SegmentRow& r) {
            const CoverClass* cover = cover_of(result, *r.segment);
            return cover == nullptr ? FieldValue() : FieldValue(cover->name);
        })
        .field("length_m", FieldKind::number, "length, ponded cells included", [](const SegmentRow& r) { return number_value(r.segment->whole_length_m()); })
        .field("slope_equivalent", FieldKind::number, "slope that gives the same time", [](const SegmentRow& r) { return number_value(r.segment->slope_equivalent); })
        .field("fall_m", FieldKind::number, "fall of the spill elevation", [](const SegmentRow& r) { return number_value(r.segment->fall_m); })
        .field("time_min", FieldKind::number, "travel time", [](const SegmentRow& r) { return minutes_value(r.time_s); })
        .field("running_time_min", FieldKind::number, "from the head of the path to the end of the segment", [](const SegmentRow& r) { return minutes_value(r.running_s); });
    layer.begin();
    for (std::size_t i = 0; i < result.outlets.size(); ++i) {
        const Outlet& outlet = result.outlets[i];
        for (const SegmentRow& row : segment_rows(outlet)) {
            const PathBranch& branch = row.path == &outlet.governing ? branches.governing[i] : branches.longest[i];
            layer.add(as_lines(segment_places(result, row, branch.steps)), row);
        }
    }
}

}  // namespace

void write_paths(const StudyResult& result, VectorFile& file) {
    const PathBranches branches = path_branches(result);
    write_whole_paths(result, branches, file);
    write_segments(result, branches, file);
}

}  // namespace rillclock
