#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// A reading from a velocity chart.
struct VelocityPoint {
    double slope = 0.0;  ///< rise over run
    Speed velocity;
};

/// The power of the slope between two neighbouring points of a chart: V = at_slope_1 · S^exponent.
struct VelocityLaw {
    std::size_t interval = 0;  ///< between which points: from 0
    Speed at_slope_1;
    double exponent = 0.5;
};

/// The line of one surface on a chart of velocity by slope, as points read from it.
///
/// Between two points the velocity is a power of the slope (straight on log-log paper); at a point it is that point's
/// own. Before the first and after the last point the line of the nearest two goes on, since charts end where their
/// paper ends; `covers` tells where that is so.
struct VelocityLine {
    std::string surface;
    std::vector<VelocityPoint> points;  ///< at least two; slopes and velocities rise

    [[nodiscard]] Speed at(double slope) const;  ///< for a slope above 0; no number below
    /// Whether a slope, rise over run, lies between its first and last point.
    [[nodiscard]] bool covers(double slope) const;
    /// The power that holds at a slope; at a point, that below it.
    [[nodiscard]] VelocityLaw law_at(double slope) const;
    /// Whether the power of an interval holds at a slope, to within 1e-4 of the slopes at its ends (so that slopes which lie at a point
    /// but for rounding do not change the power); the first and the last interval are open.
    [[nodiscard]] bool holds(std::size_t interval, double slope) const;
};

/// The lines of one chart.
struct VelocityTable {
    std::string source;
    std::vector<VelocityLine> lines;

    /// The line of that surface; null where there is none.
    [[nodiscard]] const VelocityLine* find(std::string_view surface) const;
};

/// Reads a chart as CSV: slopes down, surfaces across, the unit in each column's name.
///
///     slope_percent,short grass_ft_s,paved_ft_s
///     0.5,0.49,1.44
///     5,1.55,4.55
///
/// The first column is `slope_percent` or `slope` (rise over run); every other is a surface's name and `_ft_s` or
/// `_m_s`. A field may be empty where a line does not reach. `file` names the text in errors. Throws an input error,
/// with the line, for any other header, for numbers not above zero, for slopes that do not rise, for a line of fewer
/// than two points and for a velocity that does not grow with the slope.
[[nodiscard]] VelocityTable parse_velocity_table(std::string_view text, std::string_view file);

}  // namespace rillclock
