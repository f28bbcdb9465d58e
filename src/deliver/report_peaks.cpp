#include <algorithm>

#include "chart.hpp"
#include "html_text.hpp"
#include "network_words.hpp"
#include "report_parts.hpp"
#include "rillclock/deliver/report_units.hpp"

namespace rillclock {
namespace {

using Cells = std::vector<std::string>;

/// The peaks of a point with the units they are told in.
struct PeakMatter {
    const StudyResult& result;
    const Outlet& outlet;
    ReportScale scale = ReportScale(result.study.report_units);

    [[nodiscard]] bool is_us() const { return result.study.report_units == ReportUnits::us; }
    [[nodiscard]] std::string flow_unit() const { return is_us() ? "ft³/s" : "m³/s"; }
    [[nodiscard]] std::string rain_unit() const { return is_us() ? "in/h" : "mm/h"; }
    [[nodiscard]] const std::vector<PointPeak>& peaks() const { return result.peaks.points[outlet.number - 1]; }
    [[nodiscard]] const PointPeak& raster_peak() const { return peaks()[result.rain.raster]; }
    [[nodiscard]] std::string years(std::size_t period) const { return significant(result.rain.storms[period].return_period, 6); }
    [[nodiscard]] std::string flow(Discharge q) const { return significant(scale.flow(q), 4); }
    [[nodiscard]] std::string rain(Intensity i) const { return significant(scale.intensity(i), 4); }
    [[nodiscard]] std::string runoff(FixedArea ca) const { return significant(scale.area(from_fixed_area(ca)), 5); }
    [[nodiscard]] const NetworkStorm& storm(std::size_t period) const { return result.network.points[outlet.number - 1].storms[period]; }
};

std::string shown_duration(Duration time) { return shown_minutes(in_seconds(time)); }

/// "4.14 m³/s, from rain of 23.8 min on 75 % of the area; the whole area gives 2.89".
std::string peak_words(const PeakMatter& matter, const PointPeak& peak) {
    const std::string text = matter.flow(peak.partial) + " " + matter.flow_unit();
    if (!(peak.partial > peak.whole)) return text + ", that of the whole area in rain of " + shown_duration(peak.window.duration) + " min";
    return text + ", from rain of " + shown_duration(peak.window.duration) + " min on " + significant(100.0 * peak.window_share, 3) +
           " % of the area; the whole area gives " + matter.flow(peak.whole);
}

std::string peaks_finding(const PeakMatter& matter) {
    std::string text;
    for (std::size_t i = 0; i < matter.peaks().size(); ++i) {
        const PointPeak& peak = matter.peaks()[i];
        text += (text.empty() ? "The peak of " : " Of ") + matter.years(i) + " years: " + (peak.is_there() ? peak_words(matter, peak) : "none, since " + peak.why_not) + ".";
    }
    return text;
}

ChartRow peak_row(const PeakMatter& matter, std::size_t period) {
    const PointPeak& peak = matter.peaks()[period];
    ChartRow row{.label = matter.years(period) + " years", .note = "no peak"};
    if (!peak.is_there()) return row;
    row.note = matter.flow(peak.partial) + "; whole area " + matter.flow(peak.whole);
    row.parts = {{0.0, matter.scale.flow(peak.partial), "bar", 0}, {0.0, matter.scale.flow(peak.whole), "open", 1}};
    return row;
}

Cells peak_cells(const PeakMatter& matter, std::size_t period) {
    const PointPeak& peak = matter.peaks()[period];
    Cells cells{matter.years(period), fixed_decimals(in_minutes(peak.whole_time), 2)};
    if (!peak.is_there()) {
        cells.insert(cells.end(), 10, "–");
        cells.back() = html_text(peak.why_not);
        return cells;
    }
    for (const std::string& text : {significant(peak.coefficient.value, 4), matter.rain(peak.whole_intensity), matter.flow(peak.whole),
                                    fixed_decimals(in_minutes(peak.window.duration), 2), matter.rain(peak.peak_intensity),
                                    significant(100.0 * peak.window_share, 3), matter.flow(peak.partial),
                                    matter.flow(peak.partial_at_least) + " to " + matter.flow(peak.partial_at_most),
                                    html_text(point_name(matter.result, matter.storm(period).last)), html_text(makers_in_words(matter.result, peak))}) {
        cells.push_back(text);
    }
    return cells;
}

Cells peak_head(const PeakMatter& matter) {
    return {"return period years", "time of concentration min", "C with Cf", "intensity " + matter.rain_unit(), "whole area " + matter.flow_unit(), "duration that makes most min",
            "intensity " + matter.rain_unit(), "share of the area %", "peak " + matter.flow_unit(), "peak if times were not binned " + matter.flow_unit(),
            "arrives last", "subareas that make the peak"};
}

std::string peaks_figure(const PeakMatter& matter) {
    std::vector<ChartRow> rows;
    std::vector<Cells> cells;
    for (std::size_t i = 0; i < matter.peaks().size(); ++i) {
        rows.push_back(peak_row(matter, i));
        cells.push_back(peak_cells(matter, i));
    }
    const std::string finding = peaks_finding(matter);
    return figure("Peak flow by return period", row_chart(finding, {.title = "peak flow, " + matter.flow_unit()}, rows),
                  html_text(finding) + " Rational method: the rain is taken as even over the area and steady for its duration, and nothing as stored on the way." +
                      chart_keys({{"bar", "the peak: the greatest over all durations"}, {"open", "from the whole area"}}),
                  hidden_table("Table of peaks", peak_head(matter), cells));
}

/// The search at the return period that paths and maps are for, in the same steps as tables/time_area.csv.
std::vector<ChartPanel> search_panels(const PeakMatter& matter) {
    std::vector<ChartPanel> panels{{.title = "C·A arrived, " + matter.scale.area_unit()}, {.title = "intensity i(d), " + matter.rain_unit()},
                                   {.title = "flow of rain of that duration, " + matter.flow_unit()}};
    for (const TimeAreaRow& row : matter.raster_peak().rows) {
        const double min = in_minutes(row.duration);
        panels[0].points.push_back({min, matter.scale.area(from_fixed_area(row.running))});
        if (!row.is_searched) continue;
        panels[1].points.push_back({min, matter.scale.intensity(row.intensity)});
        panels[2].points.push_back({min, matter.scale.flow(row.flow)});
    }
    return panels;
}

std::vector<Cells> search_cells(const PeakMatter& matter) {
    std::vector<Cells> cells;
    for (const TimeAreaRow& row : matter.raster_peak().rows) {
        const bool governs = row.duration == matter.raster_peak().window.duration;
        cells.push_back({fixed_decimals(in_minutes(row.duration), 2), matter.runoff(row.in_band), matter.runoff(row.running),
                         fixed_decimals(in_minutes(row.window_begins), 2), matter.runoff(row.window.runoff), matter.rain(row.intensity), matter.flow(row.flow),
                         governs ? "makes the peak" : row.is_searched ? "tried" : "below the least time"});
    }
    return cells;
}

std::vector<ChartMark> search_marks(const PointPeak& peak) {
    std::vector<ChartMark> marks{{in_minutes(peak.window.duration), "makes the peak: " + shown_duration(peak.window.duration) + " min"}};
    const bool is_part = peak.window.duration < peak.whole_time;
    if (is_part) marks.push_back({in_minutes(peak.whole_time), "all has arrived: " + shown_duration(peak.whole_time) + " min"});
    return marks;
}

std::string search_figure(const PeakMatter& matter) {
    const PointPeak& peak = matter.raster_peak();
    if (!peak.is_there() || peak.rows.empty()) return "";
    const std::string a = matter.scale.area_unit();
    const std::string years = matter.years(matter.result.rain.raster);
    const std::string finding = "Time and area in the storm of " + years + " years: within " + shown_duration(peak.window.duration) + " min at most " +
                                matter.runoff(peak.window.runoff) + " of " + matter.runoff(peak.coefficient.runoff) + " " + a + " of C·A arrives; at " +
                                matter.rain(peak.peak_intensity) + " " + matter.rain_unit() + " that makes " + matter.flow(peak.partial) + " " + matter.flow_unit() +
                                ", the most of all durations.";
    return figure("Time–area curve and the search for the peak, " + years + " years",
                  panel_chart(finding, "time since the rain began, and duration of the rain, min", search_panels(matter), search_marks(peak)),
                  html_text(finding) + " Flow is intensity times the most C·A that arrives within any stretch of that length; other return periods are in tables/time_area.csv.",
                  hidden_table("Table of the search", {"duration min", "C·A since the row before " + a, "C·A arrived " + a, "stretch begins min", "most C·A in it " + a,
                                                       "intensity " + matter.rain_unit(), "flow " + matter.flow_unit(), "what of it"}, search_cells(matter)));
}

}  // namespace

std::string peak_figures(const StudyResult& result, const Outlet& outlet) {
    if (!result.peaks.are_there()) return "";
    const PeakMatter matter{.result = result, .outlet = outlet};
    return peaks_figure(matter) + search_figure(matter);
}

}  // namespace rillclock
