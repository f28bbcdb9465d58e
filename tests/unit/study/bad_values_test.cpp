#include <catch2/catch.hpp>

#include <algorithm>
#include <map>
#include <string>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/study/study_file.hpp"
#include "rillclock/study/study_keys.hpp"

namespace rillclock {
namespace {

/// What kind of value a key takes.
enum class Kind {
    text,           ///< any text that is not empty
    word,           ///< one of a few words
    length,         ///< above zero, as all quantities here but for those that may be zero
    length_or_zero,
    rain_depth,
    speed,
    area,
    duration,
    duration_or_zero,
    share,          ///< below 100 %
    share_or_zero,
    power_law,
    count,          ///< whole, from 1
    code,           ///< whole, from 0
    number,         ///< above zero
    number_or_zero,
    years,
    list_of_years,
    formula,
    soil,
    soil_classes,
    day,            ///< of the calendar
    texts,          ///< a list of them, or one
    duration_or_bands,
    range,          ///< "LOW to HIGH", each a number with the key's own unit
};

/// Every key of a study with the kind of value it takes. A new key needs its line here.
const std::map<std::string, Kind> kinds{
    {"title", Kind::text},
    {"date", Kind::day},
    {"report_units", Kind::word},
    {"terrain.elevation", Kind::text},
    {"terrain.band", Kind::count},
    {"terrain.elevation_unit", Kind::word},
    {"terrain.channels", Kind::text},
    {"terrain.crossings", Kind::text},
    {"terrain.barriers", Kind::text},
    {"terrain.keep_water", Kind::text},
    {"terrain.channels_layer", Kind::text},
    {"terrain.crossings_layer", Kind::text},
    {"terrain.barriers_layer", Kind::text},
    {"terrain.keep_water_layer", Kind::text},
    {"terrain.departure", Kind::length},
    {"terrain.slope_window", Kind::length},
    {"terrain.vertical_step", Kind::length},
    {"terrain.pond_depth", Kind::length},
    {"terrain.pond_speed", Kind::speed},
    {"surface.cover", Kind::text},
    {"surface.band", Kind::count},
    {"surface.book", Kind::text},
    {"surface.fallback_class", Kind::code},
    {"surface.cover_areas", Kind::text},
    {"surface.cover_areas_layer", Kind::text},
    {"surface.cover_field", Kind::text},
    {"surface.soil_group", Kind::soil},
    {"surface.soil_band", Kind::count},
    {"surface.soil_classes", Kind::soil_classes},
    {"surface.fallback_soil_group", Kind::word},
    {"surface.path_length", Kind::word},
    {"points.file", Kind::text},
    {"points.name", Kind::text},
    {"points.layer", Kind::text},
    {"points.auto_area", Kind::share},
    {"points.move_within", Kind::length_or_zero},
    {"points.catchments", Kind::text},
    {"points.catchments_layer", Kind::text},
    {"points.area", Kind::text},
    {"points.area_unit", Kind::word},
    {"points.pipes", Kind::text},
    {"rain.two_year_24_hour", Kind::rain_depth},
    {"rain.file", Kind::text},
    {"rain.block", Kind::word},
    {"rain.zones", Kind::text},
    {"rain.zones_layer", Kind::text},
    {"rain.zone_field", Kind::text},
    {"rain.formula", Kind::formula},
    {"rain.formula_from", Kind::duration_or_zero},
    {"rain.formula_to", Kind::duration},
    {"rain.return_periods", Kind::list_of_years},
    {"timing.sheet", Kind::word},
    {"timing.sheet_constant", Kind::number},
    {"timing.sheet_rain", Kind::word},
    {"timing.storm", Kind::word},
    {"timing.raster_return_period", Kind::years},
    {"timing.sheet_limit", Kind::length},
    {"timing.sheet_limit_rule", Kind::word},
    {"timing.shallow", Kind::word},
    {"timing.velocity_chart", Kind::text},
    {"timing.slope_floor.overland", Kind::number_or_zero},
    {"timing.slope_floor.channel", Kind::number_or_zero},
    {"timing.channel_from", Kind::area},
    {"timing.channel.n", Kind::number},
    {"timing.channel.hydraulic_radius", Kind::length},
    {"timing.channel.region", Kind::word},
    {"timing.channel.flow", Kind::word},
    {"timing.channel.side_slope", Kind::number_or_zero},
    {"timing.channel.width", Kind::power_law},
    {"timing.channel.depth", Kind::power_law},
    {"timing.ignore_tail", Kind::share_or_zero},
    {"timing.shortest_segment", Kind::length},
    {"timing.overrides", Kind::text},
    {"timing.pipe_flow", Kind::word},
    {"peaks.least_time", Kind::duration_or_zero},
    {"peaks.coefficient", Kind::word},
    {"peaks.conversion", Kind::word},
    {"peaks.frequency_factors", Kind::word},
    {"peaks.area_limit", Kind::area},
    {"peaks.time_bin", Kind::duration},
    {"uncertainty.draws", Kind::count},
    {"uncertainty.seed", Kind::code},
    {"uncertainty.rain", Kind::range},
    {"uncertainty.sheet_limit", Kind::range},
    {"uncertainty.shallow_speed", Kind::range},
    {"uncertainty.slope_floor_overland", Kind::range},
    {"uncertainty.slope_floor_channel", Kind::range},
    {"uncertainty.channel_n", Kind::range},
    {"uncertainty.channel_radius", Kind::range},
    {"uncertainty.pond_speed", Kind::range},
    {"methods.kerby_n", Kind::number},
    {"methods.izzard_c", Kind::number},
    {"methods.impervious", Kind::number_or_zero},
    {"methods.undeveloped_coefficient", Kind::number_or_zero},
    {"methods.county_k", Kind::number},
    {"methods.kirpich_factor", Kind::number},
    {"output.catchments", Kind::word},
    {"output.folder", Kind::text},
    {"output.isochrones", Kind::duration_or_bands},
    {"output.isochrone_catchments", Kind::texts},
    {"output.isochrone_borders", Kind::word},
    {"output.rasters", Kind::word},
    {"output.subareas", Kind::word},
};

using Values = std::vector<std::string>;

Values joined(Values values, const Values& more) {
    values.insert(values.end(), more.begin(), more.end());
    return values;
}

/// A number in a text with its unit: negative, no number, without unit, of another dimension, and without quotes.
Values bad_quantities(const std::string& unit, const std::string& other) {
    return {"\"-1 " + unit + "\"", "\"nan " + unit + "\"", "\"inf " + unit + "\"", "\"1e999 " + unit + "\"", "\"1\"",
            "\"1 " + other + "\"", "\"" + unit + "\"", "\"\"", "1", "nan", "true"};
}

Values bad_numbers() {
    return {"-1", "nan", "inf", "-inf", "1e9", "\"\"", "\"1 m\"", "true", "[1]"};
}

/// Values that a key of that kind must refuse.
Values bad_values(Kind kind) {
    switch (kind) {
        case Kind::text:
            return {"\"\"", "1", "0", "-1", "nan", "true"};
        case Kind::range:
            return {"\"\"", "\"1\"", "\"1 to\"", "\"to 1\"", "\"zzz to zzz\"", "\"nan to nan\"", "\"2 zzz to 3 zzz\"", "1", "nan", "true", "[1, 2]"};
        case Kind::word:
            return {"\"\"", "\"zzz\"", "1", "nan", "true"};
        case Kind::length:
            return joined({"\"0 m\""}, bad_values(Kind::length_or_zero));
        case Kind::length_or_zero:
            return bad_quantities("m", "ha");
        case Kind::rain_depth:
            return joined({"\"0 in\"", "\"0.1 in\"", "\"100 in\""}, bad_quantities("in", "ha"));
        case Kind::speed:
            return joined({"\"0 m/s\""}, bad_quantities("m/s", "m"));
        case Kind::area:
            return joined({"\"0 ha\""}, bad_quantities("ha", "m"));
        case Kind::day:
            return {"\"\"", "1", "true", "[1]", "\"1 May 2026\"", "\"2026-13-01\"", "\"2026-02-29\"", "\"2026-5-1\"", "\"2026-05-01T10:00\"", "\"+026-05-01\""};
        case Kind::texts:
            return {"\"\"", "1", "nan", "true", "[]", "[1]", "[\"\"]", "[\"Weir\", 2]", "{ a = \"Weir\" }"};
        case Kind::duration_or_bands:
            return joined({"\"0 bands\"", "\"1.5 bands\"", "\"bands\"", "\" bands\"", "\"1001 bands\"", "12"}, bad_values(Kind::duration));
        case Kind::duration:
            return joined({"\"0 min\""}, bad_values(Kind::duration_or_zero));
        case Kind::duration_or_zero:
            return bad_quantities("min", "m");
        case Kind::share:
            return joined({"\"0 %\""}, bad_values(Kind::share_or_zero));
        case Kind::share_or_zero:
            return joined({"\"100 %\"", "\"200 %\""}, bad_quantities("%", "m"));
        case Kind::power_law:
            return {"\"-1 m * km2^0.3\"", "\"0 m * km2^0.3\"", "\"nan m * km2^0.3\"", "\"1 ha * km2^0.3\"",
                    "\"1 m * km^0.3\"",   "\"1 m * km2^-1\"",  "\"1 m * km2^nan\"",   "\"1 m * km2\"",
                    "\"1\"",              "\"\"",              "1",                   "nan"};
        case Kind::count:
            return joined({"0"}, bad_values(Kind::code));
        case Kind::code:
            return {"-1", "1.5", "nan", "inf", "\"1\"", "\"\"", "true", "99999999999"};
        case Kind::number:
            return joined({"0"}, bad_numbers());
        case Kind::number_or_zero:
            return bad_numbers();
        case Kind::years:
            return {"0", "0.5", "-1", "nan", "inf", "\"10\"", "true", "[10]"};
        case Kind::list_of_years:
            return {"0", "[0]", "[-1]", "[nan]", "[inf]", "[]", "[10, 2]", "[2, 2]", "[\"2\"]", "\"10\"", "nan", "true"};
        case Kind::formula:
            return {"\"\"", "1", "nan", "\"60\"", "\"i[in/h] = -60 / (t[min] + 12)^0.85\"",
                    "\"i[in/h] = 0 / (t[min] + 12)^0.85\"", "\"i[in/h] = nan / (t[min] + 12)^0.85\"",
                    "\"i[m/s] = 60 / (t[min] + 12)^0.85\"", "\"i[in/h] = 60 / (t[ft] + 12)^0.85\"",
                    "\"i = 60 / (t + 12)^0.85\"", "\"i[in/h] = 60 / (t[min] - 12)^0.85\""};
        case Kind::soil:
            return {"\"\"", "\"E\"", "\"a\"", "\"AB\"", "1", "nan", "true", "[1]"};
        case Kind::soil_classes:
            return {"\"A\"", "1", "{ 1 = \"E\" }", "{ x = \"A\" }", "{ 1 = 1 }", "{ 1 = nan }", "{ 1.5 = \"A\" }"};
    }
    return {};
}

std::string without_quotes(std::string_view form) {
    std::string text(form);
    std::erase(text, '"');
    return text;
}

/// The sentence by which a study with that line is refused; empty where it is read.
std::string refusal(const std::string& line) {
    try {
        (void)read_study("# a study\n" + line + "\n", "town.toml");
    } catch (const Error& error) {
        return error.fault() == Fault::inputs ? error.what() : std::string("not the user's fault: ") + error.what();
    }
    return {};
}

bool holds(const std::string& text, const std::string& part) {
    return text.find(part) != std::string::npos;
}

TEST_CASE("every key of a study says here what kind of value it takes") {
    for (const StudyKey& key : study_keys()) {
        INFO("the new key " << key.key << " needs a line in the table of kinds above");
        CHECK(kinds.contains(std::string(key.key)));
    }
    CHECK(kinds.size() == study_keys().size());
}

TEST_CASE("every bad value of every key is refused with file, line and a right form") {
    for (const StudyKey& key : study_keys()) {
        const auto kind = kinds.find(std::string(key.key));
        if (kind == kinds.end()) continue;  // told above
        for (const std::string& bad : bad_values(kind->second)) {
            const std::string sentence = refusal(std::string(key.key) + " = " + bad);
            INFO(key.key << " = " << bad << " is refused with: " << sentence);
            CHECK(holds(sentence, "town.toml, line 2, column "));
            CHECK(holds(sentence, std::string(key.key)));
            CHECK((holds(sentence, std::string(key.form)) || holds(sentence, without_quotes(key.form)) ||
                   holds(sentence, "write ") || holds(sentence, "such as ")));
        }
    }
}

}  // namespace
}  // namespace rillclock
