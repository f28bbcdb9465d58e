// A path by hand with the published formulas, which are pure functions of quantities: example 3-1 of TR-55 (USDA SCS, Urban Hydrology for
// Small Watersheds, 2nd ed., 1986; values from memory), whose printed answers are 0.30, 0.24 and 0.99 h, together 1.53 h.
#include <cstdio>

#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

using namespace rillclock;

int main() {
    const Duration sheet = nrcs_sheet_time({.n = 0.24, .length = feet(100), .slope = 0.01}, inches(3.6));
    const Duration shallow = feet(1400) / shallow_velocity(tr55_unpaved_k, 0.01);
    const Length radius = hydraulic_radius(square_feet(27), feet(28.2));
    const Duration channel = manning_time(feet(7300), {.n = 0.05, .hydraulic_radius = radius, .slope = 0.005});
    // Lengths over speeds are durations; feet + minutes would not compile.
    std::printf("sheet %.2f h, shallow %.2f h, channel %.2f h, together %.2f h\n", in_hours(sheet), in_hours(shallow), in_hours(channel),
                in_hours(sheet + shallow + channel));
    return 0;
}
