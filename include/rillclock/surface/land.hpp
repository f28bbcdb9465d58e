#pragma once

#include <array>
#include <compare>
#include <cstddef>
#include <cstdint>
#include <optional>
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

/// Slope of the land in the three bands by which runoff coefficients are tabulated (Rawls, Wong and McCuen, 1981): up to
/// 2 %, up to 6 %, steeper.
enum class SlopeBand : std::uint8_t { flat, rolling, steep };

/// `slope`: rise over run, of the land and not of a path.
[[nodiscard]] constexpr SlopeBand slope_band(double slope) {
    return static_cast<SlopeBand>((slope <= 0.02 ? 0 : 1) + (slope <= 0.06 ? 0 : 1));   // without a branch that slopes of rough ground mislead
}
/// "to 2 %", "2 to 6 %", "above 6 %".
[[nodiscard]] std::string words(SlopeBand band);

/// What kind of land a cell is.
struct LandKind {
    std::uint8_t cover = 0;  ///< position of the class in the cover book
    CellSoil soil = CellSoil::unknown;
    SlopeBand slope = SlopeBand::flat;

    auto operator<=>(const LandKind&) const = default;
};

/// How much land is of one kind.
struct LandShare {
    LandKind kind;
    std::int64_t cells = 0;
    FixedArea area = 0;
};

/// Counts the cells and the area of every kind of land. Sums are integers: the order of adding does not matter. Memory:
/// 48 bytes for each class of the book up to the last one met, and that for each soil group met.
class LandTally {
public:
    /// Adds a cell of a kind.
    void add(const LandKind& kind, FixedArea area) {
        std::vector<Count>& counts = counts_[static_cast<std::size_t>(kind.soil)];
        const std::size_t place = kind.cover * bands + static_cast<std::size_t>(kind.slope);
        if (place >= counts.size()) counts.resize((kind.cover + 1U) * bands);
        ++counts[place].cells;
        counts[place].area += area;
    }
    /// Adds all that another has.
    void add(const LandTally& other);
    /// The kinds that were met, by cover class, then soil, then slope.
    [[nodiscard]] std::vector<LandShare> shares() const;

private:
    static constexpr std::size_t soils = 5;
    static constexpr std::size_t bands = 3;
    struct Count {
        std::int64_t cells = 0;
        FixedArea area = 0;
    };
    std::array<std::vector<Count>, soils> counts_;  ///< by soil; of each by cover class and slope
};

}  // namespace rillclock
