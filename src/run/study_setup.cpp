#include <algorithm>
#include <filesystem>
#include <limits>

#include "rillclock/core/nearest_word.hpp"
#include "rillclock/catchment/tiled_cells.hpp"
#include "rillclock/catchment/tiled_own_paths.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/io/point_file.hpp"
#include "rillclock/io/text_file.hpp"
#include "drawn_points.hpp"
#include "mapped_flow.hpp"
#include "study_data.hpp"

namespace rillclock {
namespace {

/// Where each point has a storm of its own, steps are cut under a reference storm, the raster's return period at 5 min: it decides whether
/// water on ponded ground moves as sheet flow or as a wave (by far the faster in any storm), and times the cells that drain to no point.
SheetRules sheet_rules_of(const Study& study, const StudyRain& rain) {
    if (!study.timing.is_kinematic()) {
        return {.formula = nrcs_sheet_formula(), .storm_factor = nrcs_storm_factor(*rain.two_year_24_hour)};
    }
    return {.formula = kinematic_sheet_formula(study.timing.sheet_constant.value_or(kinematic_constant_hec22)),
            .basis = SheetBasis::characteristic,
            .storm_factor = kinematic_storm_factor(rain.raster_storm().rain.at(rain.first_assumed()))};
}

}  // namespace

namespace {

std::vector<LumpInput> lump_inputs_by_field(const Study& study) {
    std::vector<LumpInput> inputs;
    for (const LumpInput input : all_lump_inputs) {
        if (study.methods[input].field) inputs.push_back(input);
    }
    return inputs;
}

PointLumpInputs lump_inputs_of(const Study& study, const std::vector<LumpInput>& by_field, const NamedPlace& point) {
    PointLumpInputs inputs;
    for (std::size_t i = 0; i < by_field.size(); ++i) {
        if (point.fields[i].empty()) continue;
        const std::string subject = "the field \"" + *study.methods[by_field[i]].field + "\" of the point '" + point.name + "' (" +
                                    *study.points.file + ")";
        inputs[by_field[i]] = lump_input_from_text(by_field[i], point.fields[i], subject);
    }
    return inputs;
}

/// The surveyed area in the field's text: with a unit of its own, or in the unit that the study states; none where it is empty.
std::optional<FixedArea> surveyed_area(const Study& study, const std::string& point, const std::string& text) {
    if (text.empty()) return std::nullopt;
    const std::string subject = "the field \"" + *study.points.area + "\" of the point '" + point + "' (" + *study.points.file + ")";
    if (!study.points.area_unit) {
        return to_fixed_area(in_square_metres(area_from_text(text, {.subject = subject + ", without area_unit under [points],", .example = "4 ha"})));
    }
    const double number = number_from_text(text, {.subject = subject, .example = "4"});
    return to_fixed_area(number * in_square_metres(*study.points.area_unit));
}

}  // namespace

std::optional<StatedPoints> read_stated_points(const Study& study, const ReferenceSystem& system) {
    if (study.points.catchments.file) return read_drawn_catchments(study, system);
    if (!study.points.file) return std::nullopt;
    PointOptions options;
    options.layer = study.points.layer;
    options.name_field = study.points.name;
    const std::vector<LumpInput> by_field = lump_inputs_by_field(study);
    for (const LumpInput input : by_field) options.fields.push_back(*study.methods[input].field);
    if (study.points.area) options.fields.push_back(*study.points.area);
    const PointFile file = read_points(located(study, *study.points.file), options, system);
    StatedPoints stated{.points = {}, .lump_inputs = {}, .drawn = {}, .notices = file.notices};
    for (const NamedPlace& point : file.points) {
        const std::optional<FixedArea> surveyed = study.points.area ? surveyed_area(study, point.name, point.fields.back()) : std::nullopt;
        stated.points.push_back({.name = point.name, .place = point.place, .surveyed = surveyed});
        stated.lump_inputs[point.name] = lump_inputs_of(study, by_field, point);
    }
    return stated;
}

PlacedPoints settle_points(const std::optional<StatedPoints>& given, const ResolvedStudy& resolved, const TiledTravel& travel,
                           const TerrainData& terrain) {
    const std::optional<StatedPoints> stated =
        given && !given->drawn.empty() ? std::optional(with_crossings(*given, resolved, travel, terrain)) : given;
    if (!stated) return find_points(travel.roots(), terrain.grid, resolved.auto_area);
    std::vector<Cell> cells;
    for (const StatedPoint& point : stated->points) {
        const std::vector<Cell> near = cells_near(point.place, terrain.grid, terrain.ground, resolved.move_within);
        cells.insert(cells.end(), near.begin(), near.end());
    }
    const auto areas = areas_at(travel, std::move(cells));
    const auto area = [&](Cell cell) {
        const auto found = areas.find(cell);
        return found == areas.end() ? std::nullopt : std::optional(found->second);
    };
    PlacedPoints placed = place_points(stated->points, {.grid = terrain.grid, .ground = terrain.ground, .area = area}, resolved.move_within);
    placed.notices.insert(placed.notices.begin(), stated->notices.begin(), stated->notices.end());
    return placed;
}

std::vector<PointNumber> isochrone_catchments(const Study& study, const std::vector<std::string>& names) {
    std::vector<PointNumber> numbers;
    for (const std::string& asked : study.output.isochrones.catchments) {
        const auto found = std::find(names.begin(), names.end(), asked);
        if (found == names.end()) {
            throw input_error("output.isochrone_catchments asks for the catchment of '" + asked + "', and no point within the elevations has that name" +
                              did_you_mean(asked, std::vector<std::string_view>(names.begin(), names.end())) +
                              "; write the names as in tables/outlets.csv");
        }
        numbers.push_back(static_cast<PointNumber>(found - names.begin() + 1));
    }
    return numbers;
}

StudyRain read_rain(const Study& study, const std::vector<std::string>& zone_files) {
    const std::string text = study.rain.file ? read_text(located(study, *study.rain.file)) : std::string();
    std::vector<ZoneText> zones;
    for (const std::string& file : zone_files) {
        zones.push_back({.file = file, .text = read_text(located(study, file))});
    }
    return study_rain(study, text, zones);
}

StatedEdits read_edits(const Study& study) {
    StatedEdits stated;
    if (study.points.pipes) stated.pipes = parse_pipes(read_text(located(study, *study.points.pipes)), *study.points.pipes);
    if (study.timing.overrides) stated.overrides = parse_overrides(read_text(located(study, *study.timing.overrides)), *study.timing.overrides);
    return stated;
}

void restate_own_times(StatedEdits& stated, const TiledTravel& travel, const std::vector<Outlet>& outlets) {
    const std::vector<PointEdit> edits = point_edits(stated.pipes, stated.overrides, outlets);
    std::vector<RestatedPoint> points;
    for (std::size_t i = 0; i < edits.size(); ++i) {
        const bool any = edits[i].stated != nullptr && edits[i].stated->overland.is_any();
        if (any) points.push_back({.number = static_cast<PointNumber>(i + 1), .stated = edits[i].stated->overland});
    }
    const std::vector<StepTime> times = restated_own_times(travel, outlets, points);
    for (std::size_t i = 0; i < points.size(); ++i) {
        const PointOverride* at = edits[points[i].number - 1].stated;
        stated.overrides[static_cast<std::size_t>(at - stated.overrides.data())].restated = times[i];
    }
}

TravelRules rules_of(const Study& study, const ResolvedStudy& resolved, const StudyRain& rain) {
    TravelRules rules;
    rules.slope = {.window = resolved.slope_window,
                   .vertical_step = resolved.vertical_step,
                   .overland_floor = study.timing.slope_floor_overland,
                   .channel_floor = study.timing.slope_floor_channel};
    rules.sheet = sheet_rules_of(study, rain);
    rules.sheet.limit = study.timing.sheet_limit;
    if (study.timing.sheet_limit_rule == SheetLimitRule::stated) {
        rules.sheet.index_limit = metres(std::numeric_limits<double>::infinity());
    }
    rules.channel = {.n = resolved.channel_n,
                     .hydraulic_radius = resolved.hydraulic_radius,
                     .width = resolved.channel_width,
                     .depth = resolved.channel_depth,
                     .sizes_from = std::nullopt,
                     .from_area = study.timing.channel_from};
    if (const ChannelSize* published = study.timing.channel.published_size()) rules.channel.sizes_from = published->from;
    rules.pond = {.depth = resolved.pond_depth, .speed = study.terrain.pond_speed};
    return rules;
}

OutletRules outlet_rules_of(const Study& study, const ResolvedStudy& resolved) {
    // Unless the study says otherwise a segment is no shorter than a fiftieth of its path, so that a sheet has tens of rows.
    const double share = study.timing.shortest_segment ? 0.0 : 0.02;
    return {.ignore_tail = study.timing.ignore_tail,
            .segments = {.shortest = resolved.shortest_segment, .shortest_share = share}};
}

std::vector<InputFile> input_files(const Study& study, const StudyRain& rain, std::map<std::string, std::string>& known) {
    std::vector<InputFile> files;
    const auto add = [&](const char* role, const std::string& name) {
        const std::string path = located(study, name);
        if (!known.contains(path)) known[path] = std::filesystem::is_directory(path) ? folder_checksum(path) : file_checksum(path);
        files.push_back({role, name, known[path]});
    };
    add("elevation", study.terrain.elevation);
    add("cover", study.surface.cover);
    if (!is_built_in_book(study.surface.book)) add("book", study.surface.book);
    if (study.surface.cover_areas.file) add("cover_areas", *study.surface.cover_areas.file);
    if (study.surface.soil.file) add("soil", *study.surface.soil.file);
    if (study.points.catchments.file) add("catchments", *study.points.catchments.file);
    if (study.points.file) add("points", *study.points.file);
    for (const MappedFile& file : mapped_files(study)) {
        if (file.name) add(file.role, *file.name);
    }
    if (study.rain.file) add("rain", *study.rain.file);
    if (study.timing.velocity_chart) add("velocity_chart", *study.timing.velocity_chart);
    if (study.points.pipes) add("pipes", *study.points.pipes);
    if (study.timing.overrides) add("overrides", *study.timing.overrides);
    if (study.rain.zones.file) add("rain zones", *study.rain.zones.file);
    for (const ZoneRain& zone : rain.zones) add("rain", zone.file);
    return files;
}

}  // namespace rillclock
