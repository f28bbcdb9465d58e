#include "published_formulas.hpp"
#include "rillclock/hydraulics/channel_flow.hpp"
#include "rillclock/hydraulics/channel_size.hpp"
#include "rillclock/hydraulics/gutter.hpp"
#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/roughness.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

constexpr double cubic_metres_per_cubic_foot = metres_per_foot * metres_per_foot * metres_per_foot;

double tr55_k(const Inputs& in) {
    return in_feet_per_second(in["paved"] > 0 ? tr55_paved_k : tr55_unpaved_k);
}

const ShallowType& neh_type(const Inputs& in) {
    return shallow_types()[static_cast<std::size_t>(in["type"]) - 1];
}

double tr55_velocity(const Inputs& in) {
    return in_feet_per_second(shallow_velocity(feet_per_second(tr55_k(in)), in["S"]));
}

Length radius(const Inputs& in) {
    return hydraulic_radius(square_feet(in["area_ft2"]), feet(in["perimeter_ft"]));
}

double manning_us(const Inputs& in) {
    const ManningReach reach{.n = in["n"], .hydraulic_radius = radius(in), .slope = in["S"]};
    return in_feet_per_second(manning_velocity_us(reach, in["factor"]));
}

double manning_si_hours(const Inputs& in) {
    return in_hours(manning_time(feet(in["L_ft"]), {.n = in["n"], .hydraulic_radius = radius(in), .slope = in["S"]}));
}

const RoughnessEntry& roughness(const Inputs& in) {
    return roughness_tables()[static_cast<std::size_t>(in["table"]) - 1].entries.at(static_cast<std::size_t>(in["row"]) - 1);
}

double k_of_depth(const Inputs& in) {
    const ManningReach reach{.n = in["n"], .hydraulic_radius = feet(in["depth_ft"]), .slope = 1.0};
    return in_feet_per_second(manning_velocity_us(reach, in["factor"]));
}

double sheet_hours(const Inputs& in) {
    return in_hours(nrcs_sheet_time({.n = in["n"], .length = feet(in["L_ft"]), .slope = in["S"]}, inches(in["P2_in"])));
}

double sheet_hours_metric(const Inputs& in) {
    const SheetStretch stretch{.n = in["n"], .length = metres(in["L_m"]), .slope = in["S"]};
    return in_hours(nrcs_sheet_formula().at_unit_storm(sheet_index(stretch))) *
           nrcs_storm_factor(millimetres(in["P2_mm"]));
}

double three_segments_hours(const Inputs& in) {
    const SheetStretch sheet{.n = in["n"], .length = feet(in["L_sheet_ft"]), .slope = in["S"]};
    const Duration shallow = feet(in["L_shallow_ft"]) / shallow_velocity(tr55_unpaved_k, in["S"]);
    const ManningReach channel{.n = in["n_channel"], .hydraulic_radius = radius(in), .slope = in["S_channel"]};
    return in_hours(nrcs_sheet_time(sheet, inches(in["P2_in"])) + shallow + manning_time(feet(in["L_ft"]), channel));
}

double kinematic_minutes(const Inputs& in) {
    const Length u = sheet_index({.n = in["n"], .length = feet(in["L_ft"]), .slope = in["S"]});
    return in_minutes(kinematic_sheet_formula(in["constant"]).at_unit_storm(u)) *
           kinematic_storm_factor(inches_per_hour(in["i_in_h"]));
}

Gutter gutter_of(const Inputs& in) {
    return {.n = in["n"], .cross_slope = in["Sx"], .slope = in["SL"]};
}

double cubic_feet_per_second(Discharge flow) {
    return flow.si() / cubic_metres_per_cubic_foot;
}

CircularPipe pipe_of(const Inputs& in) {
    return {inches(in["D_in"])};
}

ChannelBed bed_of(const Inputs& in) {
    return {.n = in["n"], .slope = in["S_percent"] / 100};
}

/// Velocity of a part-full pipe at a flow.
double pipe_velocity_ft_s(const Inputs& in) {
    const Discharge flow = Discharge::from_si(in["Q_cfs"] * cubic_metres_per_cubic_foot);
    const Length depth = normal_depth(pipe_of(in), flow, bed_of(in)).value();
    return in_feet_per_second(metres_per_second(flow.si() / wetted(pipe_of(in), depth).flow_area.si()));
}

const ChannelSize& size_of(const Inputs& in) {
    return channel_sizes()[static_cast<std::size_t>(in["region"]) - 1];
}

Formulas channel_formulas() {
    return {
        {"gutter_spread_m",
         [](const Inputs& in) { return gutter_spread(gutter_of(in), Discharge::from_si(in["Q_m3_s"])).si(); }},
        {"gutter_spread_ft",
         [](const Inputs& in) {
             const Discharge flow = Discharge::from_si(in["Q_cfs"] * cubic_metres_per_cubic_foot);
             return in_feet(gutter_spread(gutter_of(in), flow));
         }},
        {"gutter_m3_s", [](const Inputs& in) { return gutter_discharge(gutter_of(in), metres(in["T_m"])).si(); }},
        {"gutter_cfs",
         [](const Inputs& in) { return cubic_feet_per_second(gutter_discharge(gutter_of(in), feet(in["T_ft"]))); }},
        {"average_spread_ratio",
         [](const Inputs& in) { return average_gutter_spread(metres(in["ratio"]), metres(1)).si(); }},
        {"pipe_full_cfs",
         [](const Inputs& in) { return cubic_feet_per_second(full_bore_capacity(pipe_of(in), bed_of(in))); }},
        {"pipe_full_ft_s",
         [](const Inputs& in) { return in_feet_per_second(full_bore_velocity(pipe_of(in), bed_of(in))); }},
        {"pipe_ft_s", pipe_velocity_ft_s},
        {"channel_width_m", [](const Inputs& in) { return size_of(in).width(square_kilometres(1)).si(); }},
        {"channel_width_power", [](const Inputs& in) { return size_of(in).width.exponent; }},
        {"channel_depth_m", [](const Inputs& in) { return size_of(in).depth(square_kilometres(1)).si(); }},
        {"channel_depth_power", [](const Inputs& in) { return size_of(in).depth.exponent; }},
    };
}

}  // namespace

Formulas flow_formulas() {
    Formulas formulas{
        {"mccuen_spiess_length_ft", [](const Inputs& in) { return in_feet(mccuen_spiess_length(in["n"], in["S"])); }},
        {"nrcs_sheet_h", sheet_hours},
        {"nrcs_sheet_h_per_unit_mm", sheet_hours_metric},
        {"neh_k_ft_s", [](const Inputs& in) { return neh_type(in).k_ft_per_s; }},
        {"neh_velocity_ft_s",
         [](const Inputs& in) { return in_feet_per_second(shallow_velocity(neh_type(in).k(), in["S"])); }},
        {"k_ft_s_of_depth", k_of_depth},
        {"tr55_k_ft_s", tr55_k},
        {"tr55_velocity_ft_s", tr55_velocity},
        {"tr55_shallow_h", [](const Inputs& in) { return in["L_ft"] / tr55_velocity(in) / 3600; }},
        {"hydraulic_radius_ft", [](const Inputs& in) { return in_feet(radius(in)); }},
        {"manning_ft_s", manning_us},
        {"manning_h", [](const Inputs& in) { return in["L_ft"] / manning_us(in) / 3600; }},
        {"manning_si_h", manning_si_hours},
        {"three_segments_h", three_segments_hours},
        {"kinematic_min", kinematic_minutes},
        {"roughness_least", [](const Inputs& in) { return roughness(in).least; }},
        {"roughness_typical", [](const Inputs& in) { return roughness(in).typical; }},
        {"roughness_greatest", [](const Inputs& in) { return roughness(in).greatest; }},
    };
    formulas.merge(channel_formulas());
    return formulas;
}

}  // namespace rillclock
