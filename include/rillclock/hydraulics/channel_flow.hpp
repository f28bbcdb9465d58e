#pragma once

#include <optional>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// The part of a cross-section that is under water.
struct WettedSection {
    Area flow_area;
    Length wetted_perimeter;
    Length top_width;

    /// Flow area over wetted perimeter; 0 where it is dry.
    [[nodiscard]] Length hydraulic_radius() const;
};

/// What uniform flow needs beside its section.
struct ChannelBed {
    double n = 0.0;      ///< Manning's n, above 0
    double slope = 0.0;  ///< rise over run, above 0
};

/// A channel with a level bottom and two equal sides: a rectangle where the side slope is 0, a triangle where the width
/// is 0; not both 0.
struct Trapezoid {
    Length bottom_width;      ///< 0 or more
    double side_slope = 0.0;  ///< run over rise, 0 or more
};

/// A circular pipe.
struct CircularPipe {
    Length diameter;  ///< above 0
};

/// The wetted part at a depth of 0 or more.
[[nodiscard]] WettedSection wetted(const Trapezoid& channel, Length depth);
/// The wetted part at a depth from 0 to the diameter.
[[nodiscard]] WettedSection wetted(const CircularPipe& pipe, Length depth);

/// Q = A·R^(2/3)·√S/n in metres and seconds; 0 in a dry section. Source: Manning, 1891; HEC-22, equation 3-5.
[[nodiscard]] Discharge uniform_discharge(const WettedSection& section, const ChannelBed& bed);

/// The depth at which the channel carries the flow; 0 for no flow. One answer, since the flow grows with the depth
/// without bound; found between bounds to a relative error of 1e-12. Throws an input error for a number outside the
/// ranges above and a flow below 0.
[[nodiscard]] Length normal_depth(const Trapezoid& channel, Discharge flow, const ChannelBed& bed);

/// What the pipe carries when it runs just full and under no pressure.
[[nodiscard]] Discharge full_bore_capacity(const CircularPipe& pipe, const ChannelBed& bed);
/// The velocity at that flow.
[[nodiscard]] Speed full_bore_velocity(const CircularPipe& pipe, const ChannelBed& bed);

/// The depth at which the pipe carries the flow, 0 for no flow; none for a flow above its full-bore capacity, which it
/// carries only under pressure or (up to 1.08 of it) nearly full. At the capacity the depth is 0.82 of the diameter,
/// not the diameter itself: of two depths that carry a flow the lesser is given. Error and faults as above.
[[nodiscard]] std::optional<Length> normal_depth(const CircularPipe& pipe, Discharge flow, const ChannelBed& bed);

/// √(V²·T/(g·A)): above 1 the flow is supercritical. Infinite or no number in a dry section.
[[nodiscard]] double froude_number(const WettedSection& section, Speed velocity);

}  // namespace rillclock
