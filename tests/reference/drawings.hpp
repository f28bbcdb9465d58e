#pragma once

#include <cmath>
#include <limits>
#include <random>
#include <string>
#include <string_view>
#include <vector>

#include "reference/plain/flow_forest.hpp"
#include "reference/plain/steepest_descent.hpp"

/// Terrain drawn as text, flow drawn as arrows, and random terrains: what tests are written in.
namespace rillclock::drawings {

inline std::vector<std::string_view> lines_of(std::string_view text) {
    std::vector<std::string_view> lines;
    while (!text.empty()) {
        const std::size_t end = text.find('\n');
        const std::string_view line = text.substr(0, end);
        if (line.find_first_not_of(' ') != std::string_view::npos) {
            lines.push_back(line.substr(line.find_first_not_of(' ')));
        }
        text = end == std::string_view::npos ? std::string_view() : text.substr(end + 1);
    }
    return lines;
}

/// One digit or letter a cell (0 to 9, a = 10 …), `#` a void; blank lines and leading blanks do not count.
inline Elevations terrain(std::string_view drawing) {
    const auto lines = lines_of(drawing);
    Elevations z(static_cast<std::int64_t>(lines.size()), static_cast<std::int64_t>(lines.at(0).size()));
    for (std::int64_t row = 0; row < z.rows(); ++row) {
        for (std::int64_t column = 0; column < z.columns(); ++column) {
            const char c = lines[static_cast<std::size_t>(row)][static_cast<std::size_t>(column)];
            z(row, column) = c == '#' ? std::numeric_limits<double>::quiet_NaN() : c >= 'a' ? c - 'a' + 10 : c - '0';
        }
    }
    return z;
}

/// Flow as keys of a number pad around 5 (7 is north-west, 3 south-east), `o` a root, `#` a void; a line per row.
inline std::string arrows(const Raster<FlowCode>& codes) {
    constexpr std::string_view keys = "89632147o#?";
    std::string text;
    for (std::int64_t row = 0; row < codes.rows(); ++row) {
        for (const FlowCode code : codes.row(row)) text += keys[code];
        text += '\n';
    }
    return text;
}

/// A drawing of arrows in the form that `arrows` gives.
inline std::string drawn(std::string_view drawing) {
    std::string text;
    for (const auto line : lines_of(drawing)) text += std::string(line) + '\n';
    return text;
}

/// Integers from 0 to `highest`, so full of ties, flats and pits, with a share of voids; at least one cell is not void.
inline Elevations random_terrain(std::mt19937& random, int highest, double void_share) {
    std::uniform_int_distribution<int> size(1, 40);
    std::uniform_int_distribution<int> level(0, highest);
    std::bernoulli_distribution is_void(void_share);
    Elevations z(size(random), size(random));
    for (double& value : z.values()) {
        value = is_void(random) ? std::numeric_limits<double>::quiet_NaN() : level(random);
    }
    if (std::isnan(z(0, 0))) z(0, 0) = 1;
    return z;
}

}  // namespace rillclock::drawings
