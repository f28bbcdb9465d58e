#include "mapped_flow.hpp"

#include <algorithm>

#include "channel_fields.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/io/shape_file.hpp"

namespace rillclock {
namespace {

/// What a file of shapes came to, in words.
class FlowReading {
public:
    FlowReading(const Study& study, const Grid& grid, const ReferenceSystem& system) : study_(study), grid_(grid), system_(system) {}

    MappedShapes read() {
        const TerrainStudy& terrain = study_.terrain;
        if (terrain.channels.file) read_channels(terrain.channels);
        if (terrain.crossings.file) read_lines("crossings", terrain.crossings, mapped_.shapes.crossings);
        if (terrain.barriers.file) read_lines("barriers", terrain.barriers, mapped_.shapes.barriers);
        if (terrain.keep_water.file) read_waters(terrain.keep_water);
        return std::move(mapped_);
    }

private:
    void read_channels(const MappedLayer& from) {
        const ShapeFile file = read_lines("channels", from, mapped_.shapes.channels, channel_fields());
        std::size_t stated = 0;
        for (std::size_t i = 0; i < file.numbers.size(); ++i) {
            const std::string subject = "feature " + std::to_string(file.feature_of_line[i]) + " of the channels '" + *from.file + "'";
            mapped_.sections.push_back(section_of(file.numbers[i], study_.timing.channel.n, subject));
            if (mapped_.sections.back()) ++stated;
        }
        if (stated > 0) mapped_.facts.push_back("channels: " + std::to_string(stated) + " of " + std::to_string(file.numbers.size()) + " lines state n or a section");
    }

    ShapeFile read_lines(const std::string& role, const MappedLayer& from, std::vector<Line>& lines, std::span<const std::string> fields = {}) {
        const std::string& name = *from.file;
        ShapeFile file = read_shapes(located(study_, name), {role, ShapeKinds::lines, from.layer, role + "_layer", fields}, system_);
        const auto inside = std::count_if(file.lines.begin(), file.lines.end(), [&](const Line& line) {
            return !cells_crossed(line, grid_).empty();
        });
        say(role, name, file, std::to_string(inside) + " of " + std::to_string(file.lines.size()) + " lines", inside > 0);
        lines = std::move(file.lines);
        return file;
    }

    void read_waters(const MappedLayer& from) {
        const std::string& name = *from.file;
        ShapeFile file = read_shapes(located(study_, name), {"kept water", ShapeKinds::points_and_polygons, from.layer, "keep_water_layer", {}},
                                     system_);
        const auto points = std::count_if(file.points.begin(), file.points.end(), [&](const Place& place) { return grid_.at(place).has_value(); });
        const auto areas = std::count_if(file.polygons.begin(), file.polygons.end(), [&](const Polygon& polygon) {
            return !cells_within(polygon, grid_).empty();
        });
        say("kept water", name, file,
            std::to_string(points) + " of " + std::to_string(file.points.size()) + " points and " + std::to_string(areas) + " of " +
                std::to_string(file.polygons.size()) + " polygons", points + areas > 0);
        mapped_.shapes.kept_places = std::move(file.points);
        mapped_.shapes.kept_areas = std::move(file.polygons);
    }

    void say(const std::string& role, const std::string& name, const ShapeFile& file, const std::string& inside, bool any) {
        mapped_.notices.insert(mapped_.notices.end(), file.notices.begin(), file.notices.end());
        mapped_.facts.push_back(role + ": " + std::to_string(file.features) + (file.features == 1 ? " feature, " : " features, ") + inside +
                                " within the elevations");
        if (!any) throw input_error("nothing of the " + role + " in '" + name + "' lies within the elevations; check its reference system");
    }

    const Study& study_;
    const Grid& grid_;
    const ReferenceSystem& system_;
    MappedShapes mapped_;
};

std::string counted(std::size_t count, const std::string& one, const std::string& many) {
    return std::to_string(count) + " " + (count == 1 ? one : many);
}

/// What shapes of a kind do: one ("leads the flow through"), several, none; and why one may be nowhere.
struct EditWords {
    const char* kind;
    const char* one;
    const char* many;
    const char* none;
    const char* nowhere;
};

constexpr const char* no_step = "off the data or within one cell";

/// What a kind of edit came to: "crossings: 2 shapes lead the flow through 9 cells; 1 has no effect, being off the data".
std::string words_of_edit(const EditWords& words, const EditCount& count) {
    const auto by_number = [](std::size_t number, const std::string& one, const std::string& many) {
        return "; " + std::to_string(number) + " " + (number == 1 ? one : many);
    };
    std::string text = std::string(words.kind) + ": ";
    if (count.used == 0) text += "no shape " + std::string(words.none);
    else text += counted(count.used, "shape ", "shapes ") + (count.used == 1 ? words.one : words.many) + " " + counted(count.cells, "cell", "cells");
    const std::string being = ", being " + std::string(words.nowhere);
    if (count.unused > 0) text += by_number(count.unused, "has no effect" + being, "have no effect" + being);
    if (count.covered > 0) {
        text += by_number(count.covered, "has no effect, since other shapes have its cells already", "have no effect, since other shapes have their cells already");
    }
    if (count.turned > 0) {
        text += by_number(count.turned, "was drawn against the ground and is followed the other way", "were drawn against the ground and are followed the other way");
    }
    return text;
}

void tell(const EditWords& words, const EditCount& count, Notices& notices) {
    if (count.used + count.unused + count.covered == 0) return;
    notices.push_back({.code = "terrain-edited", .text = words_of_edit(words, count), .value = static_cast<double>(count.cells)});
}

void tell_roots(const std::vector<Cell>& cells, const char* code, const std::string& text, const Grid& grid, Notices& notices) {
    for (const Cell cell : cells) notices.push_back({.code = code, .text = text, .place = grid.centre(cell)});
}

void tell_all(const TerrainEdits& edits, const EditedFlow& flow, double cut_m, TerrainData& terrain) {
    Notices& notices = terrain.notices;
    tell({"channels", "leads the flow through", "lead the flow through", "leads the flow", no_step}, edits.channels, notices);
    tell({"crossings", "leads the flow through", "lead the flow through", "leads the flow", no_step}, edits.crossings, notices);
    tell({"barriers", "stops the flow at", "stop the flow at", "stops the flow", "off the data"}, edits.barriers, notices);
    tell({"kept water", "holds the water of", "hold the water of", "holds water", "off the data"}, edits.kept_waters, notices);
    if (cut_m > 0) {
        notices.push_back({.code = "bed-below-ground",
                           .text = "along channels and crossings the water runs up to " + significant(cut_m, 3) +
                                   " m below the ground of the elevations, on the lowest ground that the line has met",
                           .value = cut_m});
    }
    tell_roots(flow.ends_without_way, "line-ends-in-basin",
               "a channel or crossing ends where the ground leads nowhere but back over it, and its water stays there; draw it on to where it leaves",
               terrain.grid, notices);
    tell_roots(flow.enclosed, "barrier-shuts-in",
               "barriers leave the water here no way out, and it stays; leave a gap in them, or draw a channel or crossing through",
               terrain.grid, notices);
}

constexpr std::size_t most_own_ways = 1'000;
constexpr std::size_t most_told = 20;

/// The own ways of lines' water that depart far, the farthest first, each of the first twenty with a notice.
std::vector<OwnWay> departing_ways(const FlowLines& lines, const BothFlows& flows, Length than, TerrainData& terrain) {
    std::vector<OwnWay> ways = own_ways(lines, flows, than);
    const std::size_t all = ways.size();
    if (all > most_own_ways) ways.resize(most_own_ways);
    const auto tell = [&](const std::string& text, Length value, std::optional<Place> place) {
        terrain.notices.push_back({.code = "departs-from-ground", .text = text, .value = in_metres(value), .threshold = in_metres(than), .place = place});
    };
    for (std::size_t i = 0; i < std::min(ways.size(), most_told); ++i) {
        tell("by the ground alone the water of the mapped line here would get " + significant(in_metres(ways[i].departure), 3) +
                 " m away from the way that the line leads it" +
                 (ways[i].comes_back ? "" : ", and not come back") + "; see own_paths.geojson",
             ways[i].departure, terrain.grid.centre(ways[i].start));
    }
    if (all > most_told) {
        tell(std::to_string(all - most_told) + " more stretches of mapped lines lead the water elsewhere than the ground would; own_paths.geojson holds the " +
                 std::to_string(ways.size()) + " that depart farthest",
             ways[most_told].departure, std::nullopt);
    }
    return ways;
}

}  // namespace

std::vector<MappedFile> mapped_files(const Study& study) {
    return {{"channels", study.terrain.channels.file}, {"crossings", study.terrain.crossings.file},
            {"barriers", study.terrain.barriers.file}, {"keep_water", study.terrain.keep_water.file}};
}

MappedShapes read_mapped_shapes(const Study& study, const Grid& grid, const ReferenceSystem& system) {
    return FlowReading(study, grid, system).read();
}

namespace {

/// Gives the reach of a line to the cells from which the flow follows it, in either direction, and to its end where nothing follows.
void place_section(const Way& way, const FlowLines& lines, const ChannelReach& reach, ChannelReaches& reaches) {
    const auto leads = [&](Cell from, Cell to) { return lines.contains(from) && lines.next(from) == to; };
    for (std::size_t i = 0; i + 1 < way.size(); ++i) {
        if (leads(way[i], way[i + 1])) reaches.emplace(way[i], reach);
        if (leads(way[i + 1], way[i])) reaches.emplace(way[i + 1], reach);
    }
    for (const Cell end : {way.front(), way.back()}) {
        if (leads(end, no_cell)) reaches.emplace(end, reach);
    }
}

void place_sections(const MappedShapes& mapped, const FlowLines& lines, const Grid& grid, MappedFlow& flow) {
    for (std::size_t i = 0; i < mapped.sections.size(); ++i) {
        if (!mapped.sections[i]) continue;
        const ChannelReach reach = reach_of(*mapped.sections[i], static_cast<std::uint32_t>(flow.sections.size()));
        flow.sections.push_back(*mapped.sections[i]);
        for (const Way& crossed : cells_crossed(mapped.shapes.channels[i], grid)) {
            place_section(shortened(crossed, grid.columns), lines, reach, flow.reaches);
        }
    }
}

}  // namespace

MappedFlow mapped_flow(const Study& study, const ResolvedStudy& resolved, TerrainData& terrain, const FindCodes& find_codes) {
    const double metres_per_unit = terrain.format.metres_per_stored_unit();
    const MappedShapes mapped = read_mapped_shapes(study, terrain.grid, terrain.system);
    const TerrainEdits edits = place_edits(mapped.shapes, terrain.grid, terrain.elevations, in_metres(resolved.vertical_step) / metres_per_unit);
    const Raster<FlowCode> own = edits.lines.size() > 0 ? find_codes(terrain.elevations) : Raster<FlowCode>();
    EditedFlow flow = edited_flow(terrain.elevations, edits, find_codes);
    const double cut = lower_to_beds(terrain.elevations, edits.lines);
    terrain.notices.insert(terrain.notices.end(), mapped.notices.begin(), mapped.notices.end());
    tell_all(edits, flow, cut * metres_per_unit, terrain);
    MappedFlow mapped_flow{.codes = std::move(flow.codes), .line_cells = edits.lines.cells(), .sections = {}, .reaches = {}, .own_ways = {}};
    place_sections(mapped, edits.lines, terrain.grid, mapped_flow);
    if (edits.lines.size() > 0) {
        mapped_flow.own_ways = departing_ways(edits.lines, {.led = mapped_flow.codes, .own = own, .ground = terrain.ground}, resolved.departure, terrain);
    }
    return mapped_flow;
}

}  // namespace rillclock
