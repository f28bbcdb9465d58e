#include <algorithm>
#include <cmath>
#include <limits>

#include "chart.hpp"
#include "html_text.hpp"
#include "palette.hpp"
#include "report_parts.hpp"
#include "rillclock/deliver/report_units.hpp"
#include "segment_rows.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_profile_points = 160;

struct ProfilePoint {
    double distance_m = 0.0;   ///< from the head
    double ground_m = 0.0;
    double spill_m = 0.0;      ///< the lowest level at which water gets out: no lower than the ground anywhere below
};

/// The ground along a path, at no more places than a chart can show.
std::vector<ProfilePoint> ground_profile(const ReportMatter& matter, const PointPath& path) {
    const std::size_t stride = std::max<std::size_t>(1, path.cells.size() / most_profile_points);
    std::vector<double> spill(path.cells.size());
    double level = -std::numeric_limits<double>::infinity();
    for (std::size_t i = path.cells.size(); i-- > 0;) spill[i] = level = std::max(level, matter.ground_m(path.cells[i]));
    std::vector<ProfilePoint> profile;
    for (std::size_t i = 0; i < path.cells.size(); ++i) {
        if (i % stride == 0 || i + 1 == path.cells.size()) profile.push_back({path.distance_m[i], matter.ground_m(path.cells[i]), spill[i]});
    }
    return profile;
}

/// Where segments end: distance from the head and running time.
struct Station {
    double distance_m = 0.0;
    double running_s = 0.0;
};

std::vector<Station> profile_stations(const Outlet& outlet) {
    std::vector<Station> all(1);
    for (const SegmentRow& row : segment_rows(outlet, outlet.governing, "governing")) {
        all.push_back({all.back().distance_m + row.segment->whole_length_m(), row.running_s});
    }
    return all;
}

ChartStrip regime_strip(const ReportScale& scale, const Outlet& outlet) {
    ChartStrip strip;
    double distance = 0.0;
    for (const SegmentRow& row : segment_rows(outlet, outlet.governing, "governing")) {
        const double to = distance + row.segment->whole_length_m();
        const std::string regime(name_of(row.segment->regime));
        const bool joins = !strip.empty() && strip.back().label == regime;
        if (joins) strip.back().to = scale.length(to);
        if (!joins) strip.push_back({scale.length(distance), scale.length(to), colour_of(row.segment->regime), regime});
        distance = to;
    }
    return strip;
}

/// Land cover along the path; in channels there is none that matters.
ChartStrip cover_strip(const StudyResult& result, const Outlet& outlet) {
    const ReportScale scale(result.study.report_units);
    ChartStrip strip;
    double distance = 0.0;
    for (const SegmentRow& row : segment_rows(outlet, outlet.governing, "governing")) {
        const double to = distance + row.segment->whole_length_m();
        const CoverClass* cover = cover_of(result, *row.segment);
        const bool joins = cover != nullptr && !strip.empty() && strip.back().label == cover->name && strip.back().to == scale.length(distance);
        if (joins) strip.back().to = scale.length(to);
        if (cover != nullptr && !joins) strip.push_back({scale.length(distance), scale.length(to), "", cover->name});
        distance = to;
    }
    return strip;
}

std::string words_of(const ChartStrip& strip) {
    std::string words;
    for (const ChartStretch& stretch : strip) words += (words.empty() ? "" : ", then ") + stretch.label;
    return words;
}

std::string regime_words(const Outlet& outlet) { return words_of(regime_strip(ReportScale(ReportUnits::si), outlet)); }

/// Ground and spill elevation as lines, and the ponds between as a shape under them.
std::vector<ChartLine> profile_lines(const ReportScale& scale, const std::vector<ProfilePoint>& profile) {
    ChartLine ground{.kind = "ground"};
    ChartLine spill{.kind = "spill"};
    for (const ProfilePoint& point : profile) {
        ground.points.push_back({scale.length(point.distance_m), scale.length(point.ground_m)});
        spill.points.push_back({scale.length(point.distance_m), scale.length(point.spill_m)});
    }
    ChartLine pond{.kind = "pond", .points = spill.points};
    pond.points.insert(pond.points.end(), ground.points.rbegin(), ground.points.rend());
    return {pond, ground, spill};
}

std::string profile_finding(const ReportScale& scale, const Outlet& outlet) {
    const PathSummary& summary = outlet.governing.summary;
    const std::string m = " " + scale.length_unit();
    return "Long profile of the governing path: it falls " + significant(scale.length(summary.fall_m), 4) + m + " over " +
           significant(scale.length(from_fixed(summary.length)), 4) + m + ", as " + regime_words(outlet) + "; " +
           significant(100.0 * summary.share_of_length(summary.ponded_length_m), 3) + " % of it is ponded and " +
           significant(100.0 * summary.share_of_length(summary.floor_length_m), 3) + " % runs on the least slope.";
}

std::string profile_figure(const ReportMatter& matter, const Outlet& outlet) {
    const ReportScale scale(matter.result.study.report_units);
    const std::string m = scale.length_unit();
    const std::vector<ProfilePoint> profile = ground_profile(matter, outlet.governing);
    ChartAxes axes{.x_title = "distance from the divide, " + m, .y_title = "elevation, " + m,
                   .x_greatest = scale.length(from_fixed(outlet.governing.summary.length)),
                   .y_least = scale.length(profile.front().ground_m), .y_greatest = scale.length(profile.front().ground_m)};
    std::vector<std::vector<std::string>> rows;
    for (const ProfilePoint& point : profile) {
        axes.y_least = std::min(axes.y_least, scale.length(point.ground_m));
        axes.y_greatest = std::max(axes.y_greatest, scale.length(point.spill_m));
        rows.push_back({significant(scale.length(point.distance_m), 6), fixed_decimals(scale.length(point.ground_m), 2),
                        fixed_decimals(scale.length(point.spill_m), 2)});
    }
    const ChartStrip covers = cover_strip(matter.result, outlet);
    const std::string over = covers.empty() ? "." : "; below it the land cover outside channels: " + html_text(words_of(covers)) + ".";
    return figure("Long profile", line_chart(profile_finding(scale, outlet), axes, profile_lines(scale, profile), {regime_strip(scale, outlet), covers}),
                  "Solid: ground; dashed: spill elevation, the level at which the water gets out. Coloured bar: " + html_text(regime_words(outlet)) + over,
                  hidden_table("Table of the ground", {"distance " + m, "ground " + m, "spill elevation " + m}, rows));
}

std::string running_figure(const ReportMatter& matter, const Outlet& outlet) {
    const ReportScale scale(matter.result.study.report_units);
    const std::string m = scale.length_unit();
    ChartLine curve{.kind = "curve"};
    std::vector<std::vector<std::string>> rows;
    for (const Station& station : profile_stations(outlet)) {
        curve.points.push_back({scale.length(station.distance_m), station.running_s / 60.0});
        rows.push_back({significant(curve.points.back().x, 6), fixed_decimals(curve.points.back().y, 3)});
    }
    const ChartAxes axes{.x_title = "distance from the divide, " + m, .y_title = "running time, min", .x_greatest = curve.points.back().x,
                         .y_greatest = curve.points.back().y};
    const std::vector<SegmentRow> segments = segment_rows(outlet, outlet.governing, "governing");
    std::string slowest = "The path takes no time.";
    const auto longest = std::max_element(segments.begin(), segments.end(), [](const SegmentRow& a, const SegmentRow& b) { return a.time_s < b.time_s; });
    if (longest != segments.end()) {
        slowest = "Segment " + std::to_string(longest->number) + " (" + std::string(name_of(longest->segment->regime)) + ") takes longest: " +
                  shown_minutes(longest->time_s) + " of " + shown_minutes(outlet.time_of_concentration_s()) + " min.";
    }
    return figure("Running time along the governing path", line_chart("Running time along the governing path. " + slowest, axes, {curve},
                                                                     {regime_strip(scale, outlet)}),
                  slowest, hidden_table("Table of the segments' ends", {"distance " + m, "running time min"}, rows));
}

std::string arrival_figure(const Outlet& outlet) {
    ChartLine curve{.kind = "curve", .points = {{0.0, 0.0}}};
    std::vector<std::vector<std::string>> rows;
    const auto add = [&](double s, double share) {
        curve.points.push_back({s / 60.0, 100.0 * share});
        rows.push_back({significant(100.0 * share, 3), fixed_decimals(s / 60.0, 3)});
    };
    for (std::size_t i = 0; i < told_shares.size(); ++i) add(outlet.arrival_s[i], told_shares[i]);
    add(outlet.greatest_s, 1.0);
    const ChartAxes axes{.x_title = "time, min", .y_title = "area arrived, %", .x_greatest = outlet.greatest_s / 60.0, .y_greatest = 100.0};
    const std::string finding = "Half of the area has arrived after " + shown_minutes(outlet.arrival_s[0]) + " min, 95 % after " +
                                shown_minutes(outlet.arrival_s[2]) + " min, all of it after " + shown_minutes(outlet.greatest_s) + " min.";
    return figure("Arrival of the area", line_chart(finding, axes, {curve}), finding + " Between the told shares the line is straight.",
                  hidden_table("Table of arrivals", {"share of the area %", "time min"}, rows));
}

ChartRow dot_row(const std::string& label, double min) {
    return {.label = label, .note = shown_minutes(60.0 * min), .parts = {{0.0, min, "reach"}, {0.0, min, "dot"}}};
}

std::string methods_figure(const ReportMatter& matter, const Outlet& outlet) {
    const PointMethods& methods = matter.result.methods[outlet.number - 1];
    const double own = outlet.time_of_concentration_s();
    std::vector<ChartRow> dots{dot_row("along the governing path", own / 60.0)};
    std::vector<std::vector<std::string>> rows;
    for (const MethodTime& time : methods.times) {
        const std::string name(time.method->about.name);
        if (time.answer.is_applicable()) dots.push_back(dot_row(name, in_minutes(*time.answer.time)));
        rows.push_back({html_text(name), time.answer.time ? fixed_decimals(in_minutes(*time.answer.time), 2) : "–",
                        time.ratio ? significant(*time.ratio, 3) : "–", html_text(time.answer.why_not.empty() ? "applicable" : time.answer.why_not)});
    }
    std::string finding = "No formula that takes the catchment as one lump is within its range here; along the governing path it takes " + shown_minutes(own) + " min.";
    std::optional<double> median;
    if (methods.spread) {
        median = in_minutes(methods.spread->median);
        finding = std::to_string(methods.spread->methods) + " formulas within their range lie between " + shown_minutes(in_seconds(methods.spread->lowest)) +
                  " and " + shown_minutes(in_seconds(methods.spread->highest)) + " min, their median at " + shown_minutes(in_seconds(methods.spread->median)) +
                  " min; along the governing path it takes " + shown_minutes(own) + " min.";
    }
    return figure("Methods side by side", row_chart(finding, {.title = "time of concentration, min", .mark = median}, dots), finding + (median ? chart_keys({{"mark", "median"}}) : ""),
                  hidden_table("Table of all methods", {"method", "time min", "ratio to the path", "applicable, or why not"}, rows));
}

}  // namespace

std::string figure(const std::string& title, const std::string& chart, const std::string& caption, const std::string& table) {
    return "<figure><h3>" + title + "</h3>" + chart + "<figcaption>" + caption + "</figcaption>" + table + "</figure>\n";
}

std::string point_charts(const ReportMatter& matter, const Outlet& outlet) {
    return "<div class=\"charts\">" + profile_figure(matter, outlet) + running_figure(matter, outlet) + arrival_figure(outlet) +
           peak_figures(matter.result, outlet) + subarea_figure(matter.result, outlet) + methods_figure(matter, outlet) +
           uncertainty_figure(matter.result, outlet) + "</div>\n";
}

}  // namespace rillclock
