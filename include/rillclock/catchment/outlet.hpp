#pragma once

#include <array>
#include <vector>

#include "rillclock/catchment/arrivals.hpp"
#include "rillclock/catchment/path_doubts.hpp"
#include "rillclock/catchment/point_way.hpp"
#include "rillclock/catchment/rain_zone.hpp"
#include "rillclock/catchment/segments.hpp"
#include "rillclock/hydraulics/storm_time.hpp"

namespace rillclock {

/// A flow path to a point, with what stands for it.
struct PointPath {
    std::vector<Cell> cells;         ///< from the head to the point's cell
    std::vector<double> distance_m;  ///< of each cell from the head, along the path
    std::vector<Segment> segments;
    PathSummary summary;
    PathDoubts doubts;
    double seconds = 0.0;            ///< under the point's storm
    double end_to_end_s = 0.0;       ///< the sum of what end-to-end slopes would give
};

/// Shares of the area whose time of arrival every point tells.
inline constexpr std::array<double, 4> told_shares = {0.50, 0.85, 0.95, 0.99};

/// A point under the storm of one return period.
struct PointStorm {
    StormTime iteration = {};      ///< of the storm's duration, as a reviewer would do it by hand
    double storm_factor = 1.0;
    Head governing = {};           ///< the cell that decides the time
    StepTime time = {};            ///< from it to the point
    FixedLength length = 0;        ///< of the path between; set once paths are walked

    [[nodiscard]] double seconds() const { return in_seconds(time.under(storm_factor)); }
    /// Of sheet flow alone.
    [[nodiscard]] double sheet_seconds() const { return in_seconds(StepTime{.storm = time.storm}.under(storm_factor)); }
};

/// All that is known of one design point.
struct Outlet {
    PointNumber number = 0;
    DesignPoint point;
    PointNumber next = 0;                          ///< the next point below; 0 none
    FixedArea area = 0;                            ///< of the whole catchment
    FixedArea own_area = 0;                        ///< of the point's own subarea
    std::int64_t border_cells = 0;                 ///< catchment cells beside the edge or a void, apart from those at the point
    std::array<double, told_shares.size()> arrival_s{};   ///< when `told_shares` of the area have arrived
    double greatest_s = 0.0;                       ///< when all of it has
    PointPath governing;                           ///< its time is the time of concentration
    PointPath longest;
    CatchmentGround ground;                        ///< of the whole catchment
    PointWay way;                                  ///< to the next point; nothing where there is none
    StepTime time_to_root;                         ///< from the point's cell
    Front own_front;                               ///< of the own subarea, with times to the root
    LandTally own_land;                            ///< of the point's own subarea
    RainZone rain_zone;                            ///< whose rain it has
    double elevation_m = 0.0;                      ///< level at which water gets out of the point's cell
    double storm_factor = 1.0;                     ///< of the storm that all this is under
    std::vector<PointStorm> storms;                ///< by return period; none where the study has no rain by duration

    [[nodiscard]] double time_of_concentration_s() const { return governing.seconds; }
    [[nodiscard]] bool touches_edge() const { return border_cells > 0; }
};

/// What a study says of how points are worked out.
struct OutletRules {
    double ignore_tail = 0.0;      ///< share of the area, last to arrive, that is left out
    SegmentRules segments;
};

/// Of each point, what decides its times and paths, before any path is walked.
struct PointHeads {
    FixedArea area = 0;                                   ///< of the whole catchment
    FixedArea own_area = 0;
    std::int64_t border_cells = 0;                        ///< those at the point itself included
    std::array<Head, told_shares.size()> by_share{};
    Head last;                                            ///< to arrive
    Head governing;                                       ///< the last once the tail is left out
    Cell farthest = no_cell;
    CatchmentGround ground;                               ///< of the whole catchment
    Front own_front;                                      ///< of the own subarea
    LandTally own_land;                                   ///< of the point's own subarea
    RainZone rain_zone;                                   ///< whose rain it has; of a share of 0 where it lies in none
    double storm_factor = 1.0;                            ///< of the storm that all these are under
    std::vector<PointStorm> storms;                       ///< by return period
};

/// Joins the arrivals of subareas (by number − 1) down the tree of points.
[[nodiscard]] std::vector<PointHeads> heads_of(std::vector<Arrivals> subareas, const PointTree& tree, double storm_factor,
                                               double ignore_tail);

/// What one point is worked out from.
struct OutletParts {
    PointNumber number = 0;
    const DesignPoint& point;
    PointNumber next = 0;
    const PointHeads& heads;
    std::int64_t border_cells_at_point = 0;   ///< border cells that are the point's own or drain straight into it
    PointPath governing;                      ///< from the governing head to the point's cell
    PointPath longest;
    PointWay way = {};                        ///< to the next point; nothing where there is none
    const PathCell& cell;                     ///< the point's own
};

/// What stands for a path whose pieces are those. Cost: its length.
[[nodiscard]] PointPath point_path(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces,
                                   const SegmentRules& rules);

/// Puts together what is known of a point; `ground` has the storm that its paths were timed under.
[[nodiscard]] Outlet outlet_of(OutletParts parts, const PathGround& ground);

}  // namespace rillclock
