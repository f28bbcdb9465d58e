#pragma once

#include <array>
#include <optional>
#include <span>
#include <string>
#include <string_view>

#include "rillclock/surface/land.hpp"

namespace rillclock {

/// Runoff coefficients of one land use as printed by soil group and slope of the land, for storms more frequent than 25
/// years and for rarer ones.
/// Source: Rawls, Wong and McCuen, 1981, as in McCuen, Hydrologic Analysis and Design, table 7-9 (values from memory).
struct LandUse {
    std::string_view name;
    std::array<std::array<std::array<double, 3>, 4>, 2> printed;  ///< by frequent or rare, soil group A to D, slope to 2 %, to 6 % and steeper

    /// The printed coefficient: below 25 years or from there on, by the return period in years.
    [[nodiscard]] double coefficient(SoilGroup group, SlopeBand slope, double return_period) const;
    [[nodiscard]] double least() const;
    [[nodiscard]] double greatest() const;
};

/// The land uses of that table, in its order; those of other tables are in printed_coefficients.hpp.
[[nodiscard]] std::span<const LandUse> land_uses();
/// Null where none has that name.
[[nodiscard]] const LandUse* find_land_use(std::string_view name);

/// Where runoff coefficients come from.
enum class CoefficientSource {
    book,      ///< of the cover book: its own c, else what is printed for its land use
    urbonas,   ///< of the imperviousness of its classes
    schueler,
};

/// "book", "imperviousness", "imperviousness, schueler".
[[nodiscard]] std::string_view words(CoefficientSource source);

/// The runoff coefficient of land of one kind; or why there is none.
struct KindCoefficient {
    std::optional<double> value = {};
    bool varies_with_period = false;  ///< printed by return period: no frequency factor acts on it
    std::string lacking = {};
    bool by_soil = false;             ///< another on another soil group
    bool by_slope = false;            ///< another on land of another slope
};

/// The coefficient of open water where it follows from imperviousness: rain on it runs off whole. Common practice, no source: the formulas of
/// imperviousness are for ground, on which wet pavement keeps some of the rain.
inline constexpr double open_water_coefficient = 1.0;

/// The coefficient of a kind of land under a return period in years, before any frequency factor, or what the book lacks for it. From
/// imperviousness open water has `open_water_coefficient`, unless the book states a share below 100 % for it.
[[nodiscard]] KindCoefficient kind_coefficient(const CoverBook& book, const LandKind& kind, CoefficientSource source,
                                               double return_period);

/// Whether some class of the book can have a coefficient at all.
[[nodiscard]] bool has_coefficients(const CoverBook& book, CoefficientSource source);

/// Whether some class takes its coefficient from the slope of the land.
[[nodiscard]] bool uses_slope(const CoverBook& book, CoefficientSource source);

}  // namespace rillclock
