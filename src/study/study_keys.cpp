#include "rillclock/study/study_keys.hpp"

#include <algorithm>
#include <array>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"

namespace rillclock {
namespace {

constexpr std::array keys{
    StudyKey{"title", R"("Lower town, as it stands")", "none", "heads the report"},
    StudyKey{"date", "2026-05-01", "none", "day that the study is of, on the report's first screen; no clock is read"},
    StudyKey{"report_units", R"("us")", "us",
             "us or si: the units of what is reported; the computation is in SI either way"},
    StudyKey{"terrain.elevation", R"("dem.tif")", "asked for", "elevation raster"},
    StudyKey{"terrain.band", "1", "the only one", "its band; asked for where the file has several"},
    StudyKey{"terrain.elevation_unit", R"("m")", "what the file says",
             "m, ft or us survey ft, where the file does not say"},
    StudyKey{"terrain.channels", R"("brook.gpkg")", "none",
             "lines that the flow follows, drawn downstream; channel flow along them"},
    StudyKey{"terrain.channels_layer", R"("brooks")", "the only one", "layer of that file; asked for where it has several"},
    StudyKey{"terrain.crossings", R"("culverts.geojson")", "none",
             "lines that carry flow through an embankment, from the higher to the lower end"},
    StudyKey{"terrain.crossings_layer", R"("culverts")", "the only one", "layer of that file; asked for where it has several"},
    StudyKey{"terrain.barriers", R"("walls.geojson")", "none", "lines that flow does not cross"},
    StudyKey{"terrain.barriers_layer", R"("walls")", "the only one", "layer of that file; asked for where it has several"},
    StudyKey{"terrain.keep_water", R"("ponds.geojson")", "none", "points and polygons where water stays"},
    StudyKey{"terrain.keep_water_layer", R"("ponds")", "the only one", "layer of that file; asked for where it has several"},
    StudyKey{"terrain.departure", R"("20 m")", "the larger of 20 m and 5 cells",
             "the ground's own path beside a mapped line is told where it departs farther than this"},
    StudyKey{"terrain.slope_window", R"("20 m")", "the larger of 20 m and 3 cells",
             "length of path over which slope is taken"},
    StudyKey{"terrain.vertical_step", R"("0.2 m")", "the largest of 0.2 m, the data's quantum and a tenth of the cell",
             "the least fall the elevations can be trusted with"},
    StudyKey{"terrain.pond_depth", R"("0.3 m")", "the larger of 0.3 m and vertical_step",
             "deeper below its spill elevation a cell is ponded"},
    StudyKey{"terrain.pond_speed", R"("2 m/s")", "2 m/s", "greatest speed across ponded cells, or \"unlimited\""},
    StudyKey{"surface.cover", R"("cover.tif")", "asked for", "land-cover raster"},
    StudyKey{"surface.band", "1", "the only one", "its band; asked for where the file has several"},
    StudyKey{"surface.book", R"("nlcd")", "asked for", "what its codes mean: nlcd, worldcover, or a CSV file"},
    StudyKey{"surface.fallback_class", "71", "none: unknown codes are an error",
             "code that stands in for codes the book does not know and for cells without cover"},
    StudyKey{"surface.cover_areas", R"("plan.gpkg")", "none", "polygons of land cover, laid over the raster"},
    StudyKey{"surface.cover_areas_layer", R"("plan")", "the only one", "layer of that file; asked for where it has several"},
    StudyKey{"surface.cover_field", R"("cover")", "cover", "field of the polygons that names their class, by its code or its name in the book"},
    StudyKey{"surface.soil_group", R"("B")", "none: no curve numbers",
             "hydrologic soil group, A to D, of the whole study, or a raster of them, such as \"soils.tif\""},
    StudyKey{"surface.soil_band", "1", "the only one", "band of that raster; asked for where the file has several"},
    StudyKey{"surface.soil_classes", R"({ 1 = "A", 2 = "B", 3 = "C", 4 = "D" })", "1 to 4 are A to D",
             "what the values of that raster mean"},
    StudyKey{"surface.fallback_soil_group", R"("D")", "none: cells without a group have no curve number",
             "soil group where that raster gives none"},
    StudyKey{"surface.path_length", R"("grid")", "grid",
             "grid: the length of a path is that of its steps; unbiased: 0.96194 of it, the weight of least error over all directions"},
    StudyKey{"points.file", R"("points.gpkg")", "none: points where flow leaves the data", "design points"},
    StudyKey{"points.name", R"("label")", "none: points are numbered", "field that names them"},
    StudyKey{"points.layer", R"("inlets")", "the only one", "layer of the file; asked for where it has several"},
    StudyKey{"points.catchments", R"("basins.gpkg")", "none",
             "hand-drawn catchments as polygons, in place of a file of points: each gets its point where its water leaves it"},
    StudyKey{"points.catchments_layer", R"("basins")", "the only one", "layer of that file; asked for where it has several"},
    StudyKey{"points.auto_area", R"("1 %")", "1 % of the data",
             "without a file: least area of a way out that becomes a point"},
    StudyKey{"points.move_within", R"("5 m")", "the larger of 5 m and one cell",
             "points move this far at most, to the cell of largest contributing area, or of the area nearest to the surveyed one"},
    StudyKey{"points.area", R"("surveyed")", "none", "field of areas that were surveyed for the points, such as \"4 ha\""},
    StudyKey{"points.area_unit", R"("ha")", "the unit that each area carries", "ha, ac, km2, mi2, m2 or ft2, where the field holds bare numbers"},
    StudyKey{"points.pipes", R"("pipes.csv")", "none", "table of pipes from one point to another, in place of the flow path"},
    StudyKey{"rain.two_year_24_hour", R"("3.6 in")", "asked for, unless rain.file holds it or sheet is kinematic",
             "2-year 24-hour rainfall depth"},
    StudyKey{"rain.file", R"("atlas14.csv")", "none",
             "intensity by duration and return period: a NOAA Atlas 14 point file or a plain table"},
    StudyKey{"rain.block", R"("estimate")", "estimate",
             "which block of an Atlas 14 file is read: estimate, upper bound or lower bound"},
    StudyKey{"rain.zones", R"("zones.gpkg")", "none: one rain everywhere",
             "polygons that name a rain file each; a point has the rain of the greatest share of its catchment"},
    StudyKey{"rain.zones_layer", R"("zones")", "the only one", "layer of the file; asked for where it has several"},
    StudyKey{"rain.zone_field", R"("rain")", "rain", "field of the polygons that names their rain file"},
    StudyKey{"rain.formula", R"("i[in/h] = 45 T^0.2 / (t[min] + 10)^0.8")", "none",
             "the same as a formula with T, or one formula a return period under [rain.formula]"},
    StudyKey{"rain.formula_from", R"("5 min")", "0 min", "shortest duration for which the formulas hold"},
    StudyKey{"rain.formula_to", R"("24 h")", "none", "longest duration for which the formulas hold"},
    StudyKey{"rain.return_periods", "[2, 10, 100]", "10, or raster_return_period",
             "return periods in years for which intensities are read"},
    StudyKey{"timing.sheet", R"("nrcs")", "nrcs",
             "formula of sheet flow: nrcs, or kinematic, which needs rain by duration"},
    StudyKey{"timing.sheet_constant", "0.933", "0.933",
             "constant of the kinematic formula: 0.933 (HEC-22) or 0.94 (Morgali and Linsley)"},
    StudyKey{"timing.sheet_rain", R"("rainfall")", "rainfall",
             "rainfall or runoff: whether kinematic sheet flow takes i, or C i with C of the cover book"},
    StudyKey{"timing.storm", R"("whole path")", "whole path",
             "whole path or sheet part: whose time is the duration of the storm that drives kinematic sheet flow"},
    StudyKey{"timing.raster_return_period", "10", "10 where it is listed, else the first that is",
             "return period in years of the storm that the rasters, paths and segments are for"},
    StudyKey{"timing.sheet_limit", R"("100 ft")", "100 ft", "distance from the divide at which sheet flow ends"},
    StudyKey{"timing.sheet_limit_rule", R"("whichever first")", "whichever first",
             "whichever first: sheet_limit or 100 ft sqrt(S)/n; stated: sheet_limit alone"},
    StudyKey{"timing.shallow", R"("by cover")", "by cover",
             "by cover or paved and unpaved: types of shallow concentrated flow; chart: velocity_chart"},
    StudyKey{"timing.velocity_chart", R"("chart.csv")", "none",
             "velocity of shallow flow by slope and surface, as points read from a chart"},
    StudyKey{"timing.slope_floor.overland", "0.001", "0.001", "least slope of sheet and shallow flow; 0 is off"},
    StudyKey{"timing.slope_floor.channel", "0.0001", "0.0001", "least slope of channels; 0 is off"},
    StudyKey{"timing.channel_from", R"("5 ha")", "5 ha, never under 20 cells",
             "contributing area where a channel begins, or \"mapped only\""},
    StudyKey{"timing.channel.n", "0.045", "0.045", "Manning's n of channels"},
    StudyKey{"timing.channel.region", R"("Interior Plains")", "United States",
             "published set of width and depth by contributing area"},
    StudyKey{"timing.channel.hydraulic_radius", R"("0.4 m")", "from width and depth",
             "one hydraulic radius for all channels"},
    StudyKey{"timing.channel.width", R"("2.70 m * km2^0.352")", "2.70 m * km2^0.352", "top width by contributing area"},
    StudyKey{"timing.channel.depth", R"("0.30 m * km2^0.213")", "0.30 m * km2^0.213",
             "mean depth by contributing area"},
    StudyKey{"timing.channel.flow", R"("bankfull")", "bankfull",
             "bankfull: velocity by the size of the channel; design storm: by the depth of the flow C i A in it, for each return period"},
    StudyKey{"timing.channel.side_slope", "0", "0",
             "run over rise of the sides of channels under the design storm; their bottom width is width"},
    StudyKey{"timing.ignore_tail", R"("0 %")", "0 %", "share of a point's area, the slowest, that is left out"},
    StudyKey{"timing.shortest_segment", R"("50 m")", "the larger of 50 m and 5 cells",
             "a shorter run of one slope joins its neighbour"},
    StudyKey{"timing.overrides", R"("overrides.csv")", "none",
             "table of what is stated of points in place of what is computed: time, way_time, sheet_length, n, c"},
    StudyKey{"timing.pipe_flow", R"("full bore")", "full bore",
             "full bore or design flow: the velocity in pipes is that of pipes just full, or at the depth of the point's whole-area peak of timing.raster_return_period, for all return periods alike"},
    StudyKey{"peaks.least_time", R"("5 min")", "5 min", "no intensity is read below this duration; 0 min is off"},
    StudyKey{"peaks.coefficient", R"("book")", "book",
             "book, imperviousness (after Urbonas) or imperviousness, schueler: where runoff coefficients come from"},
    StudyKey{"peaks.conversion", R"("exact")", "exact",
             "exact, or rounded: one acre under one inch an hour gives 1.00833 or 1 ft3/s"},
    StudyKey{"peaks.frequency_factors", R"("wright-mclaughlin")", "wright-mclaughlin",
             "wright-mclaughlin, australian 1987 or none: factors on coefficients that do not depend on the return period"},
    StudyKey{"peaks.area_limit", R"("200 ac")", "200 ac", "larger catchments get a notice"},
    StudyKey{"peaks.time_bin", R"("5 s")", "5 s", "width of the bins in which arrivals are kept"},
    StudyKey{"methods.kerby_n", "0.4", "the cover book's",
             "Kerby's retardance: a number, a surface of its table, or \"field NAME\" of the points' file"},
    StudyKey{"methods.izzard_c", "0.012", "the cover book's", "Izzard's retardance, in the same ways"},
    StudyKey{"methods.impervious", "0.35", "the cover book's",
             "impervious share for the Los Angeles County regression: a number, or \"field NAME\""},
    StudyKey{"methods.undeveloped_coefficient", "0.3", "none",
             "undeveloped runoff coefficient of the soil for the same: a number, or \"field NAME\""},
    StudyKey{"methods.county_k", R"("commercial")", "the cover book's",
             "K of the initial subarea of Californian counties: a number, a type of development, or \"field NAME\""},
    StudyKey{"methods.kirpich_factor", R"("paved overland")", "1",
             "multiplies Kirpich's time: a number, paved overland, concrete channel, or \"field NAME\""},
    StudyKey{"uncertainty.draws", "500", "500 under [uncertainty]; none without it",
             "times are drawn so many times over with all inputs within their ranges; the section alone asks for it"},
    StudyKey{"uncertainty.seed", "1", "1", "another number makes other draws"},
    StudyKey{"uncertainty.rain", R"("0.85 to 1.15")", "0.85 to 1.15", "range of the rain, as a factor"},
    StudyKey{"uncertainty.sheet_limit", R"("80 ft to 150 ft")", "0.8 to 1.5 times the sheet limit",
             "range of the distance from the divide at which sheet flow ends"},
    StudyKey{"uncertainty.shallow_speed", R"("0.75 to 1.33")", "0.75 to 1.33",
             "range of the speed of shallow concentrated flow, as a factor"},
    StudyKey{"uncertainty.slope_floor_overland", R"("0.0005 to 0.002")", "half to double the floor",
             "range of the slope floor overland"},
    StudyKey{"uncertainty.slope_floor_channel", R"("0.00005 to 0.0002")", "half to double the floor",
             "range of the slope floor in channels"},
    StudyKey{"uncertainty.channel_n", R"("0.03 to 0.07")", "0.67 to 1.5 times the n of channels",
             "range of Manning's n of channels"},
    StudyKey{"uncertainty.channel_radius", R"("0.7 to 1.4")", "0.7 to 1.4",
             "range of the hydraulic radius of channels, as a factor"},
    StudyKey{"uncertainty.pond_speed", R"("1 m/s to unlimited")", "1 m/s to unlimited",
             "range of the greatest speed across ponded cells"},
    StudyKey{"output.catchments", R"("all")", "all; last points where there are more than 500 points",
             "all or last points: whose whole catchment study.gpkg has; subareas it has of all"},
    StudyKey{"output.folder", R"("result")", "result", "result folder"},
    StudyKey{"output.isochrones", R"("5 min")", "none", "step between isochrones, of every subarea and every last point's catchment; or \"12 bands\": a round step that gives at most so many; \"none\" for none"},
    StudyKey{"output.isochrone_catchments", R"(["Mill bridge"])", "none", "points whose whole catchment has isochrones too"},
    StudyKey{"output.isochrone_borders", R"("cells")", "cells", "cells, or smoothed: corners of cells are cut off, by less than half a cell"},
    StudyKey{"output.rasters", R"("geotiff")", "geotiff", "geotiff, or cog: Cloud-Optimized GeoTIFF, whose parts can be read over the network"},
    StudyKey{"output.subareas", R"("least slacks")", "least slacks",
             "least slacks or all: which subareas of each point tables/subareas.csv lists"},
};

/// Keys, and sections as a whole, that belong to the study file but that this version does not compute.
constexpr std::array<std::string_view, 1> not_served{"rain.table"};

bool is_or_is_under(std::string_view key, std::string_view stem) {
    return key == stem || (key.starts_with(stem) && key.substr(stem.size()).starts_with('.'));
}

std::string_view last_word(std::string_view key) {
    const auto dot = key.rfind('.');
    return dot == std::string_view::npos ? key : key.substr(dot + 1);
}

std::vector<std::string_view> key_names() {
    std::vector<std::string_view> names;
    for (const StudyKey& key : keys) names.push_back(key.key);
    return names;
}

/// The sections that keys stand in, those within others too.
std::vector<std::string_view> section_names() {
    std::vector<std::string_view> names;
    for (const StudyKey& key : keys) {
        for (auto dot = key.key.find('.'); dot != std::string_view::npos; dot = key.key.find('.', dot + 1)) {
            const std::string_view name = key.key.substr(0, dot);
            if (std::find(names.begin(), names.end(), name) == names.end()) names.push_back(name);
        }
    }
    return names;
}

/// The section that is meant where a section, or what stands for its name, is not known; empty where none is near.
std::string meant_section(std::string_view key) {
    const auto sections = section_names();
    const auto in_words = [](std::string_view name) { return "; did you mean the section [" + std::string(name) + "]?"; };
    const auto whole = nearest_word(key, sections);
    const auto nearest_key = nearest_word(key, key_names());
    if (whole && (!nearest_key || edit_distance(key, *whole) < edit_distance(key, *nearest_key))) return in_words(*whole);
    const std::string_view stated = key.substr(0, key.find('.'));
    if (nearest_key || stated == key || std::find(sections.begin(), sections.end(), stated) != sections.end()) return {};
    const auto part = nearest_word(stated, sections);
    return part ? in_words(*part) : std::string();
}

/// A key is often right but in the wrong section, so its last word is looked for before the nearest whole key.
std::string suggestion(std::string_view key) {
    const auto names = key_names();
    const auto moved =
        std::find_if(names.begin(), names.end(), [&](auto name) { return last_word(name) == last_word(key); });
    if (moved != names.end()) return "; did you mean " + std::string(*moved) + "?";
    const std::string section = meant_section(key);
    if (!section.empty()) return section;
    const std::string whole = did_you_mean(key, names);
    if (!whole.empty()) return whole;
    std::vector<std::string_view> words;
    for (const auto name : names) words.push_back(last_word(name));
    const auto word = nearest_word(last_word(key), words);
    if (!word) return "; remove it, or see the list of keys in the README";
    return "; did you mean " +
           std::string(names[static_cast<std::size_t>(std::find(words.begin(), words.end(), *word) - words.begin())]) +
           "?";
}

}  // namespace

std::span<const StudyKey> study_keys() {
    return keys;
}

bool is_study_key(std::string_view key) {
    return std::any_of(keys.begin(), keys.end(), [&](const StudyKey& known) { return known.key == key; });
}

bool takes_entries(std::string_view key) {
    return key == "rain.formula" || key == "surface.soil_classes";
}

bool is_study_section(std::string_view name) {
    return std::any_of(keys.begin(), keys.end(),
                       [&](const StudyKey& known) { return known.key != name && is_or_is_under(known.key, name); });
}

void refuse_study_key(std::string_view key, std::string_view where) {
    const std::string begin = std::string(where) + ": ";
    for (const std::string_view stem : not_served)
        if (is_or_is_under(key, stem))
            throw input_error(
                begin + std::string(key) +
                " is not known to this version of rillclock, which would compute without it; remove it to go on");
    throw input_error(begin + std::string(key) + " is not a key of a study" + suggestion(key));
}

}  // namespace rillclock
