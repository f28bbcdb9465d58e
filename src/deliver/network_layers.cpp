#include "network_layers.hpp"

#include "layer_writer.hpp"
#include "network_words.hpp"
#include "palette.hpp"

namespace rillclock {
namespace {

using layer_value::minutes_value;
using layer_value::number_value;
using layer_value::square_metres_of;
using layer_value::whole_value;
using layer_value::yes_no_value;

/// The way from a point to the next one in the network.
struct EdgeRow {
    const Outlet* outlet = nullptr;
    const PointNetwork* network = nullptr;
    const StatedPipe* pipe = nullptr;   ///< in place of the flow path; null without
    const PipeRun* run = nullptr;       ///< of the pipe

    [[nodiscard]] double seconds() const { return in_seconds(network->way.under(network->raster_storm().storm_factor)); }
};

using EdgeLayer = LayerWriter<EdgeRow>;

const PipeRun* run_of(const StudyResult& result, const StatedPipe* pipe) {
    for (const PipeRun& run : result.network.pipes) {
        if (pipe != nullptr && run.pipe == pipe) return &run;
    }
    return nullptr;
}

/// A field that only a way over the ground has.
template <class Value>
EdgeLayer::Value of_ground(Value value) {
    return [value](const EdgeRow& r) { return r.pipe == nullptr ? FieldValue(value(r.outlet->way)) : FieldValue(); };
}

/// A field that only a pipe has.
template <class Value>
EdgeLayer::Value of_pipe(Value value) {
    return [value](const EdgeRow& r) { return r.run != nullptr ? FieldValue(value(*r.run)) : FieldValue(); };
}

LayerStyle edge_style() {
    return {.field = "by", .looks = {{.value = "flow path", .label = "flow path", .stroke = colour_of(Regime::channel), .stroke_mm = 0.8},
                                     {.value = "pipe", .label = "pipe", .stroke = "#202020", .stroke_mm = 1.0}}};
}

void add_way_fields(const StudyResult& result, EdgeLayer& layer) {
    layer.field("point", FieldKind::text, "name of the design point where the way begins", [](const EdgeRow& r) { return r.outlet->point.name; })
        .field("next_point", FieldKind::text, "name of the design point where it ends", [&result](const EdgeRow& r) { return point_name(result, r.network->next); })
        .field("by", FieldKind::text, "flow path, or pipe", [](const EdgeRow& r) { return std::string(r.pipe == nullptr ? "flow path" : "pipe"); })
        .field("length_m", FieldKind::number, "length", [](const EdgeRow& r) {
            return number_value(r.pipe == nullptr ? from_fixed(r.outlet->way.length) : in_metres(r.pipe->length));
        })
        .field("fall_m", FieldKind::number, "fall of the spill elevation, or of the pipe", [](const EdgeRow& r) {
            return number_value(r.pipe == nullptr ? r.outlet->way.fall_m : r.pipe->bed.slope * in_metres(r.pipe->length));
        })
        .field("time_min", FieldKind::number, "time under the storm of the upper point, what is stated counted", [](const EdgeRow& r) { return minutes_value(r.seconds()); })
        .field("stated", FieldKind::text, "what is stated of the upper point in place of what is computed", [&result](const EdgeRow& r) {
            return marks_of(result.network.edits[r.outlet->number - 1]);
        })
        .field("area_m2", FieldKind::number, "area of all that drains through the upper point", [](const EdgeRow& r) { return square_metres_of(r.network->area); });
}

void add_kind_fields(const StudyResult& result, EdgeLayer& layer) {
    for (const Regime regime : {Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        const std::string name(name_of(regime));
        layer.field(name + "_percent", FieldKind::number, "share of the flow path's length that runs as " + name, of_ground([regime](const PointWay& way) {
            return number_value(100.0 * way.share(regime));
        }));
    }
    layer.field("diameter_m", FieldKind::number, "of the pipe", of_pipe([](const PipeRun& run) { return number_value(in_metres(run.pipe->pipe.diameter)); }))
        .field("n", FieldKind::number, "Manning's n of the pipe", of_pipe([](const PipeRun& run) { return number_value(run.pipe->bed.n); }))
        .field("slope", FieldKind::number, "of the pipe", of_pipe([](const PipeRun& run) { return number_value(run.pipe->bed.slope); }))
        .field("velocity_m_per_s", FieldKind::number, "in the pipe", of_pipe([](const PipeRun& run) { return number_value(in_metres_per_second(run.velocity)); }))
        .field("capacity_m3_per_s", FieldKind::number, "of the pipe, just full", of_pipe([](const PipeRun& run) {
            return number_value(in_cubic_metres_per_second(run.capacity));
        }))
        .field("design_flow_m3_per_s", FieldKind::number, "whole-area peak of all that comes to the pipe, by which it is timed; where that was asked for", of_pipe([](const PipeRun& run) {
            return run.design_flow ? number_value(in_cubic_metres_per_second(*run.design_flow)) : FieldValue();
        }))
        .field("peak_m3_per_s", FieldKind::number, "that comes to the pipe, at the return period that paths are for", of_pipe([&result](const PipeRun& run) {
            const PointPeak* peak = raster_peak(result, run.inlet);
            return peak == nullptr ? FieldValue() : number_value(in_cubic_metres_per_second(peak->partial), 5);
        }))
        .field("too_small", FieldKind::text, "whether that is more than the pipe takes just full", of_pipe([&result](const PipeRun& run) {
            const PointPeak* peak = raster_peak(result, run.inlet);
            return peak == nullptr ? FieldValue() : yes_no_value(peak->partial > run.capacity);
        }));
}

/// Along the cells of the flow path; a pipe runs straight.
Line edge_line(const StudyResult& result, const EdgeRow& row) {
    Line line;
    if (row.pipe != nullptr) {
        for (const PointNumber end : {row.outlet->number, row.network->next}) line.push_back(result.grid.centre(result.outlets[end - 1].point.cell));
        return line;
    }
    for (const Cell cell : row.outlet->way.cells) line.push_back(result.grid.centre(cell));
    return line;
}

/// The peak of a point under the storm of one return period.
struct PeakFeature {
    const Outlet* outlet = nullptr;
    const PointPeak* peak = nullptr;
    const NetworkStorm* storm = nullptr;
    double return_period = 0.0;
};

using PeakLayer = LayerWriter<PeakFeature>;

/// A field of a peak that is there; none where it is not.
template <class Value>
PeakLayer::Value if_there(Value value) {
    return [value](const PeakFeature& r) { return r.peak->is_there() ? FieldValue(value(*r.peak)) : FieldValue(); };
}

FieldValue flow_value(Discharge flow) { return number_value(in_cubic_metres_per_second(flow), 5); }
FieldValue rain_value(Intensity intensity) { return number_value(in_millimetres_per_hour(intensity), 7); }

std::string made_by(const PeakFeature& row) {
    if (!row.peak->is_there()) return "no peak";
    return row.peak->partial > row.peak->whole ? "part of the area" : "whole area";
}

LayerStyle peak_style() {
    return {.field = "made_by", .looks = {{.value = "whole area", .label = "made by the whole area", .fill = "#ffffff", .stroke = colour_of(Regime::channel), .stroke_mm = 0.6},
                                          {.value = "part of the area", .label = "made by a part of the area", .fill = colour_of(Regime::shallow), .stroke = "#202020", .stroke_mm = 0.6},
                                          {.value = "no peak", .label = "no peak", .fill = "#b0b0b0", .stroke = "#707070", .stroke_mm = 0.3}}};
}

void add_whole_fields(PeakLayer& layer) {
    layer.field("point", FieldKind::text, "name of the design point", [](const PeakFeature& r) { return r.outlet->point.name; })
        .field("return_period_years", FieldKind::number, "of the storm", [](const PeakFeature& r) { return number_value(r.return_period); })
        .field("made_by", FieldKind::text, "whether the whole area or a part of it makes the peak", made_by)
        .field("runoff_coefficient_before_factor", FieldKind::number, "mean C of the area, without the frequency factor",
               if_there([](const PointPeak& p) { return number_value(p.coefficient.plain); }))
        .field("runoff_coefficient_with_factor", FieldKind::number, "mean of the smaller of 1 and Cf C, with which peaks are made", if_there([](const PointPeak& p) {
            return number_value(p.coefficient.value);
        }))
        .field("time_of_concentration_min", FieldKind::number, "of the whole area under this storm", [](const PeakFeature& r) {
            return minutes_value(in_seconds(r.peak->whole_time));
        })
        .field("intensity_mm_per_h", FieldKind::number, "of rain on the whole area", if_there([](const PointPeak& p) { return rain_value(p.whole_intensity); }))
        .field("whole_area_peak_m3_per_s", FieldKind::number, "C i A of the whole area", if_there([](const PointPeak& p) { return flow_value(p.whole); }));
}

void add_partial_fields(const StudyResult& result, PeakLayer& layer) {
    layer.field("peak_m3_per_s", FieldKind::number, "the greatest over all durations; never less than that of the whole area", if_there([](const PointPeak& p) {
            return flow_value(p.partial);
        }))
        .field("peak_duration_min", FieldKind::number, "of the rain that makes it", if_there([](const PointPeak& p) { return minutes_value(in_seconds(p.window.duration)); }))
        .field("peak_intensity_mm_per_h", FieldKind::number, "of that rain", if_there([](const PointPeak& p) { return rain_value(p.peak_intensity); }))
        .field("peak_share_of_area_percent", FieldKind::number, "that makes it", if_there([](const PointPeak& p) { return number_value(100.0 * p.window_share, 5); }))
        .field("peak_subareas", FieldKind::text, "subareas that make it, with their shares", if_there([&result](const PointPeak& p) { return makers_in_words(result, p); }))
        .field("last_subarea", FieldKind::text, "whose water arrives last", [&result](const PeakFeature& r) { return point_name(result, r.storm->last); })
        .field("subareas", FieldKind::whole_number, "how many drain through the point", [](const PeakFeature& r) { return whole_value(r.storm->subareas_above); })
        .field("why_not", FieldKind::text, "why there is no peak", [](const PeakFeature& r) { return r.peak->is_there() ? FieldValue() : FieldValue(r.peak->why_not); });
}

}  // namespace

void write_network(const StudyResult& result, VectorFile& file) {
    EdgeLayer layer(file, {.name = "network", .description = "the way from each design point to the next one, drawn downstream; pipes straight",
                           .geometry = LayerGeometry::lines, .style = edge_style()});
    add_way_fields(result, layer);
    add_kind_fields(result, layer);
    layer.begin();
    for (const Outlet& outlet : result.outlets) {
        const PointNetwork& network = result.network.points[outlet.number - 1];
        if (network.next == 0) continue;
        const StatedPipe* pipe = result.network.edits[outlet.number - 1].pipe;
        const EdgeRow row{.outlet = &outlet, .network = &network, .pipe = pipe, .run = run_of(result, pipe)};
        Line line = edge_line(result, row);
        layer.add(line.size() < 2 ? std::vector<Line>() : std::vector<Line>{std::move(line)}, row);
    }
}

void write_peaks(const StudyResult& result, VectorFile& file) {
    PeakLayer layer(file, {.name = "peaks", .description = "peak flow at each design point for each return period", .geometry = LayerGeometry::points, .style = peak_style()});
    add_whole_fields(layer);
    add_partial_fields(result, layer);
    layer.begin();
    for (const Outlet& outlet : result.outlets) {
        const std::vector<PointPeak>& peaks = result.peaks.points[outlet.number - 1];
        for (std::size_t i = 0; i < peaks.size(); ++i) {
            layer.add(result.grid.centre(outlet.point.cell), {&outlet, &peaks[i], &result.network.points[outlet.number - 1].storms[i], result.rain.storms[i].return_period});
        }
    }
}

}  // namespace rillclock
