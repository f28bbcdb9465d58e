#include <algorithm>
#include <array>
#include <charconv>
#include <limits>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"
#include "rillclock/rainfall/design_rain.hpp"
#include "rillclock/study/study_keys.hpp"
#include "rillclock/surface/cover_book.hpp"
#include "stated.hpp"

namespace rillclock {
namespace {

Speed pond_speed(const Stated& stated) {
    if (stated.text() == "unlimited") return metres_per_second(std::numeric_limits<double>::infinity());
    return stated.speed();
}

std::string region(const Stated& stated) {
    std::vector<std::string_view> regions;
    for (const ChannelSize& size : channel_sizes()) regions.push_back(size.region);
    return std::string(regions[stated.choice(regions)]);
}

std::optional<Area> channel_from(const Stated& stated) {
    if (stated.text() == "mapped only") return std::nullopt;
    return stated.area();
}

Length elevation_unit(const Stated& stated) {
    constexpr std::array units{metres(1), feet(1), us_survey_feet(1)};
    return units[stated.choice({"m", "ft", "us survey ft"})];
}

Area area_unit(const Stated& stated) {
    constexpr std::array units{hectares(1), acres(1), square_kilometres(1), square_miles(1), square_metres(1), square_feet(1)};
    return units[stated.choice({"ha", "ac", "km2", "mi2", "m2", "ft2"})];
}

double sheet_constant(const Stated& stated) {
    const double constant = stated.number(0, 10);
    if (constant != kinematic_constant_hec22 && constant != kinematic_constant_morgali_linsley)
        throw stated.fault("is " + significant(constant) + "; write 0.933 (HEC-22) or 0.94 (Morgali and Linsley)");
    return constant;
}

SoilGroup soil_letter(const Stated& stated) {
    return static_cast<SoilGroup>(stated.choice({"A", "B", "C", "D"}));
}

void set_soil(SurfaceStudy& surface, const Stated& stated) {
    if (stated.text().find_first_of("./:") != std::string::npos) {
        surface.soil.file = stated.text();
        return;
    }
    constexpr std::string_view letters = "ABCD";
    if (stated.text().size() != 1 || letters.find(stated.text()) == std::string_view::npos)
        throw stated.fault("is \"" + stated.text() +
                           "\"; write \"A\" or \"B\" or \"C\" or \"D\", or the name of a raster, such as \"soils.tif\"");
    surface.soil_group = soil_letter(stated);
}

void add_soil_class(SurfaceStudy& surface, const Stated& stated) {
    const int value = stated.entry_class();
    if (!surface.soil.classes.emplace(value, soil_letter(stated)).second)
        throw stated.fault("gives the value " + std::to_string(value) + " a second time; keep one");
}

void add_formula(Study& study, const Stated& stated) {
    PeriodFormula formula{.return_period = stated.entry_period(),
                          .formula = intensity_formula_from_text(stated.text(), stated.subject())};
    study.rain.formulas.push_back({.formula = formula, .subject = stated.subject()});
}

/// No finer than a hundredth of a second, so that bins stay few, and no coarser than the table of rows.
Duration time_bin(const Stated& stated) {
    const Duration bin = stated.duration(Sign::positive);
    if (!(bin >= seconds(0.01) && bin <= minutes(10))) throw stated.fault("is \"" + stated.text() + "\"; write 0.01 s to 10 min, such as \"5 s\"");
    return bin;
}

void set_lump_input(Study& study, LumpInput input, const Stated& stated) {
    constexpr std::string_view by_field = "field ";
    const LumpRange range = range_of(input);
    LumpValue& value = study.methods[input];
    if (!stated.is_text())
        value.number = stated.number(range.least, range.greatest);
    else if (stated.text().starts_with(by_field))
        value.field = stated.text().substr(by_field.size());
    else
        value.number = lump_input_from_text(input, stated.text(), stated.subject());
}

/// "LOW to HIGH", each read by `one`.
template <class One>
ValueRange range_of(const Stated& stated, One one) {
    const std::string& text = stated.text();
    const auto between = text.find(" to ");
    if (between == std::string::npos)
        throw stated.fault("is \"" + text + "\"; write the least and the greatest value, such as " + stated.form());
    const ValueRange range{.low = one(text.substr(0, between)), .high = one(text.substr(between + 4))};
    if (!(range.low < range.high))
        throw stated.fault("is \"" + text + "\", which does not rise; write the least value first, such as " +
                           stated.form());
    return range;
}

ValueRange number_range(const Stated& stated) {
    return range_of(stated, [&](const std::string& text) { return number_from_text(text, stated.one_of_range()); });
}

ValueRange length_range(const Stated& stated) {
    return range_of(stated, [&](const std::string& text) { return in_metres(length_from_text(text, stated.one_of_range())); });
}

ValueRange speed_range(const Stated& stated) {
    return range_of(stated, [&](const std::string& text) {
        if (text == "unlimited") return std::numeric_limits<double>::infinity();
        return in_metres_per_second(speed_from_text(text, stated.one_of_range()));
    });
}

UncertaintyStudy& uncertainty(Study& study) {
    if (!study.uncertainty) study.uncertainty.emplace();
    return *study.uncertainty;
}

constexpr int most_isochrone_bands = 1000;  // of one catchment

/// "5 min", "12 bands" or "none".
void set_isochrones(IsochroneStudy& isochrones, const Stated& v) {
    constexpr std::string_view ending = " bands";
    isochrones.step.reset();
    isochrones.bands.reset();
    if (v.text() == "none") return;
    if (!v.text().ends_with(ending)) {
        isochrones.step = v.duration(Sign::positive);
        return;
    }
    int bands = 0;
    const char* end = v.text().data() + v.text().size() - ending.size();
    const auto [last, error] = std::from_chars(v.text().data(), end, bands);
    if (error != std::errc() || last != end || bands < 1 || bands > most_isochrone_bands)
        throw v.fault("is \"" + v.text() + "\"; write how many bands there may be at most, from 1 to " + std::to_string(most_isochrone_bands) +
                      ", such as \"12 bands\", or a step such as " + v.form());
    isochrones.bands = bands;
}

struct Setter {
    std::string_view key;
    void (*set)(Study&, const Stated&);
};

constexpr int most_draws = 10000;
constexpr double least_n = 0.005;  // smoother than glass
constexpr double greatest_n = 1.0;
constexpr double greatest_side_slope = 100.0;

constexpr std::array setters{
    Setter{"title", [](Study& s, const Stated& v) { s.title = v.text(); }},
    Setter{"date", [](Study& s, const Stated& v) { s.date = v.date(); }},
    Setter{"report_units",
           [](Study& s, const Stated& v) { s.report_units = v.choice({"us", "si"}) == 0 ? ReportUnits::us : ReportUnits::si; }},
    Setter{"terrain.elevation", [](Study& s, const Stated& v) { s.terrain.elevation = v.text(); }},
    Setter{"terrain.band", [](Study& s, const Stated& v) { s.terrain.band = v.whole_number(1); }},
    Setter{"terrain.elevation_unit", [](Study& s, const Stated& v) { s.terrain.elevation_unit = elevation_unit(v); }},
    Setter{"terrain.channels", [](Study& s, const Stated& v) { s.terrain.channels.file = v.text(); }},
    Setter{"terrain.channels_layer", [](Study& s, const Stated& v) { s.terrain.channels.layer = v.text(); }},
    Setter{"terrain.crossings", [](Study& s, const Stated& v) { s.terrain.crossings.file = v.text(); }},
    Setter{"terrain.crossings_layer", [](Study& s, const Stated& v) { s.terrain.crossings.layer = v.text(); }},
    Setter{"terrain.barriers", [](Study& s, const Stated& v) { s.terrain.barriers.file = v.text(); }},
    Setter{"terrain.barriers_layer", [](Study& s, const Stated& v) { s.terrain.barriers.layer = v.text(); }},
    Setter{"terrain.keep_water", [](Study& s, const Stated& v) { s.terrain.keep_water.file = v.text(); }},
    Setter{"terrain.keep_water_layer", [](Study& s, const Stated& v) { s.terrain.keep_water.layer = v.text(); }},
    Setter{"terrain.departure", [](Study& s, const Stated& v) { s.terrain.departure = v.length(); }},
    Setter{"terrain.slope_window", [](Study& s, const Stated& v) { s.terrain.slope_window = v.length(); }},
    Setter{"terrain.vertical_step", [](Study& s, const Stated& v) { s.terrain.vertical_step = v.length(); }},
    Setter{"terrain.pond_depth", [](Study& s, const Stated& v) { s.terrain.pond_depth = v.length(); }},
    Setter{"terrain.pond_speed", [](Study& s, const Stated& v) { s.terrain.pond_speed = pond_speed(v); }},
    Setter{"surface.cover", [](Study& s, const Stated& v) { s.surface.cover = v.text(); }},
    Setter{"surface.band", [](Study& s, const Stated& v) { s.surface.band = v.whole_number(1); }},
    Setter{"surface.book", [](Study& s, const Stated& v) { s.surface.book = v.text(); }},
    Setter{"surface.fallback_class", [](Study& s, const Stated& v) { s.surface.fallback_class = v.whole_number(0); }},
    Setter{"surface.cover_areas", [](Study& s, const Stated& v) { s.surface.cover_areas.file = v.text(); }},
    Setter{"surface.cover_areas_layer", [](Study& s, const Stated& v) { s.surface.cover_areas.layer = v.text(); }},
    Setter{"surface.cover_field", [](Study& s, const Stated& v) { s.surface.cover_field = v.text(); }},
    Setter{"surface.soil_group", [](Study& s, const Stated& v) { set_soil(s.surface, v); }},
    Setter{"surface.soil_band", [](Study& s, const Stated& v) { s.surface.soil.band = v.whole_number(1); }},
    Setter{"surface.soil_classes", [](Study& s, const Stated& v) { add_soil_class(s.surface, v); }},
    Setter{"surface.fallback_soil_group",
           [](Study& s, const Stated& v) { s.surface.soil.fallback_group = soil_letter(v); }},
    Setter{"surface.path_length",
           [](Study& s, const Stated& v) { s.surface.unbiased_lengths = v.choice({"grid", "unbiased"}) == 1; }},
    Setter{"points.file", [](Study& s, const Stated& v) { s.points.file = v.text(); }},
    Setter{"points.name", [](Study& s, const Stated& v) { s.points.name = v.text(); }},
    Setter{"points.layer", [](Study& s, const Stated& v) { s.points.layer = v.text(); }},
    Setter{"points.auto_area", [](Study& s, const Stated& v) { s.points.auto_area = v.fraction(Sign::positive); }},
    Setter{"points.move_within",
           [](Study& s, const Stated& v) { s.points.move_within = length_from_text(v.text(), v.asked(Sign::not_negative)); }},
    Setter{"points.catchments", [](Study& s, const Stated& v) { s.points.catchments.file = v.text(); }},
    Setter{"points.catchments_layer", [](Study& s, const Stated& v) { s.points.catchments.layer = v.text(); }},
    Setter{"points.area", [](Study& s, const Stated& v) { s.points.area = v.text(); }},
    Setter{"points.area_unit", [](Study& s, const Stated& v) { s.points.area_unit = area_unit(v); }},
    Setter{"rain.two_year_24_hour",
           [](Study& s, const Stated& v) { s.rain.two_year_24_hour = two_year_24_hour_from_text(v.text(), v.subject()); }},
    Setter{"rain.file", [](Study& s, const Stated& v) { s.rain.file = v.text(); }},
    Setter{"rain.block",
           [](Study& s, const Stated& v) {
               s.rain.block = static_cast<Atlas14Block>(v.choice({"estimate", "upper bound", "lower bound"}));
           }},
    Setter{"rain.zones", [](Study& s, const Stated& v) { s.rain.zones.file = v.text(); }},
    Setter{"rain.zones_layer", [](Study& s, const Stated& v) { s.rain.zones.layer = v.text(); }},
    Setter{"rain.zone_field", [](Study& s, const Stated& v) { s.rain.zones.field = v.text(); }},
    Setter{"rain.formula", add_formula},
    Setter{"rain.formula_from",
           [](Study& s, const Stated& v) { s.rain.formula_from = v.duration(Sign::not_negative); }},
    Setter{"rain.formula_to", [](Study& s, const Stated& v) { s.rain.formula_to = v.duration(Sign::positive); }},
    Setter{"rain.return_periods", [](Study& s, const Stated& v) { s.rain.return_periods = v.return_periods(); }},
    Setter{"timing.sheet",
           [](Study& s, const Stated& v) {
               (void)v.choice({"nrcs", "kinematic"});
               s.timing.sheet = v.text();
           }},
    Setter{"timing.sheet_constant", [](Study& s, const Stated& v) { s.timing.sheet_constant = sheet_constant(v); }},
    Setter{"timing.sheet_rain",
           [](Study& s, const Stated& v) { s.timing.sheet_takes_runoff = v.choice({"rainfall", "runoff"}) == 1; }},
    Setter{"timing.storm",
           [](Study& s, const Stated& v) {
               const bool whole = v.choice({"whole path", "sheet part"}) == 0;
               s.timing.storm = whole ? StormDuration::whole_path : StormDuration::sheet_part;
           }},
    Setter{"timing.raster_return_period",
           [](Study& s, const Stated& v) { s.timing.raster_return_period = v.number(1, greatest_return_period); }},
    Setter{"timing.sheet_limit", [](Study& s, const Stated& v) { s.timing.sheet_limit = v.length(); }},
    Setter{"timing.sheet_limit_rule",
           [](Study& s, const Stated& v) {
               const bool first = v.choice({"whichever first", "stated"}) == 0;
               s.timing.sheet_limit_rule = first ? SheetLimitRule::length_or_index : SheetLimitRule::stated;
           }},
    Setter{"timing.shallow",
           [](Study& s, const Stated& v) {
               constexpr std::array rules{ShallowRule::by_cover, ShallowRule::paved_and_unpaved, ShallowRule::chart};
               s.timing.shallow = rules[v.choice({"by cover", "paved and unpaved", "chart"})];
           }},
    Setter{"timing.velocity_chart", [](Study& s, const Stated& v) { s.timing.velocity_chart = v.text(); }},
    Setter{"timing.slope_floor.overland",
           [](Study& s, const Stated& v) { s.timing.slope_floor_overland = v.number(0, 1); }},
    Setter{"timing.slope_floor.channel",
           [](Study& s, const Stated& v) { s.timing.slope_floor_channel = v.number(0, 1); }},
    Setter{"timing.channel_from", [](Study& s, const Stated& v) { s.timing.channel_from = channel_from(v); }},
    Setter{"timing.channel.n", [](Study& s, const Stated& v) { s.timing.channel.n = v.number(least_n, greatest_n); }},
    Setter{"timing.channel.region", [](Study& s, const Stated& v) { s.timing.channel.region = region(v); }},
    Setter{"timing.channel.hydraulic_radius",
           [](Study& s, const Stated& v) { s.timing.channel.hydraulic_radius = v.length(); }},
    Setter{"timing.channel.width", [](Study& s, const Stated& v) { s.timing.channel.width = v.power_law(); }},
    Setter{"timing.channel.depth", [](Study& s, const Stated& v) { s.timing.channel.depth = v.power_law(); }},
    Setter{"timing.channel.flow",
           [](Study& s, const Stated& v) { s.timing.channel.design_storm = v.choice({"bankfull", "design storm"}) == 1; }},
    Setter{"timing.channel.side_slope",
           [](Study& s, const Stated& v) { s.timing.channel.side_slope = v.number(0, greatest_side_slope); }},
    Setter{"timing.ignore_tail",
           [](Study& s, const Stated& v) { s.timing.ignore_tail = v.fraction(Sign::not_negative); }},
    Setter{"points.pipes", [](Study& s, const Stated& v) { s.points.pipes = v.text(); }},
    Setter{"timing.overrides", [](Study& s, const Stated& v) { s.timing.overrides = v.text(); }},
    Setter{"timing.pipe_flow",
           [](Study& s, const Stated& v) {
               s.timing.pipe_flow = v.choice({"full bore", "design flow"}) == 0 ? PipeFlow::full_bore : PipeFlow::design_flow;
           }},
    Setter{"timing.shortest_segment", [](Study& s, const Stated& v) { s.timing.shortest_segment = v.length(); }},
    Setter{"peaks.least_time", [](Study& s, const Stated& v) { s.peaks.least_time = v.duration(Sign::not_negative); }},
    Setter{"peaks.coefficient",
           [](Study& s, const Stated& v) {
               constexpr std::array sources{CoefficientSource::book, CoefficientSource::urbonas, CoefficientSource::schueler};
               s.peaks.coefficient = sources[v.choice({words(sources[0]), words(sources[1]), words(sources[2])})];
           }},
    Setter{"peaks.conversion",
           [](Study& s, const Stated& v) {
               const bool exact = v.choice({"exact", "rounded"}) == 0;
               s.peaks.conversion = exact ? RationalConversion::exact : RationalConversion::rounded;
           }},
    Setter{"peaks.frequency_factors",
           [](Study& s, const Stated& v) {
               constexpr std::array factors{FrequencyFactors::wright_mclaughlin, FrequencyFactors::australian, FrequencyFactors::none};
               s.peaks.frequency_factors = factors[v.choice({words(factors[0]), words(factors[1]), words(factors[2])})];
           }},
    Setter{"peaks.area_limit", [](Study& s, const Stated& v) { s.peaks.area_limit = v.area(); }},
    Setter{"peaks.time_bin", [](Study& s, const Stated& v) { s.peaks.time_bin = time_bin(v); }},
    Setter{"methods.kerby_n", [](Study& s, const Stated& v) { set_lump_input(s, LumpInput::kerby_n, v); }},
    Setter{"methods.izzard_c", [](Study& s, const Stated& v) { set_lump_input(s, LumpInput::izzard_c, v); }},
    Setter{"methods.impervious", [](Study& s, const Stated& v) { set_lump_input(s, LumpInput::impervious, v); }},
    Setter{"methods.undeveloped_coefficient",
           [](Study& s, const Stated& v) { set_lump_input(s, LumpInput::undeveloped_coefficient, v); }},
    Setter{"methods.county_k", [](Study& s, const Stated& v) { set_lump_input(s, LumpInput::county_k, v); }},
    Setter{"methods.kirpich_factor", [](Study& s, const Stated& v) { set_lump_input(s, LumpInput::kirpich_factor, v); }},
    Setter{"uncertainty.draws",
           [](Study& s, const Stated& v) { uncertainty(s).draws = v.whole_number(10, most_draws); }},
    Setter{"uncertainty.seed", [](Study& s, const Stated& v) { uncertainty(s).seed = v.whole_number(0); }},
    Setter{"uncertainty.rain", [](Study& s, const Stated& v) { uncertainty(s).rain = number_range(v); }},
    Setter{"uncertainty.sheet_limit", [](Study& s, const Stated& v) { uncertainty(s).sheet_limit = length_range(v); }},
    Setter{"uncertainty.shallow_speed", [](Study& s, const Stated& v) { uncertainty(s).shallow_speed = number_range(v); }},
    Setter{"uncertainty.slope_floor_overland",
           [](Study& s, const Stated& v) { uncertainty(s).slope_floor_overland = number_range(v); }},
    Setter{"uncertainty.slope_floor_channel",
           [](Study& s, const Stated& v) { uncertainty(s).slope_floor_channel = number_range(v); }},
    Setter{"uncertainty.channel_n", [](Study& s, const Stated& v) { uncertainty(s).channel_n = number_range(v); }},
    Setter{"uncertainty.channel_radius",
           [](Study& s, const Stated& v) { uncertainty(s).channel_radius = number_range(v); }},
    Setter{"uncertainty.pond_speed", [](Study& s, const Stated& v) { uncertainty(s).pond_speed = speed_range(v); }},
    Setter{"output.catchments", [](Study& s, const Stated& v) { s.output.all_catchments = v.choice({"last points", "all"}) == 1; }},
    Setter{"output.folder", [](Study& s, const Stated& v) { s.output.folder = v.text(); }},
    Setter{"output.isochrones", [](Study& s, const Stated& v) { set_isochrones(s.output.isochrones, v); }},
    Setter{"output.isochrone_catchments", [](Study& s, const Stated& v) { s.output.isochrones.catchments = v.texts(); }},
    Setter{"output.isochrone_borders", [](Study& s, const Stated& v) { s.output.isochrones.smoothed = v.choice({"cells", "smoothed"}) == 1; }},
    Setter{"output.rasters", [](Study& s, const Stated& v) { s.output.cloud_optimized = v.choice({"geotiff", "cog"}) == 1; }},
    Setter{"output.subareas",
           [](Study& s, const Stated& v) {
               const bool all = v.choice({"least slacks", "all"}) == 1;
               s.output.subareas = all ? SubareasListed::all : SubareasListed::least_slacks;
           }},
};

}  // namespace

void set_study_value(Study& study, std::string_view key, const StudyValue& value) {
    for (const Setter& setter : setters)
        if (setter.key == key) return setter.set(study, Stated(key, value));
    throw bug("no study key " + std::string(key));
}

}  // namespace rillclock
