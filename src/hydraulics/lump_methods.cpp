#include "rillclock/hydraulics/lump_methods.hpp"

#include <algorithm>

#include "lump_times.hpp"

namespace rillclock {
namespace {

constexpr MethodInput path_ft{"L", "longest path", "ft"};
constexpr MethodInput path_mi{"L", "longest path", "mi"};
constexpr MethodInput path_slope_ratio{"S", "fall of the longest path over its length", "ft/ft"};
constexpr MethodInput time_min{"T", "time of concentration", "min"};
constexpr MethodInput time_h{"T", "time of concentration", "h"};
constexpr MethodInput fall_ft{"H", "fall of the longest path", "ft"};
constexpr MethodInput rain_in_h{"i", "rainfall intensity for a storm as long as T, by iteration", "in/h"};

LumpMethod nrcs_lag_method() {
    return {.about = {.id = "lump-nrcs-lag",
                      .name = "NRCS watershed lag",
                      .formula = "T = L^0.8 (1000/CN - 9)^0.7 / (1140 Y^0.5)",
                      .inputs = {path_ft,
                                 {"CN", "curve number, averaged by area", "-"},
                                 {"Y", "average slope of the land", "%"},
                                 time_h},
                      .range = "CN 50 to 95; 0.002 to 19 square miles",
                      .source = "USDA NRCS, National Engineering Handbook, Part 630 chapter 15, 2010, equation 15-4b; "
                                "range by Mockus, 1961, and Folmar and Miller, 2000"},
            .time = nrcs_lag_time};
}

std::vector<LumpMethod> channel_formulas() {
    return {
        {.about = {.id = "lump-kirpich",
                   .name = "Kirpich",
                   .formula =
                       "T = 0.0078 L^0.77 S^-0.385, times 0.4 for paved overland flow, 0.2 for concrete channels",
                   .inputs = {path_ft, path_slope_ratio, time_min},
                   .range = "rural basins with well-defined channels, 1.25 to 112 acres, slopes 0.03 to 0.10",
                   .source =
                       "Kirpich, Time of concentration of small agricultural watersheds, Civil Engineering 10(6), "
                       "1940; factors by Chow, Maidment and Mays, 1988, table 15.1.2"},
         .time = kirpich_time},
        {.about = {.id = "lump-california",
                   .name = "California culvert practice",
                   .formula = "T = (11.9 L^3 / H)^0.385",
                   .inputs = {path_mi, fall_ft, time_h},
                   .range = "small mountain basins",
                   .source = "California Division of Highways, California Culverts Practice, 1942",
                   .trust = Trust::seen_in_source},
         .time = california_time},
        {.about = {.id = "lump-bransby-williams",
                   .name = "Bransby-Williams",
                   .formula = "T = 21.3 L / (A^0.1 S^0.2)",
                   .inputs = {path_mi, {"A", "area", "mi2"}, path_slope_ratio, time_min},
                   .range = "rural catchments; strictly converted, the first print of 1922 has 21.2",
                   .source = "Bransby Williams, Flood discharge and the dimensions of spillways in India, The Engineer "
                             "134, 1922"},
         .time = bransby_williams_time},
        {.about = {.id = "lump-bransby-williams-equal-area",
                   .name = "Bransby-Williams with the equal-area slope",
                   .formula = "T = 58.5 L / (A^0.1 Se^0.2)",
                   .inputs = {{"L", "longest path", "km"},
                              {"A", "area", "km2"},
                              {"Se", "equal-area slope of the longest path", "m/km"},
                              time_min},
                   .range = "rural catchments",
                   .source = "Institution of Engineers Australia, Australian Rainfall and Runoff, 1987"},
         .time = bransby_williams_equal_area_time},
        {.about = {.id = "lump-giandotti",
                   .name = "Giandotti",
                   .formula = "T = (4 A^0.5 + 1.5 L) / (0.8 H^0.5)",
                   .inputs = {{"A", "area", "km2"},
                              {"L", "longest path", "km"},
                              {"H", "mean elevation above the outlet", "m"},
                              time_h},
                   .range = "170 to 70000 km2; not for small plots",
                   .source = "Giandotti, Previsione delle piene e delle magre dei corsi d'acqua, 1934"},
         .time = giandotti_time},
    };
}

std::vector<LumpMethod> overland_formulas() {
    return {
        {.about =
             {.id = "lump-kerby",
              .name = "Kerby",
              .formula = "T = 0.828 (L N)^0.467 S^-0.235",
              .inputs = {path_ft, {"N", "retardance, from a table, not interpolated", "-"}, path_slope_ratio, time_min},
              .range = "overland flow, at most 1200 ft",
              .source = "Kerby, Time of concentration for overland flow, Civil Engineering 29(3), 1959; constant by "
                        "the Texas Hydraulic Design Manual",
              .trust = Trust::seen_in_source},
         .time = kerby_time},
        {.about = {.id = "lump-faa",
                   .name = "FAA",
                   .formula = "T = 1.8 (1.1 - C) L^0.5 / S^(1/3)",
                   .inputs = {{"C", "runoff coefficient, averaged by area", "-"},
                              path_ft,
                              {"S", "fall of the longest path over its length", "%"},
                              time_min},
                   .range = "airfields and small overland areas, at most 500 ft (300 ft in towns)",
                   .source = "Federal Aviation Administration, Airport Drainage, AC 150/5320-5B, 1970",
                   .trust = Trust::seen_in_source},
         .time = faa_time},
        {.about = {.id = "lump-izzard",
                   .name = "Izzard",
                   .formula = "T = 41.025 (0.0007 i + c) L^(1/3) / (S^(1/3) i^(2/3))",
                   .inputs = {rain_in_h, {"c", "retardance, from a table", "-"}, path_ft, path_slope_ratio, time_min},
                   .range = "overland flow with i L at most 500 in/h ft",
                   .source =
                       "Izzard, Hydraulics of runoff from developed surfaces, Proc. Highway Research Board 26, 1946"},
         .time = izzard_time},
        {.about = {.id = "lump-papadakis-kazan",
                   .name = "Papadakis and Kazan",
                   .formula = "T = 0.66 L^0.5 n^0.52 S^-0.31 i^-0.38",
                   .inputs = {path_ft,
                              {"n", "Manning's n of overland flow, averaged by area", "-"},
                              path_slope_ratio,
                              rain_in_h,
                              time_min},
                   .range = "small watersheds; its limits were not seen in the source",
                   .source = "Papadakis and Kazan, Time of concentration in small rural watersheds, 1987"},
         .time = papadakis_kazan_time},
    };
}

Method kerby_kirpich_about() {
    return {.id = "lump-kerby-kirpich",
            .name = "Kerby and Kirpich",
            .formula = "T = 0.828 (Lo N)^0.467 So^-0.235 + 0.0078 (L - Lo)^0.77 S^-0.385",
            .inputs = {{"Lo", "overland part of the path", "ft"},
                       {"N", "Kerby's retardance", "-"},
                       {"So", "slope of the overland part", "ft/ft"},
                       {"L", "main channel from the divide", "ft"},
                       {"S", "fall of the main channel over its length", "ft/ft"},
                       time_min},
            .range = "0.25 to 150 square miles, main channel 1 to 50 miles, slope 0.002 to 0.02, overland 1200 ft",
            .source =
                "Roussel, Thompson, Fang, Cleveland and Garcia-Martinez, Time-parameter estimation for applicable "
                "Texas watersheds, 2005; "
                "Texas Hydraulic Design Manual",
            .trust = Trust::seen_in_source};
}

std::vector<LumpMethod> kerby_kirpich_methods() {
    LumpMethod plain{.about = kerby_kirpich_about(), .time = kerby_kirpich_time};
    LumpMethod low = plain;
    low.about.id = "lump-kerby-kirpich-low-slope";
    low.about.name = "Kerby and Kirpich, adjusted for low slopes";
    low.about.range =
        "slope of the main channel below 0.003: both slopes plus 0.0005 below 0.002, the addition fading evenly up to "
        "0.003 by our own reading";
    low.about.source =
        "Cleveland, Thompson, Fang and Li, Texas Department of Transportation 0-6382-P1, 2012; Texas Hydraulic Design "
        "Manual";
    low.about.trust = Trust::from_memory;
    low.time = kerby_kirpich_low_slope_time;
    return {plain, low};
}

std::vector<LumpMethod> county_formulas() {
    return {
        {.about = {.id = "lump-los-angeles",
                   .name = "Los Angeles County regression",
                   .formula = "T = 10^-0.507 (Cd i)^-0.519 L^0.483 S^-0.135, Cd = 0.9 IMP + (1 - IMP) Cu",
                   .inputs = {{"IMP", "impervious share of the area", "-"},
                              {"Cu", "undeveloped coefficient of the soil", "-"},
                              rain_in_h,
                              path_ft,
                              path_slope_ratio,
                              time_min},
                   .range = "subareas of about 40 acres, T 5 to 30 min",
                   .source = "Los Angeles County Department of Public Works, Hydrology Manual, 2006"},
         .time = los_angeles_time},
        {.about = {.id = "lump-county-initial",
                   .name = "Initial subarea of Californian counties",
                   .formula = "T = K (L^3 / H)^0.2",
                   .inputs = {{"K", "factor of the type of development; check the county's nomograph", "-"},
                              path_ft,
                              fall_ft,
                              time_min},
                   .range = "first subarea of at most 10 acres and 1000 ft; K differs by county by a few per cent",
                   .source = "hydrology manuals of Orange, San Bernardino and Riverside counties, California"},
         .time = county_initial_time},
    };
}

std::vector<LumpMethod> all_lump_methods() {
    std::vector<LumpMethod> all{nrcs_lag_method()};
    for (const auto& part : {channel_formulas(), overland_formulas(), kerby_kirpich_methods(), county_formulas()})
        all.insert(all.end(), part.begin(), part.end());
    return all;
}

}  // namespace

std::optional<double> CatchmentMeasures::path_slope() const {
    if (!longest_path || !fall) return std::nullopt;
    return *fall / *longest_path;
}

std::span<const LumpMethod> lump_methods() {
    static const std::vector<LumpMethod> all = all_lump_methods();
    return all;
}

const LumpMethod* find_lump_method(std::string_view id) {
    const auto all = lump_methods();
    const auto found = std::find_if(all.begin(), all.end(), [&](const LumpMethod& m) { return m.about.id == id; });
    return found == all.end() ? nullptr : &*found;
}

}  // namespace rillclock
