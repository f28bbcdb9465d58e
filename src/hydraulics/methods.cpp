#include "rillclock/hydraulics/methods.hpp"

#include <algorithm>

namespace rillclock {
namespace {

std::vector<Method> sheet_methods() {
    return {
        {.id = "sheet-nrcs",
         .name = "Sheet flow, NRCS simplified kinematic",
         .formula = "T = 0.007 (n L)^0.8 / (P2^0.5 S^0.4), that is c u^0.8 / P2^0.5 with u = n L / sqrt(S)",
         .inputs = {{"n", "roughness for sheet flow", "-"},
                    {"L", "length", "ft"},
                    {"P2", "2-year 24-hour rainfall depth", "in"},
                    {"S", "slope", "ft/ft"},
                    {"T", "time", "h"}},
         .range =
             "shallow uniform flow over planes, at most 100 ft (300 ft before 2010); P2 whatever the return period",
         .source = "USDA SCS, Urban Hydrology for Small Watersheds, TR-55, 2nd ed., 1986, equation 3-3; NEH Part 630 "
                   "chapter 15, 2010, equation 15-8",
         .trust = Trust::seen_in_source},
        {.id = "sheet-kinematic",
         .name = "Sheet flow, kinematic wave with intensity",
         .formula = "T = K (n / sqrt(S))^0.6 (x1^0.6 - x0^0.6) / i^0.4, that is K (n L / sqrt(S))^0.6 / i^0.4 from the divide; "
                    "K = 0.933 or 0.94; C i in place of i where the study says so",
         .inputs = {{"n", "roughness for sheet flow", "-"},
                    {"L", "length", "ft"},
                    {"x0", "distance from the divide where the stretch begins", "ft"},
                    {"x1", "distance from the divide where it ends", "ft"},
                    {"C", "runoff coefficient of the stretch's cover, with sheet_rain = \"runoff\"", "-"},
                    {"S", "slope", "ft/ft"},
                    {"i", "intensity of a storm that lasts as long as the whole path or its sheet part, by iteration",
                     "in/h"},
                    {"K", "printed constant, chosen by sheet_constant", "-"},
                    {"T", "time", "min"}},
         .range = "turbulent flow over planes under steady rain, n L / sqrt(S) at most 100 ft; below a change of n or S the "
                  "characteristic of the planes one after the other",
         .source = "FHWA, HEC-22, 3rd ed., 2009, equation 3-3 (0.933); Morgali and Linsley, 1965, and Aron and "
                   "Erborge, 1973 (0.94); C i by Chin, Water-Resources Engineering",
         .trust = Trust::from_memory},
        {.id = "sheet-limit",
         .name = "End of sheet flow, McCuen and Spiess",
         .formula = "L = 100 sqrt(S) / n, that is u = 100 ft",
         .inputs = {{"S", "slope", "ft/ft"}, {"n", "roughness for sheet flow", "-"}, {"L", "greatest length", "ft"}},
         .range = "an upper limit from 59 watersheds; together with a stated length, whichever comes first",
         .source =
             "McCuen and Spiess, Assessment of kinematic wave time of concentration, J. Hydraul. Eng. 121(3), 1995; "
             "NEH Part 630 chapter 15, 2010, equation 15-9",
         .trust = Trust::seen_in_source},
    };
}

std::vector<Method> shallow_methods() {
    return {
        {.id = "shallow-by-cover",
         .name = "Shallow concentrated flow by land cover",
         .formula =
             "V = k sqrt(S), k = 20.328, 16.135, 9.965, 8.762, 6.962, 5.032 or 2.516 ft/s for seven types of ground",
         .inputs = {{"k", "velocity at slope 1, of the type of ground", "ft/s"},
                    {"S", "slope", "ft/ft"},
                    {"V", "velocity", "ft/s"}},
         .range = "depths of 0.2 to 0.4 ft; which land cover counts as which type is our own match",
         .source = "USDA NRCS, National Engineering Handbook, Part 630 chapter 15, 2010, table 15-3",
         .trust = Trust::from_memory},
        {.id = "shallow-conveyance",
         .name = "Shallow concentrated flow by conveyance",
         .formula = "V = K sqrt(S), K = (1.49 / n) R^(2/3)",
         .inputs = {{"n", "Manning's n of the shallow flow, from the cover book", "-"},
                    {"R", "hydraulic radius, the depth where the flow is wide, from the cover book", "ft"},
                    {"S", "slope", "ft/ft"},
                    {"V", "velocity", "ft/s"}},
         .range = "cover classes whose book gives shallow_n and a radius in place of a type",
         .source = "USDA SCS, Urban Hydrology for Small Watersheds, TR-55, 2nd ed., 1986, appendix F",
         .trust = Trust::from_memory},
        {.id = "shallow-chart",
         .name = "Shallow concentrated flow by a chart",
         .formula = "V = k S^b between two points of the chart, straight on log-log paper",
         .inputs = {{"k", "velocity at slope 1 of the line through the two points", "ft/s"},
                    {"b", "power of the slope of that line", "-"},
                    {"S", "slope", "ft/ft"},
                    {"V", "velocity", "ft/s"}},
         .range = "any chart of velocity by slope and surface, as points in a file; beyond its ends the last line goes on",
         .source = "the study's own velocity_chart",
         .trust = Trust::own_rule},
        {.id = "shallow-paved-unpaved",
         .name = "Shallow concentrated flow, paved and unpaved",
         .formula = "V = 20.3282 sqrt(S) paved, 16.1345 sqrt(S) unpaved",
         .inputs = {{"S", "slope", "ft/ft"}, {"V", "velocity", "ft/s"}},
         .range = "depths of 0.2 ft paved and 0.4 ft unpaved",
         .source = "USDA SCS, Urban Hydrology for Small Watersheds, TR-55, 2nd ed., 1986, figure 3-1 and appendix F",
         .trust = Trust::from_memory},
    };
}

std::vector<Method> channel_methods() {
    return {
        {.id = "channel-manning",
         .name = "Open channel, Manning",
         .formula = "V = R^(2/3) sqrt(S) / n",
         .inputs = {{"n", "Manning's n of the channel", "-"},
                    {"R", "hydraulic radius, stated or from the channel's size", "m"},
                    {"S", "slope", "m/m"},
                    {"V", "velocity", "m/s"}},
         .range = "uniform turbulent flow, here bankfull; n of natural streams 0.03 to 0.15",
         .source = "Manning, On the flow of water in open channels and pipes, 1891; FHWA HEC-22, 3rd ed., 2009, "
                   "equation 3-5",
         .trust = Trust::from_memory},
        {.id = "channel-section",
         .name = "Mapped channel with a section",
         .formula = "R = (B + z D) D / (B + 2 D sqrt(1 + z^2)), with Manning's formula",
         .inputs = {{"B", "bottom width, field width_m or width_ft", "m"},
                    {"z", "run over rise of the sides, field side_slope", "-"},
                    {"D", "depth of the flow, field depth_m or depth_ft", "m"},
                    {"n", "Manning's n, field n, else that of the study", "-"},
                    {"R", "hydraulic radius", "m"}},
         .range = "lines of terrain.channels that carry these fields; the depth is stated, such as bankfull, and not computed",
         .source = "Manning, 1891; geometry of a trapezoid",
         .trust = Trust::from_memory},
        {.id = "gutter",
         .name = "Mapped gutter of triangular section",
         .formula = "V = (0.752 / n) sqrt(SL) Sx^(2/3) T^(2/3), that is Manning's formula with R = 0.752^1.5 Sx T",
         .inputs = {{"Sx", "cross-fall of the street, field cross_fall", "m/m"},
                    {"T", "spread, width of the water from the curb, field spread_m or spread_ft", "m"},
                    {"n", "Manning's n, field n, else that of the study", "-"},
                    {"SL", "slope along the gutter", "m/m"},
                    {"V", "velocity", "m/s"}},
         .range = "lines of terrain.channels that carry these fields; in feet the constant is 1.11",
         .source = "FHWA, HEC-22, 3rd ed., 2009, section 4.3, velocity in a triangular section",
         .trust = Trust::from_memory},
        {.id = "channel-size-by-area",
         .name = "Channel size by contributing area",
         .formula = "W = a A^b, D = c A^d, R = W D / (W + 2 D); United States W = 2.70 A^0.352, D = 0.30 A^0.213",
         .inputs = {{"A", "contributing area", "km2"},
                    {"W", "top width", "m"},
                    {"D", "mean depth", "m"},
                    {"R", "hydraulic radius", "m"}},
         .range =
             "natural perennial streams at bankfull in the United States, from 0.5 km2 on; not drains, gutters or swales; area "
             "alone is a weak guide",
         .source = "Bieger, Rathjens, Allen and Arnold, Development and evaluation of bankfull hydraulic geometry "
                   "relationships, J. Am. Water Resour. Assoc. 51(3), 2015; North Carolina Piedmont: Harman et al., 1999; the "
                   "rectangle of W and D is our reading",
         .trust = Trust::from_memory},
        {.id = "channel-design-storm",
         .name = "Channel flow by the design storm",
         .formula = "Q = C i A, with i for a storm as long as the arrival; D normal for Q; V = Q / (B D + z D^2)",
         .inputs = {{"C", "runoff coefficient, averaged by area above the cell", "-"},
                    {"i", "intensity of a storm that lasts as long as the last water takes to arrive", "m/s"},
                    {"A", "contributing area", "m2"},
                    {"B", "bottom width, by contributing area or of the mapped line", "m"},
                    {"z", "run over rise of the sides", "-"},
                    {"D", "normal depth by Manning's formula", "m"},
                    {"V", "velocity, to the next cell", "m/s"}},
         .range = "with flow = \"design storm\": one pass down the channels for each return period; uniform flow, no backwater, no storage",
         .source = "rational method with Manning's formula, cell by cell; rillclock",
         .trust = Trust::own_rule},
        {.id = "open-water",
         .name = "Open water, wave celerity",
         .formula = "V = sqrt(g D)",
         .inputs = {{"D", "mean depth, from the cover book", "m"},
                    {"g", "9.80665 m/s2", "m/s2"},
                    {"V", "velocity", "m/s"}},
         .range = "lakes and ponds whose surface is level; storage is not modelled",
         .source = "USDA NRCS, National Engineering Handbook, Part 630 chapter 15, 2010, equation 15-11",
         .trust = Trust::from_memory},
    };
}

std::vector<Method> own_rules() {
    return {
        {.id = "ponded",
         .name = "Ponded cells",
         .formula = "V = the greater of the cell's own velocity and min(sqrt(g h), pond_speed)",
         .inputs = {{"h", "spill elevation above the ground, more than pond_depth", "m"},
                    {"pond_speed", "cap", "m/s"},
                    {"V", "velocity", "m/s"}},
         .range =
             "depressions, real or artefacts, taken as full; storage is not modelled; the ponded share of a path is "
             "reported",
         .source = "rillclock; celerity as for open water",
         .trust = Trust::own_rule},
        {.id = "slope-ahead",
         .name = "Slope ahead",
         .formula = "S = fall of the spill elevation over the next slope_window, if at least vertical_step; else "
                    "vertical_step "
                    "over the distance in which the path falls by it; never under slope_floor",
         .inputs = {{"slope_window", "length of path looked at", "m"},
                    {"vertical_step", "least fall the elevations can be trusted with", "m"},
                    {"slope_floor", "least slope, overland and in channels", "m/m"},
                    {"S", "slope", "m/m"}},
         .range =
             "any terrain; how much of a path runs on the floor is reported. Floor 0.001 overland after KC et al., "
             "J. Hydrol. Eng., 2014",
         .source = "rillclock",
         .trust = Trust::own_rule},
    };
}

std::vector<Method> peak_methods() {
    return {
        {.id = "peak-rational",
         .name = "Peak flow, rational method",
         .formula = "Q = Cf C i A, the smaller of 1 and Cf C of each class averaged by area",
         .inputs = {{"Q", "peak flow", "ft3/s"},
                    {"Cf", "frequency factor, where C does not depend on the return period", "-"},
                    {"C", "runoff coefficient of a class of land", "-"},
                    {"i", "intensity of rain as long as the time of concentration or the least time", "in/h"},
                    {"A", "area", "ac"}},
         .range = "up to 200 ac unless the study states another limit; factors of Wright-McLaughlin, 1969: 1 to 10 years, "
                  "1.1, 1.2, 1.25 for 25, 50, 100, or of Australian Rainfall and Runoff, 1987",
         .source = "Kuichling, 1889; conversion and assumptions by Cleveland, course text CE 3354, chapter 13; factors from memory",
         .trust = Trust::seen_in_source},
        {.id = "peak-partial-area",
         .name = "Peak flow of a partial area",
         .formula = "Q = the greatest over d of i(d) times the most CA that arrives within any stretch of length d, d from the least "
                    "time to the time of concentration",
         .inputs = {{"Q", "peak flow", "ft3/s"},
                    {"i", "intensity of rain of duration d", "in/h"},
                    {"CA", "runoff coefficient times area, by time of arrival", "ac"},
                    {"d", "duration of rain", "min"}},
         .range = "as for the rational method; never below the whole area's; beside it the two cases of HEC-22, section 7.2",
         .source = "rillclock; theory by Campos et al., Water 12(10), 2730, 2020",
         .trust = Trust::own_rule},
        {.id = "runoff-land-use",
         .name = "Runoff coefficient by land use",
         .formula = "C by land use, soil group A to D, slope of the land and return period below or from 25 years",
         .inputs = {{"C", "runoff coefficient", "-"}},
         .range = "14 land uses, named in the column land_use of a cover book; slopes to 2 %, to 6 % and steeper",
         .source = "Rawls, Wong and McCuen, 1981, as in McCuen, Hydrologic Analysis and Design, table 7-9",
         .trust = Trust::from_memory},
        {.id = "runoff-printed-table",
         .name = "Runoff coefficient by a printed table",
         .formula = "C of the row, by slope of the land where that is printed; of a range (C1 + C2) / 2",
         .inputs = {{"C", "runoff coefficient", "-"}},
         .range = "rows named in the column land_use of a cover book, listed below with their sources; frequency factors act on them; a c of the "
                  "book's own counts first, and a notice tells where it lies outside the printed range",
         .source = "ASCE and WEF; Schwab and others; HERPICC, 1994; Everett, 1979; New York City",
         .trust = Trust::seen_in_source},
        {.id = "runoff-imperviousness",
         .name = "Runoff coefficient from imperviousness",
         .formula = "C = 0.858 I^3 - 0.78 I^2 + 0.774 I + 0.04, or C = 0.05 + 0.9 I",
         .inputs = {{"C", "runoff coefficient", "-"}, {"I", "impervious share of the ground, 0 to 1", "-"}},
         .range = "storms up to about 10 years; the second is a coefficient of volume",
         .source = "Urbonas, Guo and Tucker, 1990, in WEF Manual of Practice 23, 1998; Schueler, Controlling urban runoff, 1987",
         .trust = Trust::from_memory},
    };
}

std::vector<Method> all_methods() {
    std::vector<Method> all;
    for (const auto& part : {sheet_methods(), shallow_methods(), channel_methods(), own_rules(), peak_methods()})
        all.insert(all.end(), part.begin(), part.end());
    return all;
}

}  // namespace

std::string_view words(Trust trust) {
    switch (trust) {
        case Trust::seen_in_source:
            return "read in its source";
        case Trust::from_memory:
            return "value from memory";
        case Trust::own_rule:
            return "rule of this program";
    }
    return "";
}

std::span<const Method> methods() {
    static const std::vector<Method> all = all_methods();
    return all;
}

const Method* find_method(std::string_view id) {
    const auto all = methods();
    const auto found = std::find_if(all.begin(), all.end(), [&](const Method& m) { return m.id == id; });
    return found == all.end() ? nullptr : &*found;
}

}  // namespace rillclock
