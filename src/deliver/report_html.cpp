#include "rillclock/deliver/report.hpp"

#include <algorithm>
#include <array>
#include <string_view>

#include "html_text.hpp"
#include "network_words.hpp"
#include "isochrone_rows.hpp"
#include "report_files.hpp"
#include "report_parts.hpp"
#include "rillclock/core/noticed_kinds.hpp"
#include "rillclock/deliver/cautions.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/version.hpp"
#include "rillclock/io/data_url.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_bytes = 9'900'000;               ///< of the file; the last section may go a little over
constexpr std::size_t most_bytes_of_sections = 6'500'000;
constexpr std::size_t bytes_of_the_rest = 400'000;          ///< scripts, styles, licence, findings
constexpr std::size_t bytes_of_a_row = 400;                 ///< of the table of points

/// Nothing is fetched, and no script runs but those that are named here by their checksums.
std::string policy() {
    return "default-src 'none'; img-src data:; style-src '" + policy_hash(report_style()) + "' '" + policy_hash(leaflet_style()) + "'; script-src '" +
           policy_hash(report_first_script()) + "' '" + policy_hash(leaflet_script()) + "' '" + policy_hash(report_script()) + "'; base-uri 'none'; form-action 'none'";
}

std::string title_of(const StudyResult& result) { return result.study.title.empty() ? "Travel time of water" : result.study.title; }

std::string head(const StudyResult& result) {
    return "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n<meta http-equiv=\"Content-Security-Policy\" content=\"" + policy() +
           "\">\n<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n<title>" + html_text(title_of(result)) +
           "</title>\n<style>" + std::string(leaflet_style()) + "</style>\n<style>" + std::string(report_style()) + "</style>\n<script>" + std::string(report_first_script()) +
           "</script>\n</head>\n<body>\n";
}

/// "2 m × 2 m", in the unit of the grid's own coordinates.
std::string cell_text(const Grid& grid, const ReferenceSystem& system) {
    if (system.is_geographic()) {
        return significant(grid.cell_width * system.degrees_per_unit(), 5) + "° × " + significant(grid.cell_height * system.degrees_per_unit(), 5) + "°";
    }
    const LengthUnit& unit = system.linear_unit();
    const std::string name = unit.is_metre() ? " m" : unit.is_foot() ? " ft" : " " + unit.name;
    return significant(grid.cell_width, 5) + name + " × " + significant(grid.cell_height, 5) + name;
}

/// No clock is read, so that the same inputs give the same bytes: the day is the study's own word, and the files are told by their checksums.
std::string when(const StudyResult& result) {
    std::string html = result.study.date.empty() ? "No day is stated; <code>date</code> in the study file states one."
                                                 : "State of " + html_text(result.study.date) + ".";
    if (!result.study.scenario.empty()) {
        html += " This is the scenario " + html_text(result.study.scenario) + "; <a href=\"../report.html\">the study's own report</a> has the two side by side.";
    }
    return "<p class=\"where\">" + html + "</p>\n";
}

std::string where(const StudyResult& result) {
    constexpr std::size_t digits_shown = 8;
    std::string inputs;
    for (const InputFile& file : result.inputs) {
        inputs += (inputs.empty() ? "" : "; ") + html_text(file.role + " " + file.name) + " <code title=\"SHA-256 " + html_text(file.sha256) + "\">" +
                  html_text(file.sha256.substr(0, digits_shown)) + "</code>";
    }
    const Grid& grid = result.grid;
    return "<p class=\"where\">" + html_text(result.system.name()) + ", " + std::to_string(grid.columns) + " × " + std::to_string(grid.rows) +
           " cells of " + html_text(cell_text(grid, result.system)) + ". Made from " + inputs +
           " (each with the beginning of its SHA-256; result.json has all of it).</p>\n";
}

std::string caution_box() {
    std::string html = "<div class=\"caution\" role=\"note\">";
    for (const std::string_view caution : cautions) html += "<p>" + html_text(caution) + "</p>";
    return html + "</div>\n";
}

std::string findings(const StudyResult& result) {
    std::string html = "<ul class=\"findings\">";
    for (const std::string& sentence : headlines(result)) html += "<li>" + html_text(sentence) + "</li>";
    return html + "</ul>\n";
}

/// One item for each kind, so that none is hidden behind many of another.
std::string eye(const StudyResult& result) {
    if (result.notices.empty()) return "";
    std::string html = "<details class=\"eye\" open><summary>What needs a person's eye, by its effect on the time</summary><ul class=\"notices\">";
    for (const NoticedKind& kind : noticed_kinds(result.notices)) {
        const std::string likewise = likewise_words(kind);
        html += "<li>" + html_text(kind.first->text) + (likewise.empty() ? "" : " <em>" + html_text(likewise) + "</em>") + "</li>";
    }
    return html + "</ul><p>All of them stand at the points and in tables/review.csv.</p></details>\n";
}

std::string map_part(const ReportMatter& matter) {
    return "<figure class=\"map\"><div id=\"map\" class=\"only-scripted\" role=\"application\" aria-label=\"map of travel times, paths and points; the "
           "table of points leads to the same\"></div>" + map_pictures(matter) + "<noscript><p>Without scripts the map shows relief and travel times alone.</p></noscript>" +
           map_legend(matter) + "<figcaption>Travel time to the last point on the way down, in the projection of the elevations, over shaded relief; isochrones are drawn where the mean over nine dots enters the next class; "
           "governing paths by regime." + (has_stated_times(matter.result) ? " Here " + std::string(ground_times_words) + "." : "") + map_reduction(matter) + "<span id=\"outlines\"></span></figcaption></figure>\n";
}

bool is_made_by_part(const StudyResult& result, const Outlet& outlet) {
    const PointPeak* peak = raster_peak(result, outlet.number);
    return peak != nullptr && peak->partial > peak->whole;
}

/// What the points can be filtered by: words of a row, and what they say.
struct PointFilter {
    std::string_view word;
    std::string_view words;
    bool (*fits)(const StudyResult&, const Outlet&);
};

constexpr std::array<PointFilter, 5> filters = {{
    {"part", "a part of the area makes the peak", is_made_by_part},
    {"edge", "catchment touches the edge of the data", [](const StudyResult&, const Outlet& o) { return o.touches_edge(); }},
    {"moved", "point was moved", [](const StudyResult&, const Outlet& o) { return in_metres(o.point.moved) > 0; }},
    {"stated", "something is stated here or above", [](const StudyResult& r, const Outlet& o) { return !r.network.points[o.number - 1].stated_above.empty(); }},
    {"last", "last on the way down", [](const StudyResult& r, const Outlet& o) { return r.network.points[o.number - 1].next == 0; }},
}};

std::string filter_words(const StudyResult& result, const Outlet& outlet) {
    std::string words;
    for (const PointFilter& filter : filters) {
        if (filter.fits(result, outlet)) words += (words.empty() ? "" : " ") + std::string(filter.word);
    }
    return words;
}

/// A choice for each filter that fits some point.
std::string filter_choice(const StudyResult& result) {
    std::string html = "<label>Show <select id=\"filter\"><option value=\"\">all points</option>";
    for (const PointFilter& filter : filters) {
        const bool any = std::any_of(result.outlets.begin(), result.outlets.end(), [&](const Outlet& outlet) { return filter.fits(result, outlet); });
        if (any) html += "<option value=\"" + std::string(filter.word) + "\">" + std::string(filter.words) + "</option>";
    }
    return html + "</select></label>";
}

std::string peak_cell(const StudyResult& result, const Outlet& outlet) {
    if (!result.peaks.are_there()) return "";
    const PointPeak* peak = raster_peak(result, outlet.number);
    return "<td>" + (peak != nullptr ? significant(ReportScale(result.study.report_units).flow(peak->partial), 4) : std::string("–")) + "</td>";
}

std::string outlet_row(const StudyResult& result, const Outlet& outlet, bool has_section) {
    const ReportScale scale(result.study.report_units);
    const std::string number = std::to_string(outlet.number);
    const std::string mark = stated_mark(result, outlet);
    const auto notices = std::count_if(result.notices.begin(), result.notices.end(), [&](const Notice& n) { return n.point == outlet.point.name; });
    const std::string box = has_section ? "<input type=\"checkbox\" value=\"" + number + "\" aria-label=\"print " + html_text(outlet.point.name) + "\">" : "";
    return "<tr data-number=\"" + number + "\" data-is=\"" + filter_words(result, outlet) + "\"><td><a href=\"#p" + number + "\">" + html_text(outlet.point.name) + "</a></td><td>" +
           significant(scale.area(from_fixed_area(area_shown(result, outlet))), 4) + mark + "</td><td>" + fixed_decimals(time_shown_s(result, outlet) / 60.0, 3) + mark + "</td><td>" +
           fixed_decimals(outlet.arrival_s[0] / 60.0, 3) + "</td><td>" + significant(scale.length(from_fixed(outlet.governing.summary.length)), 4) +
           "</td>" + peak_cell(result, outlet) + "<td>" + std::to_string(notices) + "</td><td class=\"only-scripted\">" + box + "</td></tr>\n";
}

/// The sections of the points, the largest catchments first until they are too much for one file.
struct Sections {
    std::string html;
    std::vector<bool> has_section;
    std::size_t with_sheet = 0;
    std::size_t with_charts = 0;
    std::size_t all = 0;
};

/// What map and table leave to the sections.
std::size_t room_for_sections(const ReportMatter& matter, std::size_t map_bytes) {
    const std::size_t taken = map_bytes + bytes_of_the_rest + bytes_of_a_row * matter.result.outlets.size();
    return taken < most_bytes ? std::min(most_bytes - taken, most_bytes_of_sections) : 0;
}

/// The first five thirteenths of the room go to sections with all they can have, four more to those with charts.
SectionDetail detail_after(std::size_t bytes, std::size_t room) {
    if (bytes * 13 <= room * 5) return SectionDetail::with_sheet;
    return bytes * 13 <= room * 9 ? SectionDetail::without_sheet : SectionDetail::figures;
}

Sections sections_of(const ReportMatter& matter, std::size_t room) {
    Sections sections{.html = {}, .has_section = std::vector<bool>(matter.result.outlets.size(), false)};
    for (const std::size_t i : by_area(matter.result)) {
        if (sections.html.size() > room) break;
        const SectionDetail detail = detail_after(sections.html.size(), room);
        sections.html += point_section(matter, matter.result.outlets[i], detail);
        sections.has_section[i] = true;
        sections.with_sheet += detail == SectionDetail::with_sheet ? 1 : 0;
        sections.with_charts += detail == SectionDetail::figures ? 0 : 1;
        ++sections.all;
    }
    return sections;
}

std::vector<std::string> point_columns(const StudyResult& result) {
    const ReportScale scale(result.study.report_units);
    std::vector<std::string> names{"point", "area " + scale.area_unit(), "time min", "half arrived min", "path " + scale.length_unit()};
    if (result.peaks.are_there()) {
        names.push_back("peak of " + significant(result.rain.raster_storm().return_period, 6) + " years " +
                        (result.study.report_units == ReportUnits::us ? "ft³/s" : "m³/s"));
    }
    names.emplace_back("notices");
    return names;
}

std::string points_table(const ReportMatter& matter, const Sections& sections) {
    const StudyResult& result = matter.result;
    std::string html = "<section class=\"points\"><h2>Points</h2><div class=\"tools only-scripted\"><label>Search <input type=\"search\" id=\"search\"></label>" +
                       filter_choice(result) + "<span id=\"count\" role=\"status\"></span><button id=\"all\" type=\"button\">Tick all shown</button>"
                       "<button id=\"print\" type=\"button\">Print the ticked points</button></div>"
                       "<div class=\"scroll\" role=\"region\" aria-label=\"points\" tabindex=\"0\"><table id=\"points\"><thead><tr>";
    for (const std::string& name : point_columns(result)) html += "<th scope=\"col\"><button type=\"button\">" + name + "</button></th>";
    html += "<th scope=\"col\" class=\"only-scripted\">print</th></tr></thead><tbody>\n";
    for (const std::size_t i : by_area(result)) html += outlet_row(result, result.outlets[i], sections.has_section[i]);
    html += "</tbody></table></div>\n";
    const std::string mark_words = stated_mark_words(result);
    if (!mark_words.empty()) html += "<p class=\"mark\">" + html_text(mark_words) + "</p>\n";
    return html + "<p id=\"reduced\" hidden>The chosen point has no section in this file, which would become too large; rillclock "
                  "explain prints its calculation sheet, and the tables have its figures.</p></section>\n";
}

std::string reduced_note(const Sections& sections, std::size_t points) {
    std::string note;
    const auto tell = [&](const std::string& text) { note += "<p>" + text + "</p>"; };
    if (sections.all < points) {
        tell("Of " + std::to_string(points) + " points the " + std::to_string(sections.all) +
             " with the largest catchments have a section here; all are in the table and in tables/outlets.csv.");
    }
    if (sections.with_charts < sections.all) tell("Charts are here for the " + std::to_string(sections.with_charts) + " with the largest catchments; the tables have the figures of all.");
    if (sections.with_sheet < sections.all) tell("The " + std::to_string(sections.with_sheet) + " with the largest catchments have their calculation sheet here; rillclock explain prints any.");
    return note;
}

std::string foot() {
    return "<footer><p>Made by rillclock " + html_text(version_text) + ". Times are along the governing path of each point, and where pipes or stated figures act those of the network; other figures, parameters and "
           "checksums are in result.json beside this file.</p><details><summary>Licence of the map's library, Leaflet</summary><pre>" +
           html_text(leaflet_licence()) + "</pre></details></footer>\n";
}

}  // namespace

ReportText report_html(const ReportMatter& matter) {
    const std::string map = map_part(matter);
    const std::string data = map_data(matter);
    const Sections sections = sections_of(matter, room_for_sections(matter, map.size() + data.size()));
    std::string html = head(matter.result);
    html += "<header><h1>" + html_text(title_of(matter.result)) + "</h1>\n" + when(matter.result) + where(matter.result) + "</header>\n<main>\n";
    html += findings(matter.result) + caution_box();
    html += "<div class=\"split\">" + map + points_table(matter, sections) + "</div>\n" + eye(matter.result) + drawn_section(matter.result);
    std::string rest = reduced_note(sections, matter.result.outlets.size()) + sections.html + "</main>\n" + foot();
    rest += "<script type=\"application/json\" id=\"map-data\">" + data + "</script>\n";
    rest += "<script>" + std::string(leaflet_script()) + "</script>\n<script>" + std::string(report_script()) + "</script>\n</body>\n</html>\n";
    return {.before = std::move(html), .after = std::move(rest)};
}

}  // namespace rillclock
