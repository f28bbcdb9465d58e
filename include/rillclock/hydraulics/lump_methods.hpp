#pragma once

#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/lump_formulas.hpp"
#include "rillclock/hydraulics/methods.hpp"
#include "rillclock/hydraulics/storm_time.hpp"

namespace rillclock {

/// What was measured of a catchment, or stated for it, for the formulas that time it as one lump. What is not known is
/// left out; a method that needs it then says so.
struct CatchmentMeasures {
    std::optional<Area> area = {};
    std::optional<Length> longest_path = {};      ///< from the divide to the outlet
    std::optional<Length> fall = {};              ///< of the longest path, end to end
    std::optional<double> land_slope = {};        ///< average slope of the ground, not of the path
    std::optional<double> equal_area_slope = {};  ///< of the longest path, the areas under line and profile being equal
    std::optional<Length> mean_height = {};       ///< mean elevation less that of the outlet
    std::optional<double> curve_number = {};      ///< composite, 0 to 100
    std::optional<double> runoff_coefficient = {};  ///< composite, 0 to 1
    std::string no_curve_number = {};               ///< why it is not known, where there is more to say than that
    std::string no_runoff_coefficient = {};
    std::string no_kerby_retardance = {};
    std::string no_izzard_retardance = {};
    std::string no_impervious = {};
    std::string no_undeveloped_coefficient = {};
    std::string no_county_factor = {};
    std::optional<double> overland_n = {};       ///< Manning's n of overland flow
    std::optional<Length> overland_length = {};  ///< of the part before the channel, for Kerby and Kirpich together
    std::optional<double> overland_slope = {};
    std::optional<double> kerby_retardance = {};         ///< one of `kerby_retardances()`
    std::optional<double> izzard_retardance = {};        ///< one of `izzard_retardances()`
    std::optional<double> impervious = {};               ///< share of the area, 0 to 1
    std::optional<double> undeveloped_coefficient = {};  ///< Los Angeles County's Cu, 0 to 1
    std::optional<double> county_factor = {};            ///< K of the initial subarea
    double kirpich_adjustment = 1.0;                     ///< multiplies Kirpich's time

    /// Fall over length of the longest path; none where either is unknown.
    [[nodiscard]] std::optional<double> path_slope() const;
};

/// The time by one method, and whether it may be used.
struct LumpTime {
    std::optional<Duration> time = {};            ///< none where something needed is missing or no time came out
    std::string why_not = {};                     ///< empty where the method is applicable
    std::vector<StormIteration> iterations = {};  ///< of methods that depend on the rain

    [[nodiscard]] bool is_applicable() const { return time.has_value() && why_not.empty(); }
};

/// A method that times a catchment as one lump. The rain may be empty: methods that need it then say so.
struct LumpMethod {
    Method about;
    LumpTime (*time)(const CatchmentMeasures& catchment, const IntensityOfDuration& rain) = nullptr;
};

/// All of them, each described once. They are not among `methods()`.
[[nodiscard]] std::span<const LumpMethod> lump_methods();
/// The one of that id; null where there is none.
[[nodiscard]] const LumpMethod* find_lump_method(std::string_view id);

}  // namespace rillclock
