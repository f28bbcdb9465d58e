#include "overview.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace rillclock {
namespace {

constexpr std::int64_t longest_side = 900;   ///< of a picture, in dots

/// Lights the ground from the north-west, 45 degrees up; flat terrain is exaggerated so that its forms are seen.
std::vector<std::uint8_t> relief(const std::vector<double>& heights, std::int64_t rows, std::int64_t columns, double dot_m) {
    std::vector<double> east(heights.size());
    std::vector<double> south(heights.size());
    double sum = 0.0;
    const auto at = [&](std::int64_t r, std::int64_t c) {
        return heights[static_cast<std::size_t>(std::clamp<std::int64_t>(r, 0, rows - 1) * columns + std::clamp<std::int64_t>(c, 0, columns - 1))];
    };
    for (std::size_t i = 0; i < heights.size(); ++i) {
        const auto r = static_cast<std::int64_t>(i) / columns;
        const auto c = static_cast<std::int64_t>(i) % columns;
        const double across = (at(r, c + 1) - at(r, c - 1)) / (2.0 * dot_m);
        const double down = (at(r + 1, c) - at(r - 1, c)) / (2.0 * dot_m);
        east[i] = std::isfinite(across) ? across : 0.0;
        south[i] = std::isfinite(down) ? down : 0.0;
        sum += std::hypot(east[i], south[i]);
    }
    const double exaggeration = std::clamp(0.3 / std::max(1e-6, sum / static_cast<double>(heights.size())), 0.5, 20.0);
    std::vector<std::uint8_t> shades(heights.size());
    for (std::size_t i = 0; i < heights.size(); ++i) {
        const double x = exaggeration * east[i];
        const double y = exaggeration * south[i];
        // The normal (-x, -y, 1) against the light from (-1, -1, √2), rows running south.
        const double light = (x + y + std::sqrt(2.0)) / (2.0 * std::sqrt(x * x + y * y + 1.0));
        shades[i] = std::isfinite(heights[i]) ? static_cast<std::uint8_t>(std::lround(1.0 + 254.0 * std::clamp(light, 0.0, 1.0))) : std::uint8_t{0};
    }
    return shades;
}

}  // namespace

OverviewSampler::OverviewSampler(const Grid& grid) : rows_(grid.rows), columns_(grid.columns) {
    overview_.stride = (std::max(grid.rows, grid.columns) + longest_side - 1) / longest_side;
    overview_.rows = (grid.rows + overview_.stride - 1) / overview_.stride;
    overview_.columns = (grid.columns + overview_.stride - 1) / overview_.stride;
    overview_.minutes.assign(static_cast<std::size_t>(overview_.rows * overview_.columns), std::numeric_limits<float>::quiet_NaN());
}

void OverviewSampler::look(const RegionStrip& strip) {
    for (std::int64_t r = 0; r < strip.window.rows; ++r) {
        const std::int64_t row = strip.window.row + r;
        if (row % overview_.stride != 0) continue;
        for (std::int64_t column = 0; column < columns_; column += overview_.stride) {
            const auto from = static_cast<std::size_t>(r * columns_ + column);
            const bool drains_to_point = strip.owners[from] != 0 && strip.owners[from] != std::numeric_limits<std::uint32_t>::max();
            const auto to = static_cast<std::size_t>(row / overview_.stride * overview_.columns + column / overview_.stride);
            if (drains_to_point) overview_.minutes[to] = strip.minutes[from];
        }
    }
}

ReportOverview OverviewSampler::take(const ElevationStore& elevations, double metres_per_unit, Length cell_side) {
    std::vector<double> heights;
    for (std::int64_t row = 0; row < rows_; row += overview_.stride) {
        for (std::int64_t column = 0; column < columns_; column += overview_.stride) {
            heights.push_back(elevations[static_cast<Cell>(row * columns_ + column)] * metres_per_unit);
        }
    }
    overview_.shade = relief(heights, overview_.rows, overview_.columns, in_metres(cell_side) * static_cast<double>(overview_.stride));
    return std::move(overview_);
}

}  // namespace rillclock
