#include <algorithm>

#include "html_text.hpp"
#include "network_words.hpp"
#include "report_parts.hpp"
#include "rillclock/deliver/report_units.hpp"
#include "segment_rows.hpp"

namespace rillclock {
namespace {

using Cells = std::vector<std::string>;

std::string cell(const std::string& html, const std::string& tag, bool is_wide) {
    return "<" + tag + (is_wide ? " class=\"wide\"" : tag == "th" ? " scope=\"col\"" : "") + ">" + html + "</" + tag + ">";
}

/// Words take what room they need; numbers do not break.
bool is_words(const std::string& html) { return html.size() > 24; }

std::string fact(const std::string& name, const std::string& value) {
    return "<div><dt>" + name + "</dt><dd>" + value + "</dd></div>";
}

/// What the network and the storm say of the point; nothing where neither has anything to say.
std::string network_facts(const StudyResult& result, const Outlet& outlet) {
    const ReportScale scale(result.study.report_units);
    const NetworkStorm& storm = result.network.points[outlet.number - 1].raster_storm();
    std::string html;
    if (storm.subareas_above > 1) {
        html += fact("Arrives last", html_text(point_name(result, storm.last)) + (storm.lead ? ", by " + shown_minutes(from_fixed(*storm.lead)) + " min" : std::string()));
    }
    if (!result.peaks.are_there()) return html;
    const PointPeak& peak = result.peaks.points[outlet.number - 1][result.rain.raster];
    const std::string unit = result.study.report_units == ReportUnits::us ? " ft³/s" : " m³/s";
    html += fact("Peak of " + significant(result.rain.raster_storm().return_period, 6) + " years",
                 peak.is_there() ? significant(scale.flow(peak.partial), 4) + unit : "none, since " + html_text(peak.why_not));
    if (peak.is_there() && !peak.makers.empty() && storm.subareas_above > 1) {
        html += fact("Greatest share of the peak", html_text(point_name(result, peak.makers.front().subarea)) + ", " + significant(100.0 * peak.makers.front().of_window, 3) + " %");
    }
    return html;
}

std::string facts(const StudyResult& result, const Outlet& outlet) {
    const ReportScale scale(result.study.report_units);
    const std::string m = " " + scale.length_unit();
    const std::string area = " " + scale.area_unit();
    const PathSummary& path = outlet.governing.summary;
    const std::optional<MethodSpread>& spread = result.methods[outlet.number - 1].spread;
    const double tc = time_shown_s(result, outlet);
    const bool is_felt = is_stated_felt(result.network, outlet);
    const std::string at_least = outlet.touches_edge() ? ", at least" : "";
    const auto area_words = [&](FixedArea fixed) { return significant(scale.area(from_fixed_area(fixed)), 4) + area; };
    std::string html = "<dl class=\"facts\">";
    html += fact("Time of concentration", shown_minutes(tc) + " min" + at_least + (is_felt ? ", in the network with pipes and stated figures" : ""));
    if (is_felt) html += fact("Over the ground alone", shown_minutes(outlet.time_of_concentration_s()) + " min from " + area_words(outlet.area));
    html += fact("Lag, 0.6 of it", shown_minutes(0.6 * tc) + " min");
    html += fact("Catchment", area_words(area_shown(result, outlet)) + at_least);
    html += fact("Of it reaching no other point first", area_words(outlet.own_area));
    html += fact("Governing path", significant(scale.length(from_fixed(path.length)), 4) + m + ", falling " + significant(scale.length(path.fall_m), 4) + m);
    html += fact("Longest path", significant(scale.length(from_fixed(outlet.longest.summary.length)), 4) + m + ", " + shown_minutes(outlet.longest.seconds) + " min");
    html += fact("By end-to-end slopes", shown_minutes(outlet.governing.end_to_end_s) + " min");
    if (spread) html += fact("Other methods", shown_minutes(in_seconds(spread->lowest)) + " to " + shown_minutes(in_seconds(spread->highest)) + " min");
    for (const DrawnDifference& one : result.drawn) {
        if (one.point == outlet.number) html += fact("Drawn catchment", significant(scale.area(from_fixed_area(one.drawn)), 4) + area + ", " + fixed_decimals(100.0 * one.overlap(), 1) + " % in common");
    }
    html += network_facts(result, outlet);
    const PointNumber next = result.network.points[outlet.number - 1].next;
    const std::string by = result.network.edits[outlet.number - 1].pipe == nullptr ? "" : ", by a pipe";
    html += fact("Next point", next == 0 ? "none" : "<a href=\"#p" + std::to_string(next) + "\">" + html_text(point_name(result, next)) + "</a>" + by);
    return html + "</dl>\n";
}

std::string notices_of_point(const StudyResult& result, const Outlet& outlet) {
    std::string items;
    for (const Notice& notice : result.notices) {
        if (notice.point == outlet.point.name) items += "<li>" + html_text(notice.text) + "</li>";
    }
    return items.empty() ? "<p>Nothing was noticed at this point.</p>\n" : "<ul class=\"notices\">" + items + "</ul>\n";
}

std::string slope_text(double slope) { return slope > 0 ? significant(slope, 4) : "–"; }

Cells segment_cells(const StudyResult& result, const SegmentRow& row) {
    const ReportScale scale(result.study.report_units);
    const CoverClass* cover = cover_of(result, *row.segment);
    return {std::to_string(row.number), std::string(name_of(row.segment->regime)), cover == nullptr ? "–" : html_text(cover->name),
            significant(scale.length(row.segment->whole_length_m()), 4), significant(scale.length(row.segment->pond_length_m), 3),
            slope_text(row.segment->slope_equivalent), significant(scale.length(row.segment->fall_m), 3),
            fixed_decimals(row.time_s / 60.0, 3), fixed_decimals(row.running_s / 60.0, 3)};
}

std::string segments(const StudyResult& result, const Outlet& outlet) {
    const std::string m = ReportScale(result.study.report_units).length_unit();
    std::vector<Cells> rows;
    for (const SegmentRow& row : segment_rows(outlet, outlet.governing, "governing")) rows.push_back(segment_cells(result, row));
    return "<h3>Segments of the governing path</h3>" +
           plain_table({"segment", "regime", "cover", "length " + m, "of it ponded " + m, "slope", "fall " + m, "time min", "running time min"}, rows);
}

/// The land of the catchment by cover, soil and slope, with the share that is paved.
std::string ground(const StudyResult& result, const Outlet& outlet) {
    const ReportScale scale(result.study.report_units);
    FixedArea all = 0;
    FixedArea paved = 0;
    for (const LandShare& share : outlet.ground.land().shares()) {
        all += share.area;
        if (result.book.classes()[share.kind.cover].paved) paved += share.area;
    }
    if (all == 0) return "";
    std::vector<Cells> rows;
    for (const LandShare& share : outlet.ground.land().shares()) {
        const CoverClass& cover = result.book.classes()[share.kind.cover];
        const std::string soil = letter_of(share.kind.soil);
        rows.push_back({html_text(cover.name), soil.empty() ? "–" : soil, std::string(words(share.kind.slope)),
                        significant(scale.area(from_fixed_area(share.area)), 4), fixed_decimals(100.0 * static_cast<double>(share.area) / static_cast<double>(all), 1),
                        cover.n_typical > 0 ? significant(cover.n_typical, 3) : "–", cover.paved ? "yes" : "no"});
    }
    const std::optional<double>& impervious = result.methods[outlet.number - 1].measures.impervious;
    const std::string share = impervious ? " By the book's shares " + significant(100.0 * *impervious, 3) + " % of the area is impervious." : "";
    return "<h3>Land of the catchment</h3><p>" + fixed_decimals(100.0 * static_cast<double>(paved) / static_cast<double>(all), 1) +
           " % of the area is of paved classes; the average slope of the land is " + significant(outlet.ground.land_slope(), 3) + "." + share + "</p>" +
           plain_table({"cover", "soil group", "slope of the land", "area " + scale.area_unit(), "share %", "n of sheet flow", "paved"}, rows);
}

/// A calculation sheet as pages may part it: before an item or a heading, and never between a heading and what it heads. The text stays the same.
std::string sheet_in_parts(const std::string& text) {
    std::string html;
    bool after_blank = true;
    for (std::size_t begin = 0; begin < text.size();) {
        const std::size_t end = std::min(text.find('\n', begin), text.size() - 1) + 1;
        const std::string line = text.substr(begin, end - begin);
        const bool is_item = line.starts_with("* ");
        if (is_item || (after_blank && !line.starts_with(" ") && line != "\n")) {
            html += std::string(html.empty() ? "" : "</span>") + (is_item ? "<span class=\"item\">" : "<span class=\"head\">");
        }
        html += html_text(line);
        after_blank = line == "\n";
        begin = end;
    }
    return html + (html.empty() ? "" : "</span>");
}

std::string sheet(const ReportMatter& matter, const Outlet& outlet) {
    return "<details class=\"sheet\"><summary>Calculation sheet, line by line</summary><pre>" +
           sheet_in_parts(sheet_text(matter.sheets.sheet(outlet.number - 1))) + "</pre></details>\n";
}

}  // namespace

std::string plain_table(const Cells& head, const std::vector<Cells>& rows) {
    std::string html = "<div class=\"scroll\" tabindex=\"0\"><table><thead><tr>";
    for (const std::string& name : head) html += cell(name, "th", false);
    html += "</tr></thead><tbody>\n";
    for (const Cells& row : rows) {
        html += "<tr>";
        for (const std::string& value : row) html += cell(value, "td", is_words(value));
        html += "</tr>\n";
    }
    return html + "</tbody></table></div>\n";
}

std::string hidden_table(const std::string& summary, const Cells& head, const std::vector<Cells>& rows) {
    return "<details><summary>" + summary + "</summary>" + plain_table(head, rows) + "</details>";
}

std::string point_section(const ReportMatter& matter, const Outlet& outlet, SectionDetail detail) {
    const std::string number = std::to_string(outlet.number);
    std::string html = "<section class=\"point\" id=\"p" + number + "\" aria-labelledby=\"h" + number + "\"><h2 id=\"h" + number +
                       "\" tabindex=\"-1\">" + html_text(outlet.point.name) + "</h2>\n";
    html += facts(matter.result, outlet) + stated_part(matter.result, outlet) + notices_of_point(matter.result, outlet);
    if (detail != SectionDetail::figures) html += point_charts(matter, outlet);
    html += segments(matter.result, outlet);
    if (detail != SectionDetail::figures) html += ground(matter.result, outlet);
    if (detail == SectionDetail::with_sheet) html += sheet(matter, outlet);
    return html + "</section>\n";
}

}  // namespace rillclock
