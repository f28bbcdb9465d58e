#pragma once

#include <algorithm>
#include <cmath>
#include <random>
#include <string>
#include <utility>
#include <vector>

#include "reference/drawings.hpp"
#include "reference/plain_catchment.hpp"
#include "reference/worked_terrain.hpp"
#include "rillclock/catchment/outlet.hpp"

namespace rillclock::worked {

/// Terrain of 1 × 1 to 40 × 40 cells with flats, pits and voids; all regimes, several storms.
[[nodiscard]] inline Given random_given(std::mt19937& random, unsigned seed) {
    Given given{.elevations = drawings::random_terrain(random, seed % 2 == 0 ? 3 : 200, seed % 3 == 0 ? 0.05 : 0.0),
                .ground = Ground::planar(metres(3), metres(4))};
    given.surface = random_surface(random, given.elevations, seed % 4 < 2);
    given.rules.channel.from_area = square_metres(400);
    given.rules.sheet.storm_factor = 1.0 + seed % 5;
    given.rules.pond.depth = metres(0.5);
    return given;
}

/// Some cells of a terrain that are not void, each once.
[[nodiscard]] inline std::vector<Cell> random_cells(std::mt19937& random, const Given& given, std::size_t most) {
    std::vector<Cell> cells;
    for (Cell cell = 0; cell < static_cast<Cell>(given.elevations.size()); ++cell) {
        if (!std::isnan(given.elevations[cell])) cells.push_back(cell);
    }
    std::shuffle(cells.begin(), cells.end(), random);
    cells.resize(std::min(most, cells.size()));
    return cells;
}

/// What a test asks of a terrain.
struct Asked {
    /// Cells of the design points, numbered from 1; none means every root, the largest first.
    std::vector<Cell> points = {};
    OutletRules rules = {};
};

/// Terrain worked through to its outlets.
class Worked {
public:
    explicit Worked(Given given, Asked wanted = {})
        : land(std::move(given)),
          asked(std::move(wanted)),
          grid{.rows = land.forest.rows(),
               .columns = land.forest.columns(),
               .top = static_cast<double>(land.forest.rows())},
          points(points_of(*this)),
          tree(reference::owned_tree(land.forest, points)),
          storm_factor(land.given.rules.sheet.storm_factor),
          outlets(reference::outlets_of(land.inputs, land.field, land.given.rules, points, asked.rules)) {}
    Worked(const Worked&) = delete;
    Worked& operator=(const Worked&) = delete;
    ~Worked() = default;

    [[nodiscard]] std::vector<PathPiece> pieces(const std::vector<Cell>& path) const {
        return path_pieces(ground(), cells(path));
    }
    [[nodiscard]] std::vector<Segment> segments(const std::vector<Cell>& path) const {
        return segments_of(ground(), cells(path), pieces(path), asked.rules.segments);
    }
    [[nodiscard]] PathSummary summary(const std::vector<Cell>& path) const {
        return summary_of(ground(), cells(path), pieces(path));
    }

    const Land land;
    const Asked asked;
    const Grid grid;
    const std::vector<DesignPoint> points;
    const reference::OwnedTree tree;
    const double storm_factor;
    const std::vector<Outlet> outlets;

private:
    [[nodiscard]] PathGround ground() const {
        return {.classes = land.given.surface.classes,
                .metres_per_elevation_unit = land.given.metres_per_elevation_unit,
                .rules = land.given.rules,
                .storm_factor = storm_factor};
    }
    [[nodiscard]] PathCells cells(const std::vector<Cell>& path) const {
        return reference::path_cells(land.inputs, land.field, path);
    }
    static std::vector<DesignPoint> points_of(const Worked& w) {
        if (w.asked.points.empty()) {
            return find_points(reference::ways_out(w.land.forest, w.land.field.contributing_area), w.grid, 0.0).points;
        }
        std::vector<DesignPoint> points;
        for (const Cell cell : w.asked.points) {
            DesignPoint point;
            point.name = "cell " + std::to_string(cell);
            point.cell = cell;
            points.push_back(point);
        }
        return points;
    }
};

}  // namespace rillclock::worked
