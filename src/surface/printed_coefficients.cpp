#include "rillclock/surface/printed_coefficients.hpp"

#include "rillclock/surface/runoff_coefficients.hpp"

namespace rillclock {
namespace {

CoefficientRow row(std::string_view name, double c) { return {name, {{c, c}}}; }
CoefficientRow row(std::string_view name, double least, double greatest) { return {name, {{least, greatest}}}; }
CoefficientRow sloped(std::string_view name, double flat, double rolling) { return {name, {{flat, flat}, {rolling, rolling}}}; }
CoefficientRow sloped(std::string_view name, double flat, double rolling, double steep) {
    return {name, {{flat, flat}, {rolling, rolling}, {steep, steep}}};
}

CoefficientTable urban() {
    return {.of = "urban land and surfaces",
            .source = "ASCE and WEF, Manual of Practice 37, and FHWA, HEC-22, table 3-1; as in a summary of Schwab and others",
            .trust = Trust::seen_in_source,
            .remark = "lawns by slope to 2 %, to 7 % and steeper",
            .slope_ends = {SlopeBand::to_2, SlopeBand::to_7},
            .rows = {row("asce business downtown", 0.70, 0.95), row("asce business neighbourhood", 0.50, 0.70),
                     row("asce single-family", 0.30, 0.50), row("asce multi-units detached", 0.40, 0.60),
                     row("asce multi-units attached", 0.60, 0.75), row("asce suburban", 0.25, 0.40), row("asce apartments", 0.50, 0.70),
                     row("asce light industry", 0.50, 0.80), row("asce heavy industry", 0.60, 0.90),
                     row("asce parks and cemeteries", 0.10, 0.25), row("asce playgrounds", 0.20, 0.35),
                     row("asce railroad yards", 0.20, 0.40), row("asce unimproved", 0.10, 0.30), row("asce asphalt street", 0.70, 0.95),
                     row("asce concrete street", 0.80, 0.95), row("asce brick street", 0.70, 0.85),
                     row("asce drives and walks", 0.75, 0.85), row("asce roofs", 0.75, 0.95),
                     {"asce lawn on sandy soil", {{0.05, 0.10}, {0.10, 0.15}, {0.15, 0.20}}},
                     {"asce lawn on heavy soil", {{0.13, 0.17}, {0.18, 0.22}, {0.25, 0.35}}}}};
}

CoefficientTable rural() {
    return {.of = "rural land by soil texture and slope",
            .source = "Schwab and others, Soil and Water Conservation Engineering",
            .trust = Trust::seen_in_source,
            .remark = "slopes to 5 %, to 10 % and to 30 %; steeper land takes the last, with a notice",
            .slope_ends = {SlopeBand::to_5, SlopeBand::to_10},
            .printed_to = SlopeBand::to_30,
            .rows = {sloped("schwab woodland on open sandy loam", 0.10, 0.25, 0.30),
                     sloped("schwab woodland on clay and silt loam", 0.30, 0.35, 0.50),
                     sloped("schwab woodland on tight clay", 0.40, 0.50, 0.60),
                     sloped("schwab pasture on open sandy loam", 0.10, 0.16, 0.22),
                     sloped("schwab pasture on clay and silt loam", 0.30, 0.36, 0.42),
                     sloped("schwab pasture on tight clay", 0.40, 0.55, 0.60),
                     sloped("schwab cultivated on open sandy loam", 0.30, 0.40, 0.52),
                     sloped("schwab cultivated on clay and silt loam", 0.50, 0.60, 0.72),
                     sloped("schwab cultivated on tight clay", 0.60, 0.70, 0.82)}};
}

CoefficientTable indiana() {
    return {.of = "surfaces and lawns in Indiana",
            .source = "HERPICC, Purdue University, 1994, in the code of Marshall County, Indiana, section 153.06",
            .trust = Trust::seen_in_source,
            .remark = "for storms of 5 to 10 years; lawns by slope to 2 %, to 7 % and steeper",
            .slope_ends = {SlopeBand::to_2, SlopeBand::to_7},
            .rows = {row("herpicc asphalt", 0.82), row("herpicc concrete", 0.85), row("herpicc roof", 0.85),
                     sloped("herpicc lawn on clay", 0.16, 0.21, 0.30), sloped("herpicc lawn on sand", 0.07, 0.12, 0.17)}};
}

CoefficientTable everett() {
    return {.of = "land of a city by slope and density",
            .source = "City of Everett, Washington, table 1, 1979",
            .trust = Trust::seen_in_source,
            .remark = "slopes to 5 % and steeper; single family by dwellings a gross acre, of any slope",
            .slope_ends = {SlopeBand::to_5},
            .rows = {sloped("everett woods", 0.05, 0.10), sloped("everett sparse trees", 0.10, 0.15),
                     sloped("everett light grass to bare", 0.15, 0.20), sloped("everett pavement and roofs", 0.90, 0.90),
                     sloped("everett gravel", 0.75, 0.80), sloped("everett business", 0.85, 0.90),
                     sloped("everett apartments", 0.80, 0.85), sloped("everett lawns or pasture", 0.20, 0.25),
                     sloped("everett parks", 0.15, 0.20), row("everett single family 1 to 1.5", 0.30),
                     row("everett single family 1.5 to 3", 0.35), row("everett single family 3 to 3.5", 0.40),
                     row("everett single family 3.5 to 4", 0.45), row("everett single family 4 to 6", 0.50),
                     row("everett single family 6 to 9", 0.60), row("everett single family 9 to 15", 0.70)}};
}

CoefficientTable new_york() {
    return {.of = "surfaces of city lots",
            .source = "New York City Plumbing Code, section 1114.3.1",
            .trust = Trust::seen_in_source,
            .remark = "there with an intensity of 5.95 in/h",
            .rows = {row("new york roof or concrete", 0.95), row("new york asphalt", 0.85), row("new york porous pavement", 0.70),
                     row("new york gravel lot", 0.65), row("new york undeveloped", 0.30), row("new york grass", 0.20)}};
}

CoefficientTable rural_addends() {
    return {.of = "rural land as a sum",
            .source = "Texas Hydraulic Design Manual, table 4-11; Caltrans Highway Design Manual, figure 819.2A",
            .trust = Trust::from_memory,
            .remark = "C is the sum of one row each of relief, soil, cover and storage; write the sum in the column c",
            .rows = {row("relief extreme, above 30 %", 0.28, 0.35), row("relief high, 10 to 30 %", 0.20, 0.28),
                     row("relief normal, 5 to 10 %", 0.14, 0.20), row("relief low, to 5 %", 0.08, 0.14),
                     row("soil infiltration extreme", 0.12, 0.16), row("soil infiltration high", 0.08, 0.12),
                     row("soil infiltration normal", 0.06, 0.08), row("soil infiltration low", 0.04, 0.06),
                     row("vegetal cover extreme", 0.12, 0.16), row("vegetal cover high", 0.08, 0.12),
                     row("vegetal cover normal", 0.06, 0.08), row("vegetal cover low", 0.04, 0.06),
                     row("surface storage extreme", 0.10, 0.12), row("surface storage high", 0.08, 0.10),
                     row("surface storage normal", 0.06, 0.08), row("surface storage low", 0.04, 0.06)},
            .is_of_addends = true};
}

std::vector<std::string_view> all_names() {
    std::vector<std::string_view> names;
    for (const LandUse& use : land_uses()) names.push_back(use.name);
    for (const CoefficientTable& table : coefficient_tables()) {
        if (table.is_of_addends) continue;
        for (const CoefficientRow& printed : table.rows) names.push_back(printed.name);
    }
    return names;
}

}  // namespace

PrintedRange CoefficientRow::all() const {
    PrintedRange joined = by_slope.front();
    for (const PrintedRange& range : by_slope)
        joined = {std::min(joined.least, range.least), std::max(joined.greatest, range.greatest)};
    return joined;
}

std::span<const CoefficientTable> coefficient_tables() {
    static const std::vector<CoefficientTable> all{urban(), rural(), indiana(), everett(), new_york(), rural_addends()};
    return all;
}

std::optional<FoundRow> find_printed_row(std::string_view name) {
    for (const CoefficientTable& table : coefficient_tables()) {
        if (table.is_of_addends) continue;
        const auto found = std::find_if(table.rows.begin(), table.rows.end(), [&](const CoefficientRow& r) { return r.name == name; });
        if (found != table.rows.end()) return FoundRow{.table = &table, .row = &*found};
    }
    return std::nullopt;
}

std::optional<PrintedRange> printed_range(std::string_view land_use) {
    if (const LandUse* use = find_land_use(land_use)) return PrintedRange{use->least(), use->greatest()};
    if (const auto found = find_printed_row(land_use)) return found->row->all();
    return std::nullopt;
}

std::span<const std::string_view> land_use_names() {
    static const std::vector<std::string_view> names = all_names();
    return names;
}

}  // namespace rillclock
