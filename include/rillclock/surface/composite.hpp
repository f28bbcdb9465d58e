#pragma once

#include <optional>
#include <span>
#include <string>

#include "rillclock/surface/land.hpp"

namespace rillclock {

/// A number of the cover book averaged by area over the land of a catchment, Σ x·A / Σ A; or why there is none.
struct Composite {
    std::optional<double> value = {};
    std::string lacking = {};  ///< "the cover book has no cn_d for Grass"; empty where there is a value
};

/// Curve number of a catchment from cover and soil group. None where any of its land has no soil group or a class has
/// no curve number for the group.
[[nodiscard]] Composite composite_curve_number(std::span<const LandShare> land, const CoverBook& book);

/// Runoff coefficient of a catchment: of each class that of the cell's soil group where the book has one, else that of
/// any soil.
[[nodiscard]] Composite composite_runoff_coefficient(std::span<const LandShare> land, const CoverBook& book);

/// Impervious share of a catchment.
[[nodiscard]] Composite composite_impervious(std::span<const LandShare> land, const CoverBook& book);

/// The value that covers most of the catchment's area, open water left out: for coefficients that stand for a kind of
/// surface and are not to be averaged. None where a class has none, or there is only water; of equal areas the class
/// that comes first in the book decides. `column` names it where it lacks.
[[nodiscard]] Composite prevailing(std::span<const LandShare> land, const CoverBook& book,
                                   std::optional<double> CoverClass::*value, const std::string& column);

/// Sheet-flow n of a catchment, open water left out.
[[nodiscard]] Composite composite_overland_n(std::span<const LandShare> land, const CoverBook& book);

}  // namespace rillclock
