#pragma once

#include <cstddef>
#include <vector>

#include "rillclock/study/catchment_runoff.hpp"

namespace rillclock {

/// Land of a catchment that runs off alike, with its coefficients: a row to be followed by hand.
struct RunoffLand {
    /// Its coefficients under the storm of one return period.
    struct Figures {
        double plain = 0.0;    ///< C, before any factor
        double factor = 1.0;   ///< Cf, where it acts
        double used = 0.0;     ///< the smaller of 1 and Cf·C
        double uncut = 0.0;    ///< Cf·C
    };

    LandKind kind;             ///< soil and slope count only where C depends on them
    bool by_soil = false;      ///< whether it does
    bool by_slope = false;
    std::size_t rows = 1;      ///< how many rows were put together to this one: then the figures are means by area, and there is no one factor
    FixedArea area = 0;
    std::vector<Figures> periods;  ///< by return period

    [[nodiscard]] bool is_rest() const { return rows > 1; }
};

/// Rows that a catchment has at most.
inline constexpr std::size_t most_runoff_land = 25;

/// The land of a catchment by what its coefficient depends on, the greatest area first; from `most` rows on the last one stands for all
/// the rest. The areas sum up to the catchment's, and areas times the figures to those of `composite_of`. `periods`: how many there are.
/// Every kind must have a coefficient under each of them.
[[nodiscard]] std::vector<RunoffLand> runoff_land(const LandAreas& land, Coefficients& coefficients, std::size_t periods,
                                                  std::size_t most = most_runoff_land);

}  // namespace rillclock
