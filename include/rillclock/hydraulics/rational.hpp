#pragma once

#include <optional>
#include <span>
#include <string_view>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// What an acre under an inch of rain an hour gives: in exact units 1.00833 ft³/s, by hand 1.
enum class RationalConversion { exact, rounded };

/// Peak flow of the rational method, Q = C·i·A; `runoff_area` is C·A. With the rounded conversion Q[ft³/s] = C·i[in/h]·A[ac].
/// Source: Kuichling, 1889; conversion 1.008 and 1/360 in Cleveland, course text CE 3354, chapter 13 (read in its source).
[[nodiscard]] Discharge rational_peak(Area runoff_area, Intensity intensity, RationalConversion conversion);

/// A flow in m³/s.
[[nodiscard]] double in_cubic_metres_per_second(Discharge flow);
/// A flow in ft³/s.
[[nodiscard]] double in_cubic_feet_per_second(Discharge flow);

/// Factors by which a runoff coefficient for frequent storms is raised for rarer ones.
enum class FrequencyFactors {
    none,             ///< 1 for all
    wright_mclaughlin, ///< 1.0 from 2 to 10 years, 1.1, 1.2, 1.25 for 25, 50, 100. Wright-McLaughlin, 1969 (from memory)
    australian,       ///< 0.80 to 1.20 for 1 to 100 years. Australian Rainfall and Runoff, 1987, page 307 (from memory)
};

/// "none", "wright-mclaughlin", "australian 1987".
[[nodiscard]] std::string_view words(FrequencyFactors factors);

/// The factor of a return period in years, between two printed ones linear in its logarithm; outside the printed ones
/// that of the nearest.
[[nodiscard]] double frequency_factor(FrequencyFactors factors, double return_period);
/// Whether a return period lies within those that are printed.
[[nodiscard]] bool is_printed_range(FrequencyFactors factors, double return_period);

/// C from the impervious share, 0 to 1: 0.858 I³ − 0.78 I² + 0.774 I + 0.04.
/// Source: Urbonas, Guo and Tucker, 1990; WEF Manual of Practice 23 and ASCE, 1998 (values from memory).
[[nodiscard]] double urbonas_coefficient(double impervious);
/// The volumetric coefficient 0.05 + 0.9 I, taken as C. Source: Schueler, Controlling urban runoff, 1987 (values from memory).
[[nodiscard]] double schueler_coefficient(double impervious);

/// The area beyond which the rational method is not used unless a study says otherwise.
/// Source: Texas Department of Transportation, Hydraulic Design Manual; FHWA, HEC-22 (from memory).
inline constexpr Area rational_area_limit = acres(200);

}  // namespace rillclock
