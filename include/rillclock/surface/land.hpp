#pragma once

#include <array>
#include <compare>
#include <cstddef>
#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/surface/cover_book.hpp"

namespace rillclock {

/// The hydrologic soil group of a cell, or that none is known.
enum class CellSoil : std::uint8_t { unknown, a, b, c, d };

inline constexpr std::size_t cell_soils = 5;   ///< how many there are

/// A known group as a cell keeps it.
[[nodiscard]] CellSoil cell_soil(SoilGroup group);
/// None where the soil is not known.
[[nodiscard]] std::optional<SoilGroup> group_of(CellSoil soil);
/// "A" to "D"; empty where the soil is not known.
[[nodiscard]] std::string letter_of(CellSoil soil);

/// Slope of the land in bands, each up to its end in %, from the last on steeper: wherever a table of runoff coefficients that a book may
/// name (runoff_coefficients.hpp, printed_coefficients.hpp) goes over from one slope class to the next.
enum class SlopeBand : std::uint8_t { to_2, to_5, to_6, to_7, to_10, to_30, steeper };

inline constexpr std::size_t slope_bands = 7;   ///< how many there are
inline constexpr std::array<double, slope_bands - 1> slope_band_ends{0.02, 0.05, 0.06, 0.07, 0.10, 0.30};   ///< rise over run, of all but the last

/// `slope`: rise over run, of the land and not of a path.
[[nodiscard]] constexpr SlopeBand slope_band(double slope) {
    std::uint8_t passed = 0;
    for (const double end : slope_band_ends) passed = static_cast<std::uint8_t>(passed + (slope <= end ? 0 : 1));   // no branch that rough ground misleads
    return static_cast<SlopeBand>(passed);
}
/// "to 2 %", "2 to 5 %" and so on, "above 30 %".
[[nodiscard]] std::string words(SlopeBand band);

/// What kind of land a cell is.
struct LandKind {
    std::uint8_t cover = 0;  ///< position of the class in the cover book
    CellSoil soil = CellSoil::unknown;
    SlopeBand slope = SlopeBand::to_2;

    auto operator<=>(const LandKind&) const = default;
};

/// How much land is of one kind.
struct LandShare {
    LandKind kind;
    std::int64_t cells = 0;
    FixedArea area = 0;
};

/// Counts the cells and the area of every kind of land. Sums are integers: the order of adding does not matter. Memory:
/// 112 bytes for each class of the book up to the last one met, and that for each soil group met.
class LandTally {
public:
    /// Adds a cell of a kind.
    void add(const LandKind& kind, FixedArea area) {
        std::vector<Count>& counts = counts_[static_cast<std::size_t>(kind.soil)];
        const std::size_t place = kind.cover * slope_bands + static_cast<std::size_t>(kind.slope);
        if (place >= counts.size()) counts.resize((kind.cover + 1U) * slope_bands);
        ++counts[place].cells;
        counts[place].area += area;
    }
    /// Adds all that another has.
    void add(const LandTally& other);
    /// The kinds that were met, by cover class, then soil, then slope.
    [[nodiscard]] std::vector<LandShare> shares() const;

private:
    struct Count {
        std::int64_t cells = 0;
        FixedArea area = 0;
    };
    std::array<std::vector<Count>, cell_soils> counts_;  ///< by soil; of each by cover class and slope
};

}  // namespace rillclock
