#pragma once

#include <functional>
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/travel/root_area.hpp"

namespace rillclock {

/// A point as the user stated it, in the DEM's coordinates.
struct StatedPoint {
    std::string name;
    Place place;
    std::optional<FixedArea> surveyed = {};  ///< contributing area by survey, above 0
};

/// A point settled on its cell.
struct DesignPoint {
    std::string name;
    Cell cell = no_cell;
    Place stated = {};              ///< where the user put it; the cell's centre where it was found
    Length moved;                   ///< from there to the cell's centre
    bool found = false;             ///< by contributing area, not stated
    std::optional<FixedArea> surveyed = {};  ///< contributing area by survey
};

/// Points in the order of their file, each on a cell of its own, and what was noticed.
struct PlacedPoints {
    std::vector<DesignPoint> points;   ///< numbered from 1 in this order, which is that of the file
    Notices notices;
};

/// The ground that points are placed on.
struct PointGround {
    const Grid& grid;
    const Ground& ground;
    /// Contributing area of a cell; nothing where it is void. Asked only of cells that `cells_near` lists.
    std::function<std::optional<FixedArea>(Cell)> area;
};

/// The cells that a point may be moved to, its own included, by increasing index; none where it lies off the grid.
[[nodiscard]] std::vector<Cell> cells_near(Place stated, const Grid& grid, const Ground& ground, Length move_within);

/// Moves each point to the cell of largest contributing area among its own and those whose centres lie within `move_within` of it;
/// of equal ones to the nearest, then to the smaller index. A point with a surveyed area moves to the cell whose area is nearest to that
/// in the logarithm instead (least |ln(area / surveyed)|).
///
/// Points off the data, on void ground, or landing on the cell of an earlier point are left out, each with a notice; so are told
/// moves, moves that change the area tenfold, and areas more than a tenth off the surveyed one, either way. Throws an input error where no point is left.
[[nodiscard]] PlacedPoints place_points(std::span<const StatedPoint> stated, const PointGround& on, Length move_within);

/// Points where water leaves the data with at least `least_share` of the data's area upstream, the largest first; the
/// single largest where none has as much. `ways_out` are all of the data's.
[[nodiscard]] PlacedPoints find_points(std::vector<RootArea> ways_out, const Grid& grid, double least_share);

}  // namespace rillclock
