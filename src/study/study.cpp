#include "rillclock/study/study.hpp"

#include <algorithm>
#include <array>
#include <filesystem>
#include <utility>

#include "rillclock/core/error.hpp"
#include "rillclock/hydraulics/channel_size.hpp"
#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/rainfall/design_rain.hpp"
#include "rillclock/study/scenario.hpp"
#include "rillclock/study/uncertain_inputs.hpp"

namespace rillclock {
namespace {

std::string name_of(const Study& study) {
    const std::string name = study.file.empty() ? "the study" : study.file;
    return study.scenario.empty() ? name : name + ", scenario." + study.scenario + ",";
}

void require(const Study& study, const std::string& value, const std::string& what_to_add) {
    if (value.empty()) throw input_error(name_of(study) + " gives no " + what_to_add);
}

void require_inputs(const Study& study) {
    require(study, study.terrain.elevation,
            "elevation; state the raster, under [terrain] as elevation = \"dem.tif\" or as --elevation dem.tif");
    require(study, study.surface.cover,
            "land cover; state the raster, under [surface] as cover = \"cover.tif\" or as --cover cover.tif");
    require(
        study, study.surface.book,
        "cover book; state what the codes of the cover raster mean, under [surface] as book = \"nlcd\", "
        "\"worldcover\" or the name of a CSV file, or as --book nlcd");
    const bool has_rain = study.rain.two_year_24_hour || study.rain.is_by_duration();
    if (!has_rain) throw input_error(rain_is_missing(name_of(study)));
}

void refuse_contradictory_channel(const Study& study) {
    const ChannelStudy& channel = study.timing.channel;
    if (channel.region && (channel.hydraulic_radius || channel.width || channel.depth))
        throw input_error(name_of(study) +
                          " gives timing.channel both a region and a size of its own; keep the region, or hydraulic_radius, or width "
                          "and depth together");
    if (channel.design_storm && channel.hydraulic_radius)
        throw input_error(name_of(study) +
                          " asks for channel flow by the design storm and states one hydraulic_radius; leave one of them out");
    if (channel.design_storm && !study.rain.is_by_duration())
        throw input_error(name_of(study) +
                          " asks for channel flow by the design storm, which needs rain by duration; add file = \"atlas14.csv\" or "
                          "formula under [rain], or --rain-file FILE");
    if (channel.side_slope && !channel.design_storm)
        throw input_error(name_of(study) +
                          " states a side_slope, which acts on flow = \"design storm\" only; add that under timing.channel, or leave it out");
    if (channel.hydraulic_radius && (channel.width || channel.depth))
        throw input_error(
            name_of(study) +
            " gives timing.channel both a hydraulic_radius and a width or depth; keep the hydraulic_radius, or "
            "width and depth together");
    if (channel.width.has_value() != channel.depth.has_value())
        throw input_error(name_of(study) +
                          " gives timing.channel only one of width and depth; state both, such as width = "
                          "\"2.70 m * km2^0.352\", depth = \"0.30 m * km2^0.213\"");
}

bool has_points_of_its_own(const Study& study) { return study.points.file || study.points.catchments.file; }

void refuse_contradictory_points(const Study& study) {
    const PointStudy& points = study.points;
    if (points.file && points.auto_area)
        throw input_error(name_of(study) +
                          " gives points both a file and an auto_area; keep the file for points of your own, "
                          "or auto_area for points where flow leaves the data");
    if (points.catchments.file && (points.file || points.auto_area))
        throw input_error(name_of(study) +
                          " gives points both catchments, which have points of their own, and a file or auto_area; keep one of them");
    if (points.catchments.layer && !points.catchments.file)
        throw input_error(name_of(study) + " names a layer of catchments but no file; add catchments = \"basins.gpkg\" under [points], or "
                          "leave out catchments_layer");
    if (points.catchments.file && (points.layer || points.area))
        throw input_error(name_of(study) + " states layer or area, which belong to a file of points, beside catchments; name their layer as "
                          "catchments_layer, and leave area out: the area of each is that of its polygon");
    if (!has_points_of_its_own(study) && (points.name || points.layer || points.move_within || points.area))
        throw input_error(name_of(study) +
                          " says how to read or move points but gives no file of them; add file = "
                          "\"points.gpkg\" under [points], or leave out name, layer, area and move_within");
    if (points.area_unit && !points.area)
        throw input_error(name_of(study) + " states area_unit, the unit of surveyed areas, but not the field that holds them; add area = "
                          "\"surveyed\" under [points], or leave it out");
}

void refuse_layers_without_file(const Study& study) {
    const TerrainStudy& terrain = study.terrain;
    const std::array mapped = {std::pair("channels", &terrain.channels), std::pair("crossings", &terrain.crossings),
                               std::pair("barriers", &terrain.barriers), std::pair("keep_water", &terrain.keep_water)};
    for (const auto& [name, layer] : mapped) {
        if (layer->file || !layer->layer) continue;
        throw input_error(name_of(study) + " names a layer of " + name + " but no file; add " + name +
                          " = \"mapped.gpkg\" under [terrain], or leave out " + name + "_layer");
    }
}

void refuse_contradictory_cover(const Study& study) {
    const SurfaceStudy& surface = study.surface;
    const bool reads = surface.cover_areas.layer || surface.cover_field != SurfaceStudy{}.cover_field;
    if (!surface.cover_areas.file && reads)
        throw input_error(name_of(study) + " says how to read polygons of land cover but gives none; add cover_areas = \"plan.gpkg\" under "
                          "[surface], or leave out cover_areas_layer and cover_field");
}

void refuse_contradictory_zones(const Study& study) {
    const RainStudy& rain = study.rain;
    if (!rain.zones.file && rain.zones.layer)
        throw input_error(name_of(study) +
                          " states zones_layer but no file of rain zones; add zones = \"zones.gpkg\" under [rain], or leave it out");
    if (!rain.zones.file && rain.zones.field != ZoneStudy{}.field)
        throw input_error(name_of(study) +
                          " states zone_field, which names a field of the polygons of rain zones, but gives none; add "
                          "zones = \"zones.gpkg\" under [rain], or leave it out");
    if (rain.zones.file && study.timing.channel.design_storm)
        throw input_error(name_of(study) +
                          " states zones of rain and channels by the design storm, which know of one rain alone; leave "
                          "out zones under [rain], or flow under [timing.channel]");
    if (rain.block && !rain.file && !rain.zones.file)
        throw input_error(name_of(study) +
                          " states block, which chooses among the blocks of a NOAA Atlas 14 file, but gives none; add "
                          "file = \"atlas14.csv\" under [rain], or leave it out");
}

void refuse_contradictory_methods(const Study& study) {
    for (const LumpInput input : all_lump_inputs)
        if (study.methods[input].field && !study.points.file)
            throw input_error(name_of(study) + " takes methods." + std::string(name_of(input)) +
                              " from a field of the points' file but gives no file; add file = \"points.gpkg\" under "
                              "[points], or state a number");
}

void refuse_contradictory_rain(const Study& study) {
    const RainStudy& rain = study.rain;
    if (rain.file && !rain.formulas.empty())
        throw input_error(name_of(study) + " gives rain both as a file and as a formula; keep one of them");
    if (rain.formulas.empty() && (rain.formula_from || rain.formula_to))
        throw input_error(name_of(study) +
                          " says between which durations its formula of rain holds but gives none; add formula under "
                          "[rain], or leave out formula_from and formula_to");
    const bool asks = !rain.return_periods.empty() || study.timing.raster_return_period || study.peaks.is_stated();
    if (asks && !rain.is_by_duration())
        throw input_error(name_of(study) +
                          " states return_periods, raster_return_period or something under [peaks], which act on rain by duration "
                          "only, but gives none; add file or formula under [rain], or leave them out");
}

void refuse_contradictory_sheet(const Study& study) {
    const TimingStudy& timing = study.timing;
    if (timing.is_kinematic() && !study.rain.is_by_duration())
        throw input_error(name_of(study) +
                          " times sheet flow by the kinematic wave, which needs rain by duration; add file = "
                          "\"atlas14.csv\" or formula under [rain], or --rain-file FILE");
    if (!timing.is_kinematic() && (timing.sheet_constant || timing.storm || timing.sheet_takes_runoff))
        throw input_error(name_of(study) +
                          " states sheet_constant, sheet_rain or storm, which act on kinematic sheet flow only; add sheet = "
                          "\"kinematic\" under [timing], or leave them out");
}

void refuse_contradictory_network(const Study& study) {
    const TimingStudy& timing = study.timing;
    if (timing.pipe_flow && !study.points.pipes)
        throw input_error(name_of(study) + " states pipe_flow but no pipes; add pipes = \"pipes.csv\" under [points], or leave it out");
    if (timing.pipe_flow == PipeFlow::design_flow && !study.rain.is_by_duration())
        throw input_error(name_of(study) + " times pipes at the depth of the design flow, which needs rain by duration; add file = "
                          "\"atlas14.csv\" or formula under [rain]");
    const bool stated = study.points.pipes || timing.overrides;
    if (stated && !has_points_of_its_own(study))
        throw input_error(name_of(study) + " names pipes or overrides, which belong to points of your own, but no file of points; add file = "
                          "\"points.gpkg\" under [points]");
    if (stated && timing.ignore_tail > 0)
        throw input_error(name_of(study) + " leaves out a tail and names pipes or overrides; times through a network count all water, so "
                          "leave out ignore_tail");
    if (stated && timing.storm == StormDuration::sheet_part)
        throw input_error(name_of(study) + " names pipes or overrides, and storms as long as the sheet part; through a network a storm lasts as "
                          "long as the whole path, so leave out storm");
}

void refuse_contradictory_isochrones(const Study& study) {
    const IsochroneStudy& isochrones = study.output.isochrones;
    if (!isochrones.are_asked() && (isochrones.smoothed || !isochrones.catchments.empty()))
        throw input_error(name_of(study) + " says which isochrones there are to be and how they are drawn, but asks for none; add isochrones = "
                          "\"5 min\" under [output], or leave out isochrone_catchments and isochrone_borders");
}

void refuse_contradictory_soil(const Study& study) {
    const SoilStudy& soil = study.surface.soil;
    if (!soil.file && (soil.band || !soil.classes.empty() || soil.fallback_group))
        throw input_error(name_of(study) +
                          " says how to read a raster of soil groups but gives none; add soil_group = \"soils.tif\" "
                          "under [surface], or leave out soil_band, soil_classes and fallback_soil_group");
    if (soil.file && study.timing.sheet_takes_runoff)
        throw input_error(name_of(study) +
                          " asks for sheet_rain = \"runoff\" with a raster of soil groups, and sheet flow takes one coefficient of each "
                          "class; state one soil_group, such as \"B\", or sheet_rain = \"rainfall\"");
}

void refuse_contradictory_shallow(const Study& study) {
    const TimingStudy& timing = study.timing;
    const bool by_chart = timing.shallow == ShallowRule::chart;
    if (by_chart && !timing.velocity_chart)
        throw input_error(name_of(study) +
                          " times shallow flow by a chart but names none; add velocity_chart = \"chart.csv\" under [timing]");
    if (!by_chart && timing.velocity_chart)
        throw input_error(name_of(study) +
                          " names a velocity_chart, which acts on shallow = \"chart\" only; add that under [timing], or leave it out");
}

/// "NETCDF:…", "GPKG:…": a driver's name before a colon, in capitals.
bool has_driver_prefix(const std::string& name) {
    const auto colon = name.find(':');
    if (colon == std::string::npos || colon < 2) return false;
    return std::all_of(name.begin(), name.begin() + static_cast<std::ptrdiff_t>(colon), [](char letter) {
        return (letter >= 'A' && letter <= 'Z') || (letter >= '0' && letter <= '9') || letter == '_';
    });
}

}  // namespace

std::string located(const Study& study, const std::string& name) {
    const std::filesystem::path path(name);
    if (name.empty() || path.is_absolute() || has_driver_prefix(name) || name.find("://") != std::string::npos)
        return name;
    return (std::filesystem::path(study.file).parent_path() / path).string();
}

const ChannelSize* ChannelStudy::published_size() const {
    if (hydraulic_radius || width) return nullptr;
    return region ? find_channel_size(*region) : &channel_sizes().front();
}

// Once more for each scenario, which has none of its own.
void check_study(const Study& study) {   // NOLINT(misc-no-recursion)
    require_inputs(study);
    refuse_contradictory_soil(study);
    refuse_layers_without_file(study);
    refuse_contradictory_cover(study);
    refuse_contradictory_points(study);
    refuse_contradictory_channel(study);
    refuse_contradictory_rain(study);
    refuse_contradictory_zones(study);
    refuse_contradictory_methods(study);
    refuse_contradictory_sheet(study);
    refuse_contradictory_shallow(study);
    refuse_contradictory_network(study);
    refuse_contradictory_isochrones(study);
    check_uncertainty(study);
    for (const ScenarioStudy& scenario : study.scenarios) check_study(scenario_study(study, scenario));
}

ResolvedStudy resolve(const Study& study, const DataFacts& facts) {
    const Length cell = facts.cell_side;
    const TerrainStudy& terrain = study.terrain;
    const ChannelStudy& channel = study.timing.channel;
    const ChannelSize* published = channel.published_size();
    const ChannelSize& standard = published != nullptr ? *published : channel_sizes().front();
    const Length step = terrain.vertical_step.value_or(std::max({metres(0.2), facts.vertical_quantum, cell / 10.0}));
    return {.slope_window = terrain.slope_window.value_or(std::max(metres(20), 3.0 * cell)),
            .vertical_step = step,
            .pond_depth = terrain.pond_depth.value_or(std::max(metres(0.3), step)),
            .departure = terrain.departure.value_or(std::max(metres(20), 5.0 * cell)),
            .move_within = study.points.move_within.value_or(std::max(metres(5), cell)),
            .shortest_segment = study.timing.shortest_segment.value_or(std::max(metres(50), 5.0 * cell)),
            .auto_area = study.points.auto_area.value_or(0.01),
            .channel_n = channel.n,
            .hydraulic_radius = channel.hydraulic_radius,
            .channel_width = channel.width.value_or(standard.width),
            .channel_depth = channel.depth.value_or(standard.depth)};
}

Length channel_radius(const ResolvedStudy& resolved, Area contributing) {
    if (resolved.hydraulic_radius) return *resolved.hydraulic_radius;
    return hydraulic_radius_of(resolved.channel_width(contributing), resolved.channel_depth(contributing));
}

}  // namespace rillclock
