#pragma once

#include <span>
#include <string_view>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// A type of ground for shallow concentrated flow: V = k·√S.
///
/// Source: USDA NRCS, National Engineering Handbook, Part 630, chapter 15, 2010, table 15-3 (value from memory; each k
/// is 1.486 · depth^(2/3) / n to its last printed digit).
struct ShallowType {
    std::string_view name;          ///< short name, as cover books write it: "short-grass pasture"
    std::string_view printed_name;  ///< what the table calls it
    double depth_ft = 0.0;          ///< assumed depth of flow
    double n = 0.0;                 ///< Manning's n
    double k_ft_per_s = 0.0;        ///< velocity at slope 1, as printed

    [[nodiscard]] constexpr Speed k() const { return feet_per_second(k_ft_per_s); }
};

/// The seven types, from the fastest to the slowest.
[[nodiscard]] std::span<const ShallowType> shallow_types();
/// The type of that short name; null where there is none.
[[nodiscard]] const ShallowType* find_shallow_type(std::string_view name);

/// Velocity at slope 1 where only paved and unpaved are told apart.
/// Source: TR-55, 1986, appendix F (value from memory).
inline constexpr Speed tr55_paved_k = feet_per_second(20.3282);
inline constexpr Speed tr55_unpaved_k = feet_per_second(16.1345);

/// The conveyance form of k: (factor/n)·R^(2/3) in feet and seconds, with one of Manning's printed factors; R is the
/// depth of the flow where it is wide. Source: TR-55, 1986, appendix F; NEH 630, table 15-3 (with the factor 1.486).
[[nodiscard]] Speed shallow_conveyance(double n, Length hydraulic_radius, double printed_factor);

/// k·√S, for a slope (rise over run) of 0 or more; NaN below.
[[nodiscard]] Speed shallow_velocity(Speed k, double slope);

}  // namespace rillclock
