#include "rillclock/deliver/report.hpp"

#include <algorithm>

#include "html_text.hpp"
#include "report_files.hpp"
#include "report_parts.hpp"
#include "rillclock/deliver/cautions.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/version.hpp"
#include "rillclock/io/data_url.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_bytes_of_sections = 6'500'000;
constexpr std::size_t most_bytes_with_sheets = 3'000'000;
constexpr std::size_t most_notices_at_top = 8;

/// Nothing is fetched, and no script runs but the two that are named here by their checksums.
std::string policy() {
    return "default-src 'none'; img-src data:; style-src '" + policy_hash(report_style()) + "' '" + policy_hash(leaflet_style()) + "'; script-src '" +
           policy_hash(leaflet_script()) + "' '" + policy_hash(report_script()) + "'; base-uri 'none'; form-action 'none'";
}

std::string title_of(const StudyResult& result) { return result.study.title.empty() ? "Travel time of water" : result.study.title; }

std::string head(const StudyResult& result) {
    return "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n<meta http-equiv=\"Content-Security-Policy\" content=\"" + policy() +
           "\">\n<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n<title>" + html_text(title_of(result)) +
           "</title>\n<style>" + std::string(leaflet_style()) + "</style>\n<style>" + std::string(report_style()) + "</style>\n</head>\n<body>\n";
}

std::string where(const StudyResult& result) {
    std::string inputs;
    for (const InputFile& file : result.inputs) inputs += (inputs.empty() ? "" : "; ") + file.role + " " + file.name;
    const Grid& grid = result.grid;
    return "<p class=\"where\">" + html_text(result.system.name()) + ", " + std::to_string(grid.columns) + " × " + std::to_string(grid.rows) +
           " cells of " + significant(grid.cell_width, 5) + " × " + significant(grid.cell_height, 5) + ". Made from " + html_text(inputs) + ".</p>\n";
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

std::string eye(const StudyResult& result) {
    if (result.notices.empty()) return "";
    std::string html = "<details class=\"eye\" open><summary>What needs a person's eye, by its effect on the time</summary><ul class=\"notices\">";
    for (std::size_t i = 0; i < std::min(most_notices_at_top, result.notices.size()); ++i) html += "<li>" + html_text(result.notices[i].text) + "</li>";
    if (result.notices.size() > most_notices_at_top) {
        html += "<li>and " + std::to_string(result.notices.size() - most_notices_at_top) + " more, at the points and in tables/review.csv</li>";
    }
    return html + "</ul></details>\n";
}

std::string map_part(const ReportMatter& matter) {
    std::string note = matter.overview.stride == 1 ? "" : " The map shows every " + std::to_string(matter.overview.stride) +
                                                              "th cell of every " + std::to_string(matter.overview.stride) +
                                                              "th row; rasters/travel_time.tif has them all.";
    return "<figure class=\"map\"><div id=\"map\" class=\"only-scripted\" role=\"application\" aria-label=\"map of travel times, paths and points; the "
           "table of points leads to the same\"></div><noscript><p>The map needs scripts; the figures below do not.</p></noscript>" +
           map_legend(matter) + "<figcaption>Travel time to the last point on the way down, in the projection of the elevations, over shaded relief; isochrones are drawn where the mean over nine dots enters the next class; "
           "governing paths by regime." + note + "</figcaption></figure>\n";
}

std::string outlet_row(const StudyResult& result, const Outlet& outlet, bool has_section) {
    const ReportScale scale(result.study.report_units);
    const std::string number = std::to_string(outlet.number);
    const auto notices = std::count_if(result.notices.begin(), result.notices.end(), [&](const Notice& n) { return n.point == outlet.point.name; });
    const std::string box = has_section ? "<input type=\"checkbox\" value=\"" + number + "\" aria-label=\"print " + html_text(outlet.point.name) + "\">" : "";
    return "<tr data-number=\"" + number + "\"><td><a href=\"#p" + number + "\">" + html_text(outlet.point.name) + "</a></td><td>" +
           significant(scale.area(from_fixed_area(outlet.area)), 4) + "</td><td>" + fixed_decimals(outlet.time_of_concentration_s() / 60.0, 3) + "</td><td>" +
           fixed_decimals(outlet.arrival_s[0] / 60.0, 3) + "</td><td>" + significant(scale.length(from_fixed(outlet.governing.summary.length)), 4) +
           "</td><td>" + std::to_string(notices) + "</td><td class=\"only-scripted\">" + box + "</td></tr>\n";
}

/// The sections of the points, the largest catchments first until they are too much for one file.
struct Sections {
    std::string html;
    std::vector<bool> has_section;
    std::size_t with_sheet = 0;
    std::size_t all = 0;
};

Sections sections_of(const ReportMatter& matter) {
    Sections sections{.html = {}, .has_section = std::vector<bool>(matter.result.outlets.size(), false)};
    for (const std::size_t i : by_area(matter.result)) {
        if (sections.html.size() > most_bytes_of_sections) break;
        const bool with_sheet = sections.html.size() <= most_bytes_with_sheets;
        sections.html += point_section(matter, matter.result.outlets[i], with_sheet ? SectionDetail::with_sheet : SectionDetail::without_sheet);
        sections.has_section[i] = true;
        sections.with_sheet += with_sheet ? 1 : 0;
        ++sections.all;
    }
    return sections;
}

std::string points_table(const ReportMatter& matter, const Sections& sections) {
    const StudyResult& result = matter.result;
    const ReportScale scale(result.study.report_units);
    std::string html = "<section class=\"points\"><h2>Points</h2><div class=\"tools only-scripted\"><label>Search <input type=\"search\" id=\"search\"></label>"
                       "<span id=\"count\" role=\"status\"></span><button id=\"all\" type=\"button\">Tick all shown</button>"
                       "<button id=\"print\" type=\"button\">Print the ticked points</button></div>"
                       "<div class=\"scroll\"><table id=\"points\"><thead><tr>";
    for (const std::string& name : {std::string("point"), "area " + scale.area_unit(), std::string("time min"), std::string("half arrived min"),
                                    "path " + scale.length_unit(), std::string("notices")}) {
        html += "<th scope=\"col\"><button type=\"button\">" + name + "</button></th>";
    }
    html += "<th scope=\"col\" class=\"only-scripted\">print</th></tr></thead><tbody>\n";
    for (const std::size_t i : by_area(result)) html += outlet_row(result, result.outlets[i], sections.has_section[i]);
    return html + "</tbody></table></div>\n<p id=\"reduced\" hidden>The chosen point has no section in this file, which would become too large; rillclock "
                  "explain prints its calculation sheet, and the tables have its figures.</p></section>\n";
}

std::string reduced_note(const Sections& sections, std::size_t points) {
    std::string note;
    if (sections.all < points) {
        note += "<p>Of " + std::to_string(points) + " points the " + std::to_string(sections.all) +
                " with the largest catchments have a section here; all are in the table and in tables/outlets.csv.</p>";
    }
    if (sections.with_sheet < sections.all) {
        note += "<p>The " + std::to_string(sections.with_sheet) + " with the largest catchments have their calculation sheet here; rillclock explain prints any.</p>";
    }
    return note;
}

std::string foot() {
    return "<footer><p>Made by rillclock " + html_text(version_text) + ". Times are along the governing path of each point; other figures, parameters and "
           "checksums are in result.json beside this file.</p><details><summary>Licence of the map's library, Leaflet</summary><pre>" +
           html_text(leaflet_licence()) + "</pre></details></footer>\n";
}

}  // namespace

std::string report_html(const ReportMatter& matter) {
    const Sections sections = sections_of(matter);
    std::string html = head(matter.result);
    html += "<header><h1>" + html_text(title_of(matter.result)) + "</h1>\n" + where(matter.result) + "</header>\n<main>\n";
    html += findings(matter.result) + caution_box();
    html += "<div class=\"split\">" + map_part(matter) + points_table(matter, sections) + "</div>\n" + eye(matter.result);
    html += reduced_note(sections, matter.result.outlets.size()) + sections.html + "</main>\n" + foot();
    html += "<script type=\"application/json\" id=\"map-data\">" + map_data(matter) + "</script>\n";
    return html + "<script>" + std::string(leaflet_script()) + "</script>\n<script>" + std::string(report_script()) + "</script>\n</body>\n</html>\n";
}

}  // namespace rillclock
