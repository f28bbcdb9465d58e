#include "rillclock/hydraulics/lump_formulas.hpp"

#include <array>

#include "published_formulas.hpp"

namespace rillclock {
namespace {

KerbyKirpich kerby_kirpich_of(const Inputs& in) {
    return {.main_channel = feet(in["L_ft"]),
            .channel_slope = in["S"],
            .overland = feet(in["Lo_ft"]),
            .overland_slope = in["So"],
            .retardance = in["N"]};
}

double bransby_minutes(const Inputs& in, BransbyWilliams printed) {
    return in_minutes(bransby_williams(feet(in["L_ft"]), acres(in["A_ac"]), in["S"], printed));
}

/// The first print of the formula for one kilometre and one square kilometre.
double original_bransby_per_km(const Inputs& in) {
    return in_minutes(bransby_williams(kilometres(1), square_kilometres(1), in["S"], BransbyWilliams::original));
}

double value_of(std::span<const SurfaceCoefficient> table, const Inputs& in) {
    return table[static_cast<std::size_t>(in["row"]) - 1].value;
}

Formulas tables() {
    return {
        {"kerby_N", [](const Inputs& in) { return value_of(kerby_retardances(), in); }},
        {"izzard_c", [](const Inputs& in) { return value_of(izzard_retardances(), in); }},
        {"county_K", [](const Inputs& in) { return value_of(county_initial_factors(), in); }},
    };
}

Formulas overland_formulas() {
    return {
        {"kerby_min", [](const Inputs& in) { return in_minutes(kerby(feet(in["L_ft"]), in["N"], in["S"])); }},
        {"kerby_by_root_min",
         [](const Inputs& in) { return in_minutes(kerby_by_root(feet(in["L_ft"]), in["N"], in["S"])); }},
        {"kerby_min_per_unit_m", [](const Inputs&) { return in_minutes(kerby(metres(1), 1, 1)); }},
        {"kerby_two_thirds_min",
         [](const Inputs& in) { return in_minutes(kerby_with_two_thirds(feet(in["L_ft"]), in["N"], in["S"])); }},
        {"faa_min", [](const Inputs& in) { return in_minutes(faa(feet(in["L_ft"]), in["C"], in["S"])); }},
        {"izzard_min",
         [](const Inputs& in) {
             return in_minutes(izzard(feet(in["L_ft"]), in["S"], in["c"], inches_per_hour(in["i_in_h"])));
         }},
        {"los_angeles_min",
         [](const Inputs& in) {
             return in_minutes(los_angeles(feet(in["L_ft"]), in["S"], in["Cd"], inches_per_hour(in["i_in_h"])));
         }},
    };
}

}  // namespace

Formulas lump_formulas() {
    Formulas formulas{
        {"kirpich_min", [](const Inputs& in) { return in_minutes(kirpich(feet(in["L_ft"]), in["S"])); }},
        {"kirpich_min_per_unit_m", [](const Inputs&) { return in_minutes(kirpich(metres(1), 1)); }},
        {"kerby_kirpich_min", [](const Inputs& in) { return in_minutes(kerby_kirpich(kerby_kirpich_of(in))); }},
        {"root_of_area_min",
         [](const Inputs& in) { return in_minutes(square_root_of_area(square_miles(in["A_mi2"]))); }},
        {"bransby_us_min", [](const Inputs& in) { return bransby_minutes(in, BransbyWilliams::us); }},
        {"bransby_original_h_per_unit_mi",
         [](const Inputs& in) {
             return in_hours(bransby_williams(miles(1), square_miles(1), in["S"], BransbyWilliams::original));
         }},
        {"bransby_original_min_per_unit_km", original_bransby_per_km},
        {"nrcs_flow_length_ft", [](const Inputs& in) { return in_feet(nrcs_flow_length(acres(in["A_ac"]))); }},
    };
    formulas.merge(tables());
    formulas.merge(overland_formulas());
    return formulas;
}

}  // namespace rillclock
