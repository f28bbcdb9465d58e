#pragma once

#include <string>
#include <utility>
#include <vector>

#include "reference/worked_terrain.hpp"
#include "rillclock/catchment/outlet.hpp"

namespace rillclock::worked {

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
          tree(point_tree(land.forest, points)),
          arrivals{.travel = land.inputs,
                   .field = land.field,
                   .tree = tree,
                   .storm_factor = land.given.rules.sheet.storm_factor},
          outlets(outlets_of(arrivals, land.given.rules, points, asked.rules)) {}
    Worked(const Worked&) = delete;
    Worked& operator=(const Worked&) = delete;
    ~Worked() = default;

    [[nodiscard]] std::vector<PathPiece> pieces(const std::vector<Cell>& path) const {
        return path_pieces(land.inputs, land.field, land.given.rules, path);
    }
    [[nodiscard]] std::vector<Segment> segments(const std::vector<Cell>& path) const {
        return segments_of(land.inputs, land.field, land.given.rules, path, asked.rules.segments);
    }
    [[nodiscard]] PathSummary summary(const std::vector<Cell>& path) const {
        return summary_of(land.inputs, land.field, land.given.rules, path);
    }

    const Land land;
    const Asked asked;
    const Grid grid;
    const std::vector<DesignPoint> points;
    const PointTree tree;
    const ArrivalInputs arrivals;
    const std::vector<Outlet> outlets;

private:
    static std::vector<DesignPoint> points_of(const Worked& w) {
        if (w.asked.points.empty()) {
            const PointGround on{w.land.forest, w.land.given.ground, w.grid, w.land.field.contributing_area};
            return find_points(on, 0.0).points;
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
