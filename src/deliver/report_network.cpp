#include <algorithm>

#include "chart.hpp"
#include "html_text.hpp"
#include "network_words.hpp"
#include "report_parts.hpp"
#include "rillclock/deliver/report_units.hpp"

namespace rillclock {
namespace {

using Cells = std::vector<std::string>;

constexpr std::size_t most_bars = 12;
constexpr std::size_t most_rows = 40;

/// A subarea as a point below it sees it.
struct Arriving {
    const SubareaArrival* arrival = nullptr;
    const SubareaShare* share = nullptr;   ///< null where there is no peak
};

std::vector<Arriving> arriving_at(const StudyResult& result, const Outlet& outlet) {
    const NetworkStorm& storm = result.network.points[outlet.number - 1].raster_storm();
    const PointPeak* peak = raster_peak(result, outlet.number);
    std::vector<Arriving> all;
    for (std::size_t i = 0; i < storm.subareas.size(); ++i) {
        all.push_back({&storm.subareas[i], peak != nullptr ? &peak->shares[i] : nullptr});
    }
    return all;
}

double minutes_of(FixedTime time) { return from_fixed(time) / 60.0; }

std::string percent(double share) { return significant(100.0 * share, 3) + " %"; }

ChartRow arrival_row(const StudyResult& result, const Arriving& row, FixedTime whole, bool is_last) {
    const SubareaArrival& arrival = *row.arrival;
    std::string note = is_last ? "arrives last" : "slack " + shown_minutes(from_fixed(arrival.slack)) + " min";
    if (row.share != nullptr) note += ", " + percent(row.share->of_window) + " of peak";
    return {.label = point_name(result, arrival.subarea), .note = note,
            .parts = {{minutes_of(arrival.arrival()), minutes_of(whole), "faint"}, {0.0, minutes_of(arrival.own), "bar"},
                      {minutes_of(arrival.own), minutes_of(arrival.arrival()), "open"}}};
}

Cells arrival_cells(const StudyResult& result, const Arriving& row, FixedArea all, bool is_last) {
    const ReportScale scale(result.study.report_units);
    const SubareaArrival& arrival = *row.arrival;
    const Outlet& subarea = result.outlets[arrival.subarea - 1];
    const std::string stated = marks_of(result.network.edits[arrival.subarea - 1]);
    return {html_text(subarea.point.name), significant(scale.area(from_fixed_area(subarea.own_area)), 4),
            significant(100.0 * from_fixed_area(subarea.own_area) / from_fixed_area(all), 3),
            fixed_decimals(minutes_of(arrival.own), 3), fixed_decimals(minutes_of(arrival.way), 3), fixed_decimals(minutes_of(arrival.arrival()), 3),
            fixed_decimals(minutes_of(arrival.slack), 3) + (is_last ? ", arrives last" : ""),
            row.share == nullptr ? "–" : significant(100.0 * row.share->of_runoff, 3), row.share == nullptr ? "–" : significant(100.0 * row.share->of_window, 3),
            stated.empty() ? "–" : html_text(stated)};
}

std::string subarea_finding(const StudyResult& result, const Outlet& outlet) {
    const NetworkStorm& storm = result.network.points[outlet.number - 1].raster_storm();
    std::string text = "Of " + std::to_string(storm.subareas_above) + " subareas that of '" + point_name(result, storm.last) + "' arrives last, after " +
                       shown_minutes(from_fixed(storm.time)) + " min";
    if (storm.lead) text += ", by " + shown_minutes(from_fixed(*storm.lead)) + " min";
    const PointPeak* peak = raster_peak(result, outlet.number);
    if (peak == nullptr || peak->makers.empty()) return text + ".";
    const SubareaShare& first = peak->makers.front();
    text += first.subarea == storm.last ? "; it has the greatest share of the peak too, " : "; '" + point_name(result, first.subarea) + "' has the greatest share of the peak, ";
    return text + percent(first.of_window) + ".";
}

std::string left_out(std::size_t all, std::size_t shown, const std::string& what) {
    return all > shown ? " " + what + " " + std::to_string(shown) + " of " + std::to_string(all) + " with the least slack; tables/subareas.csv has more." : "";
}

std::string number_or_dash(bool is_there, double value) { return is_there ? significant(value, 4) : "–"; }

/// A row for each point of which something is stated: what, in the units of the report.
Cells stated_cells(const StudyResult& result, PointNumber number) {
    const ReportScale scale(result.study.report_units);
    const PointEdit& edit = result.network.edits[number - 1];
    const PointOverride none{};
    const PointOverride& stated = edit.stated != nullptr ? *edit.stated : none;
    std::string pipe = "–";
    if (edit.pipe != nullptr) {
        pipe = "to " + html_text(point_name(result, edit.piped_to)) + ", " + significant(scale.length(in_metres(edit.pipe->length)), 4) + " " + scale.length_unit() + " of " +
               significant(scale.length(in_metres(edit.pipe->pipe.diameter)), 3) + " " + scale.length_unit();
    }
    return {html_text(point_name(result, number)), number_or_dash(stated.time.has_value(), stated.time ? in_minutes(*stated.time) : 0.0),
            number_or_dash(stated.way_time.has_value(), stated.way_time ? in_minutes(*stated.way_time) : 0.0),
            number_or_dash(stated.coefficient.has_value(), stated.coefficient.value_or(0.0)),
            number_or_dash(stated.overland.sheet_length.has_value(), stated.overland.sheet_length ? scale.length(in_metres(*stated.overland.sheet_length)) : 0.0),
            number_or_dash(stated.overland.n.has_value(), stated.overland.n.value_or(0.0)), pipe};
}

}  // namespace

std::string subarea_figure(const StudyResult& result, const Outlet& outlet) {
    const PointNetwork& network = result.network.points[outlet.number - 1];
    const NetworkStorm& storm = network.raster_storm();
    if (storm.subareas_above < 2) return "";
    std::vector<ChartRow> bars;
    std::vector<Cells> cells;
    for (const Arriving& row : arriving_at(result, outlet)) {
        const bool is_last = row.arrival->subarea == storm.last;
        if (bars.size() < most_bars) bars.push_back(arrival_row(result, row, storm.time, is_last));
        if (cells.size() < most_rows) cells.push_back(arrival_cells(result, row, network.area, is_last));
    }
    const std::string finding = subarea_finding(result, outlet);
    const std::string caption = html_text(finding) + left_out(storm.subareas_above, bars.size(), "Shown are the") + 
                                chart_keys({{"bar", "own time"}, {"open", "way to this point"}, {"faint", "slack"}, {"mark", "time of concentration in the network"}});
    return figure("Subareas: arrival, slack and share of the peak", row_chart(finding, {.title = "time, min", .mark = minutes_of(storm.time)}, bars), caption,
                  hidden_table("Table of subareas", {"subarea", "own area " + ReportScale(result.study.report_units).area_unit(), "share of the area %", "own time min", "way min",
                                                     "arrival min", "slack min", "share of the runoff %", "share of the peak %", "stated"}, cells));
}

std::string stated_part(const StudyResult& result, const Outlet& outlet) {
    const PointNetwork& network = result.network.points[outlet.number - 1];
    if (network.stated_above.empty()) return "";
    const std::string m = ReportScale(result.study.report_units).length_unit();
    std::vector<Cells> cells;
    for (const PointNumber number : network.stated_above) {
        if (cells.size() < most_rows) cells.push_back(stated_cells(result, number));
    }
    const std::string more = network.stated_above.size() > cells.size() ? " The first " + std::to_string(cells.size()) + " of " + std::to_string(network.stated_above.size()) + " are shown." : "";
    return "<h3>Stated in place of what is computed</h3><p>What is stated here and above acts on the time in the network, " +
           shown_minutes(from_fixed(network.raster_storm().time)) + " min, and on the peaks; over the ground alone the time is " + shown_minutes(outlet.time_of_concentration_s()) +
           " min, and paths, segments and rasters are those of the ground." + more + "</p>" +
           plain_table({"point", "own time min", "way to the next point min", "C", "sheet flow " + m, "n of sheet flow", "pipe"}, cells);
}

}  // namespace rillclock
