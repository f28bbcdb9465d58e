#include <algorithm>
#include <cmath>
#include <limits>
#include <map>
#include <nlohmann/json.hpp>

#include "chart.hpp"
#include "html_text.hpp"
#include "network_words.hpp"
#include "palette.hpp"
#include "report_parts.hpp"
#include "rillclock/io/data_url.hpp"
#include "segment_rows.hpp"
#include "time_classes.hpp"

namespace rillclock {
namespace {

using Json = nlohmann::ordered_json;

constexpr std::size_t most_corners = 150'000;        ///< of all outlines on the map
constexpr std::size_t most_path_corners = 150'000;   ///< of all paths on the map

std::array<std::uint8_t, 4> rgba(const std::string& colour, std::uint8_t opacity) {
    const auto part = [&](std::size_t at) { return static_cast<std::uint8_t>(std::stoi(colour.substr(at, 2), nullptr, 16)); };
    return {part(1), part(3), part(5), opacity};
}

std::string png_url(const PaletteImage& image) { return "data:image/png;base64," + base64(palette_png(image)); }

/// Grey relief in 64 steps; voids are clear.
std::string shade_url(const ReportOverview& overview) {
    PaletteImage image{.rows = overview.rows, .columns = overview.columns, .values = {}, .palette = {{0, 0, 0, 0}}};
    for (int i = 0; i < 64; ++i) {
        const auto grey = static_cast<std::uint8_t>(40 + i * 215 / 63);
        image.palette.push_back({grey, grey, grey, 255});
    }
    for (const std::uint8_t shade : overview.shade) image.values.push_back(shade == 0 ? 0 : static_cast<std::uint8_t>(1 + shade / 4));
    return png_url(image);
}

/// The picture's times, each the mean over the dots around it: lines between classes then are lines, and not every cell's edge.
std::vector<float> smoothed(const ReportOverview& overview) {
    constexpr std::int64_t reach = 4;
    std::vector<float> means(overview.minutes.size(), std::numeric_limits<float>::quiet_NaN());
    for (std::int64_t row = 0; row < overview.rows; ++row) {
        for (std::int64_t column = 0; column < overview.columns; ++column) {
            const auto own = static_cast<std::size_t>(row * overview.columns + column);
            if (!std::isfinite(overview.minutes[own])) continue;
            float sum = 0.0F;
            int count = 0;
            for (std::int64_t r = std::max<std::int64_t>(0, row - reach); r <= std::min(overview.rows - 1, row + reach); ++r) {
                for (std::int64_t c = std::max<std::int64_t>(0, column - reach); c <= std::min(overview.columns - 1, column + reach); ++c) {
                    const float there = overview.minutes[static_cast<std::size_t>(r * overview.columns + c)];
                    if (!std::isfinite(there)) continue;
                    sum += there;
                    ++count;
                }
            }
            means[own] = sum / static_cast<float>(count);
        }
    }
    return means;
}

/// Whether a dot begins a later class than the one beside it.
bool begins_class(const ReportOverview& overview, const std::vector<float>& minutes, const TimeClasses& classes, std::size_t dot) {
    const auto columns = static_cast<std::size_t>(overview.columns);
    const std::size_t own = classes.of(static_cast<double>(minutes[dot]));
    const auto is_lower = [&](bool there, std::size_t at) {
        return there && std::isfinite(minutes[at]) && classes.of(static_cast<double>(minutes[at])) < own;
    };
    return is_lower(dot % columns > 0, dot - 1) || is_lower(dot % columns + 1 < columns, dot + 1) || is_lower(dot >= columns, dot - columns) ||
           is_lower(dot + columns < minutes.size(), dot + columns);
}

/// Classes of travel time; the line between two of them is an isochrone.
std::string time_url(const ReportOverview& overview, const TimeClasses& classes) {
    PaletteImage image{.rows = overview.rows, .columns = overview.columns, .values = std::vector<std::uint8_t>(overview.minutes.size(), 0),
                       .palette = {{0, 0, 0, 0}}};
    for (std::size_t i = 0; i < classes.count; ++i) image.palette.push_back(rgba(classes.colour(i), 165));
    const auto line = static_cast<std::uint8_t>(image.palette.size());
    image.palette.push_back({20, 20, 20, 170});
    const std::vector<float> means = smoothed(overview);
    for (std::size_t i = 0; i < overview.minutes.size(); ++i) {
        if (!std::isfinite(overview.minutes[i])) continue;
        const auto own = static_cast<std::uint8_t>(1 + classes.of(static_cast<double>(overview.minutes[i])));
        image.values[i] = begins_class(overview, means, classes, i) ? line : own;
    }
    return png_url(image);
}

/// Flat coordinates in cells from the north-west corner, those that lie close by the one before left out.
class CellLine {
public:
    explicit CellLine(double apart) : apart_(apart) {}

    void add(double column, double row, bool is_end = false) {
        const bool is_near = !flat_.empty() && std::abs(column - last_column_) < apart_ && std::abs(row - last_row_) < apart_;
        if (is_near && !is_end) return;
        flat_.push_back(std::round(column * 10) / 10);
        flat_.push_back(std::round(row * 10) / 10);
        last_column_ = column;
        last_row_ = row;
    }
    [[nodiscard]] const Json& flat() const { return flat_; }

private:
    double apart_;
    double last_column_ = 0.0;
    double last_row_ = 0.0;
    Json flat_ = Json::array();
};

double column_of(const Grid& grid, const Place& place) { return (place.x - grid.left) / grid.cell_width; }
double row_of(const Grid& grid, const Place& place) { return (grid.top - place.y) / grid.cell_height; }

double apart_on_map(const ReportMatter& matter) { return matter.overview.stride > 1 ? static_cast<double>(matter.overview.stride) : 0.0; }

/// Farther where all paths together would be too much for one file.
double path_apart(const ReportMatter& matter) {
    std::size_t cells = 0;
    for (const Outlet& outlet : matter.result.outlets) cells += outlet.governing.cells.size() + outlet.longest.cells.size();
    const double thinned = static_cast<double>(cells) / static_cast<double>(most_path_corners);
    return std::max(apart_on_map(matter), thinned > 1.0 ? std::ceil(thinned) : 0.0);
}

/// Outlines as lists of rings, until all of them have as many corners as the map may hold.
class AreaJson {
public:
    explicit AreaJson(double apart) : apart_(apart) {}

    Json of(const std::vector<CornerPolygon>& polygons) {
        Json shapes = Json::array();
        if (corners_ > most_corners) return shapes;
        for (const CornerPolygon& polygon : polygons) {
            Json rings = Json::array();
            for (const CornerRing& ring : polygon.rings) {
                CellLine line(apart_);
                for (const Corner& corner : ring) line.add(corner.column, corner.row);
                corners_ += line.flat().size() / 2;
                if (line.flat().size() >= 6) rings.push_back(line.flat());
            }
            if (!rings.empty()) shapes.push_back(rings);
        }
        return shapes;
    }

private:
    double apart_;
    std::size_t corners_ = 0;
};

Json areas_json(const ReportMatter& matter) {
    Json areas = Json::array();
    AreaJson json(apart_on_map(matter));
    for (const Outlet& outlet : matter.result.outlets) areas.push_back(json.of(matter.regions.subarea(outlet.number)));
    return areas;
}

/// Land that is in a hand-drawn catchment alone, and in that of the elevations alone, told apart by dashes beside colour.
struct DifferenceLook {
    const char* name;
    const char* colour;
    const char* dash;
};
constexpr DifferenceLook drawn_only_look{"drawn only", "#e69f00", "5 3"};
constexpr DifferenceLook found_only_look{"by the elevations only", "#0072b2", ""};

Json differences_json(const ReportMatter& matter) {
    Json drawn = Json::array();
    Json found = Json::array();
    AreaJson json(apart_on_map(matter));
    for (const DrawnDifference& one : matter.result.drawn) {
        drawn.push_back(json.of(one.drawn_only));
        found.push_back(json.of(one.found_only));
    }
    Json all = Json::array();
    for (const auto& [look, areas] : {std::pair(drawn_only_look, drawn), std::pair(found_only_look, found)}) {
        all.push_back({{"colour", look.colour}, {"dash", look.dash}, {"areas", areas}});
    }
    return all;
}

Json map_path(const ReportMatter& matter, const Outlet& outlet, double apart) {
    Json pieces = Json::array();
    for (const SegmentRow& row : segment_rows(outlet, outlet.governing, "governing")) {
        CellLine line(apart);
        const std::vector<Place> places = segment_places(matter.result, row);
        for (std::size_t i = 0; i < places.size(); ++i) {
            line.add(column_of(matter.result.grid, places[i]), row_of(matter.result.grid, places[i]), i + 1 == places.size());
        }
        pieces.push_back({static_cast<int>(row.segment->regime), line.flat()});
    }
    return pieces;
}

Json longest_json(const ReportMatter& matter, const Outlet& outlet, double apart) {
    CellLine line(apart);
    for (std::size_t i = 0; i < outlet.longest.cells.size(); ++i) {
        const RowColumn at = matter.result.grid.row_column(outlet.longest.cells[i]);
        line.add(static_cast<double>(at.column) + 0.5, static_cast<double>(at.row) + 0.5, i + 1 == outlet.longest.cells.size());
    }
    return line.flat();
}

/// Whether a label would stand clear of those that are there already.
bool has_room(const Grid& grid, const Json& labels, double column, double row) {
    constexpr double wide = 0.14;    // of the map's longer side
    constexpr double high = 0.04;
    const auto side = static_cast<double>(std::max(grid.columns, grid.rows));
    return std::none_of(labels.begin(), labels.end(), [&](const Json& label) {
        return std::abs(label[0].get<double>() - column) < wide * side && std::abs(label[1].get<double>() - row) < high * side;
    });
}

/// Where the water on the governing path of a last point has a round time left to go: there an isochrone crosses it.
void add_labels(const ReportMatter& matter, const Outlet& outlet, const TimeClasses& classes, Json& labels) {
    double left_min = outlet.time_of_concentration_s() / 60.0;
    for (const SegmentRow& row : segment_rows(outlet, outlet.governing, "governing")) {
        const double after = left_min - row.time_s / 60.0;
        const std::vector<Place> places = segment_places(matter.result, row);
        for (double at = std::floor(left_min / classes.step) * classes.step; at > std::max(after, 0.0) && at < left_min; at -= classes.step) {
            const double share = (left_min - at) / (left_min - after);
            const Place& place = places[std::min(places.size() - 1, static_cast<std::size_t>(share * static_cast<double>(places.size())))];
            const double column = std::round(column_of(matter.result.grid, place));
            const double row_there = std::round(row_of(matter.result.grid, place));
            if (has_room(matter.result.grid, labels, column, row_there)) labels.push_back({column, row_there, at});
        }
        left_min = after;
    }
}

Json labels_json(const ReportMatter& matter, const TimeClasses& classes) {
    constexpr std::size_t most_labelled = 5;
    std::vector<const Outlet*> last;
    for (const Outlet& outlet : matter.result.outlets) {
        if (outlet.next == 0) last.push_back(&outlet);
    }
    std::stable_sort(last.begin(), last.end(), [](const Outlet* a, const Outlet* b) { return a->area > b->area; });
    last.resize(std::min(last.size(), most_labelled));
    Json labels = Json::array();
    for (const Outlet* outlet : last) add_labels(matter, *outlet, classes, labels);
    return labels;
}

Json map_points(const ReportMatter& matter) {
    Json points = Json::array();
    for (const Outlet& outlet : matter.result.outlets) {
        const RowColumn at = matter.result.grid.row_column(outlet.point.cell);
        points.push_back({{"number", outlet.number}, {"name", outlet.point.name}, {"time", shown_minutes(time_shown_s(matter.result, outlet)) + stated_mark(matter.result, outlet)},
                          {"at", {static_cast<double>(at.column) + 0.5, static_cast<double>(at.row) + 0.5}}});
    }
    return points;
}

/// From the inlet of each pipe straight to its end.
Json pipes_json(const ReportMatter& matter) {
    Json pipes = Json::array();
    for (const Outlet& outlet : matter.result.outlets) {
        const PointEdit& edit = matter.result.network.edits[outlet.number - 1];
        if (edit.pipe == nullptr) continue;
        Json line = Json::array();
        for (const PointNumber end : {outlet.number, edit.piped_to}) {
            const RowColumn at = matter.result.grid.row_column(matter.result.outlets[end - 1].point.cell);
            line.push_back(static_cast<double>(at.column) + 0.5);
            line.push_back(static_cast<double>(at.row) + 0.5);
        }
        pipes.push_back(line);
    }
    return pipes;
}

/// Width and dash beside colour, so that nothing is told by colour alone.
Json regimes_json() {
    Json regimes = Json::array();
    const std::map<Regime, std::pair<int, const char*>> looks = {{Regime::none, {2, ""}}, {Regime::sheet, {4, "2 6"}}, {Regime::shallow, {3, "9 5"}},
                                                                 {Regime::channel, {4, ""}}, {Regime::water, {6, ""}}};
    for (const auto& [regime, look] : looks) {
        regimes.push_back({{"name", name_of(regime)}, {"colour", colour_of(regime)}, {"weight", look.first}, {"dash", look.second}});
    }
    return regimes;
}

std::string swatch(const std::string& colour, const std::string& text) {
    return "<li><svg width=\"22\" height=\"14\" aria-hidden=\"true\"><rect width=\"22\" height=\"14\" fill=\"" + colour + "\"/></svg>" + text + "</li>";
}

std::string line_swatch(const std::string& colour, int weight, const std::string& dash, const std::string& text) {
    return "<li><svg width=\"34\" height=\"14\" aria-hidden=\"true\"><line x1=\"0\" y1=\"7\" x2=\"34\" y2=\"7\" stroke=\"" + colour + "\" stroke-width=\"" +
           std::to_string(weight) + "\" stroke-dasharray=\"" + dash + "\"/></svg>" + text + "</li>";
}

std::string area_swatch(const std::string& colour, const std::string& dash, const std::string& text) {
    return "<li><svg width=\"26\" height=\"16\" aria-hidden=\"true\"><rect x=\"1\" y=\"1\" width=\"24\" height=\"14\" fill=\"" + colour +
           "\" fill-opacity=\"0.5\" stroke=\"" + colour + "\" stroke-width=\"2\" stroke-dasharray=\"" + dash + "\"/></svg>catchment " + text + "</li>";
}

/// JSON may stand in a script element: no "<" begins a tag there.
std::string for_script(const Json& json) {
    std::string safe;
    for (const char c : json.dump(-1, ' ', false, Json::error_handler_t::replace)) safe += c == '<' ? std::string("\\u003c") : std::string(1, c);
    return safe;
}

}  // namespace

std::string map_data(const ReportMatter& matter) {
    const TimeClasses classes = time_classes(matter.result);
    Json paths = Json::array();
    Json longest = Json::array();
    const double apart = path_apart(matter);
    for (const Outlet& outlet : matter.result.outlets) {
        paths.push_back(map_path(matter, outlet, apart));
        longest.push_back(longest_json(matter, outlet, apart));
    }
    const Grid& grid = matter.result.grid;
    return for_script({{"rows", grid.rows}, {"columns", grid.columns}, {"tall", grid.cell_height / grid.cell_width}, {"regimes", regimes_json()}, {"points", map_points(matter)}, {"areas", areas_json(matter)}, {"paths", paths},
                       {"longest", longest}, {"pipes", pipes_json(matter)}, {"labels", labels_json(matter, classes)},
                       {"differences", differences_json(matter)}});
}

std::string map_reduction(const ReportMatter& matter) {
    std::string note;
    const std::string stride = std::to_string(matter.overview.stride);
    if (matter.overview.stride > 1) note += " The map shows every " + stride + "th cell of every " + stride + "th row; rasters/travel_time.tif has them all.";
    if (path_apart(matter) > std::max(1.0, apart_on_map(matter))) {
        note += " Paths are drawn with a corner every " + significant(path_apart(matter), 3) + " cells; study.gpkg has them all.";
    }
    return note;
}

std::string map_pictures(const ReportMatter& matter) {
    const TimeClasses classes = time_classes(matter.result);
    return "<div id=\"pictures\"><img id=\"relief\" alt=\"shaded relief, lit from the north-west\" src=\"" + shade_url(matter.overview) +
           "\"><img id=\"times\" alt=\"travel time to the last point on the way down, in classes of " + significant(classes.step, 3) + " minutes\" src=\"" +
           time_url(matter.overview, classes) + "\"></div>";
}

std::string map_legend(const ReportMatter& matter) {
    const TimeClasses classes = time_classes(matter.result);
    std::string html = "<ul class=\"legend\" aria-label=\"travel time to the last point, minutes\">";
    for (std::size_t i = 0; i < classes.count; ++i) {
        const double from = static_cast<double>(i) * classes.step;
        html += swatch(classes.colour(i), significant(from, 4) + " to " + significant(from + classes.step, 4) + " min");
    }
    html += "</ul><ul class=\"legend\" aria-label=\"paths\">";
    for (const Json& regime : regimes_json()) {
        if (regime["name"] == "none") continue;
        html += line_swatch(regime["colour"], regime["weight"], regime["dash"], regime["name"].get<std::string>());
    }
    if (!matter.result.network.pipes.empty()) html += line_swatch("currentColor", 3, "1 6", "pipe");
    if (!matter.result.drawn.empty()) {
        for (const DifferenceLook& look : {drawn_only_look, found_only_look}) html += area_swatch(look.colour, look.dash, look.name);
    }
    return html + line_swatch("#cc79a7", 4, "2 7", "longest path to the chosen point") + "</ul>";
}

}  // namespace rillclock
