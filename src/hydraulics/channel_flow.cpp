#include "rillclock/hydraulics/channel_flow.hpp"

#include <boost/math/tools/roots.hpp>
#include <cmath>
#include <cstdint>
#include <string>
#include <utility>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/open_water.hpp"

namespace rillclock {
namespace {

/// Bits to which a depth is found; 42 is a relative error of 2e-13.
constexpr int bits = 42;
/// Far more rounds than any root here has been seen to take (under 40).
constexpr std::uintmax_t most_rounds = 400;

/// Depth of a circular section, over its diameter, at which it carries most: the root of
/// 3θ − 5θ·cos θ + 2·sin θ = 0 for the angle θ of the water seen from the axis.
constexpr double fullest_depth = 0.93818;

void require_positive(double value, const std::string& what) {
    if (!(value > 0) || !std::isfinite(value))
        throw input_error("a channel needs " + what + " above zero, not " + significant(value));
}

void require_not_negative(double value, const std::string& what) {
    if (!(value >= 0) || !std::isfinite(value))
        throw input_error("a channel needs " + what + " of zero or more, not " + significant(value));
}

void require_bed(const ChannelBed& bed) {
    require_positive(bed.n, "a Manning's n");
    require_positive(bed.slope, "a slope");
}

void require_channel(const Trapezoid& channel) {
    require_not_negative(channel.bottom_width.si(), "a bottom width in metres");
    require_not_negative(channel.side_slope, "a side slope");
    if (channel.bottom_width == metres(0) && channel.side_slope == 0)
        throw input_error("a channel needs a bottom width or a side slope above zero; both are zero");
}

/// h − sin(h)·cos(h): twice the area of a segment of the unit circle of that half angle. By its series where the
/// difference would lose digits; the first term left out is below 1e-12 of the sum there.
double segment(double h) {
    const double square = h * h;
    if (h < 0.1) return 2 * h * square / 3 * (1 - square / 5 * (1 - square * 2 / 21 * (1 - square / 18)));
    return h - std::sin(2 * h) / 2;
}

double middle(const std::pair<double, double>& bracket) {
    return bracket.first + (bracket.second - bracket.first) / 2;
}

template <class Section>
double discharge_at(const Section& section, double depth, const ChannelBed& bed) {
    return uniform_discharge(wetted(section, metres(depth)), bed).si();
}

/// A depth to begin with: that of a wide rectangle or of a triangle of the same side slope, whichever is less. Both
/// underestimate no more than a few times.
double first_depth(const Trapezoid& channel, double flow, const ChannelBed& bed) {
    const double unit_flow = flow * bed.n / std::sqrt(bed.slope);
    const double wide = std::pow(unit_flow / channel.bottom_width.si(), 0.6);
    const double triangle = std::pow(unit_flow / channel.side_slope, 0.375);
    return std::fmin(wide, triangle);
}

}  // namespace

Length WettedSection::hydraulic_radius() const {
    if (wetted_perimeter == metres(0)) return metres(0);
    return rillclock::hydraulic_radius(flow_area, wetted_perimeter);
}

WettedSection wetted(const Trapezoid& channel, Length depth) {
    const Length side_run = depth * channel.side_slope;
    return {.flow_area = (channel.bottom_width + side_run) * depth,
            .wetted_perimeter = channel.bottom_width + 2 * depth * std::hypot(1.0, channel.side_slope),
            .top_width = channel.bottom_width + 2 * side_run};
}

WettedSection wetted(const CircularPipe& pipe, Length depth) {
    // Half the angle under water, seen from the axis; by the sine of its half, which is exact for shallow depths too.
    const double half_angle = 2 * std::asin(std::sqrt(depth / pipe.diameter));
    const double diameter = pipe.diameter.si();
    return {.flow_area = square_metres(diameter * diameter / 4 * segment(half_angle)),
            .wetted_perimeter = pipe.diameter * half_angle,
            .top_width = pipe.diameter * std::sin(half_angle)};
}

Discharge uniform_discharge(const WettedSection& section, const ChannelBed& bed) {
    const Speed velocity =
        manning_velocity({.n = bed.n, .hydraulic_radius = section.hydraulic_radius(), .slope = bed.slope});
    return Discharge::from_si(section.flow_area.si() * velocity.si());
}

Length normal_depth(const Trapezoid& channel, Discharge flow, const ChannelBed& bed) {
    require_channel(channel);
    require_bed(bed);
    require_not_negative(flow.si(), "a flow in m3/s");
    if (flow.si() == 0) return metres(0);
    const auto surplus = [&](double depth) { return discharge_at(channel, depth, bed) / flow.si() - 1; };
    std::uintmax_t rounds = most_rounds;
    const auto bracket =
        boost::math::tools::bracket_and_solve_root(surplus, first_depth(channel, flow.si(), bed), 2.0, true,
                                                   boost::math::tools::eps_tolerance<double>(bits), rounds);
    return metres(middle(bracket));
}

Discharge full_bore_capacity(const CircularPipe& pipe, const ChannelBed& bed) {
    return uniform_discharge(wetted(pipe, pipe.diameter), bed);
}

Speed full_bore_velocity(const CircularPipe& pipe, const ChannelBed& bed) {
    return manning_velocity({.n = bed.n, .hydraulic_radius = pipe.diameter / 4, .slope = bed.slope});
}

std::optional<Length> normal_depth(const CircularPipe& pipe, Discharge flow, const ChannelBed& bed) {
    require_positive(pipe.diameter.si(), "a diameter in metres");
    require_bed(bed);
    require_not_negative(flow.si(), "a flow in m3/s");
    if (flow.si() == 0) return metres(0);
    if (flow > full_bore_capacity(pipe, bed)) return std::nullopt;
    const auto surplus = [&](double share) {
        return discharge_at(pipe, share * pipe.diameter.si(), bed) / flow.si() - 1;
    };
    std::uintmax_t rounds = most_rounds;
    const auto bracket = boost::math::tools::toms748_solve(surplus, 0.0, fullest_depth,
                                                           boost::math::tools::eps_tolerance<double>(bits), rounds);
    return pipe.diameter * middle(bracket);
}

double froude_number(const WettedSection& section, Speed velocity) {
    return velocity.si() * std::sqrt(section.top_width.si() / (standard_gravity * section.flow_area.si()));
}

}  // namespace rillclock
