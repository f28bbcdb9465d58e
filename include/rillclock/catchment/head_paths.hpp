#pragma once

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/travel/tiled_travel.hpp"
#include "rillclock/travel/travel_setting.hpp"

namespace rillclock {

/// Time of a way as {storm part, fixed part}: storm_s · s + fixed_s under a storm factor s.
struct WayTime {
    double storm_s = 0.0;
    double fixed_s = 0.0;
    /// In seconds.
    [[nodiscard]] double under(double storm_factor) const { return storm_s * storm_factor + fixed_s; }
};
[[nodiscard]] inline WayTime operator+(const WayTime& a, const WayTime& b) { return {a.storm_s + b.storm_s, a.fixed_s + b.fixed_s}; }
[[nodiscard]] inline WayTime operator-(const WayTime& a, const WayTime& b) { return {a.storm_s - b.storm_s, a.fixed_s - b.fixed_s}; }

/// A step whose time is no multiple of one figure: on ponded ground, or where some setting's slope floor reaches it.
struct BentStep {
    GroundKind kind = GroundKind::overland;
    std::uint8_t surface = 0;
    double slope = 0.0;          ///< before the floor
    double length_m = 0.0;
    double unit_time = 0.0;      ///< s at a slope of 1 in channels, s on water; 0 overland
    bool is_known_channel = false;   ///< has a section of its own, which no setting changes
    double celerity = 0.0;       ///< of the wave on ponded ground, m/s; 0 elsewhere
};

/// A stretch of the kept paths between two places of interest, with its sums: what a setting multiplies.
struct PathLink {
    Cell top = no_cell;
    std::size_t below = 0;                                    ///< the link that begins where this one ends; itself at a path's end
    std::vector<std::size_t> sheet_cells = {};                   ///< where sheet flow may be, timed cell by cell
    std::vector<std::pair<std::uint8_t, double>> shallow = {};///< surface class, Σ d/√S in m; under a chart Σ d·k/V
    double channel_s = 0.0;                                   ///< under the rules that the paths were made with
    double known_s = 0.0;                                     ///< what no setting changes: open water, channels with a section of their own
    std::vector<BentStep> bent = {};
};

/// A cell where sheet flow may be under some setting, or that drains to such: its sheet index hangs on all that arrive.
struct SheetCell {
    StepView step;               ///< `surface` and `sheet_index` are the setting's
    std::uint8_t surface = 0;
    double slope = 0.0;          ///< before the floor
    std::size_t down = SIZE_MAX; ///< among these cells; SIZE_MAX beyond them
    bool on_path = false;
};

/// Times of the kept paths under one setting.
struct PathTimes {
    std::vector<WayTime> heads;
    std::vector<WayTime> points;
};

/// Paths from a kept set of heads down to the last point below each, made ready to be timed under any setting within bounds without the
/// raster.
///
/// Promise: the time of every kept path is the one that a whole run under the setting gives it, to the rounding of doubles: sheet flow is
/// timed cell by cell from the sheet index of all cells that arrive, whatever setting makes which of them the greatest; shallow and
/// channel steps by their sums; ponded steps and those that a floor may reach one by one. What it cannot know is a head that is not
/// kept.
class HeadPaths {
public:
    /// `heads` may repeat and must drain to a point. Cost: a pass over the tiles that paths cross.
    HeadPaths(const TiledTravel& travel, std::span<const Cell> heads, std::span<const DesignPoint> points, const SettingBounds& bounds);

    /// Times to the last points on the way down, of the heads (each once, by cell) and of the points.
    [[nodiscard]] PathTimes times(const TravelSetting& setting) const;

    /// Drops heads (by their place), and all that only their paths needed. Times of the others stay what they are, bit for bit.
    void keep(const std::vector<bool>& wanted);

    [[nodiscard]] const std::vector<Cell>& heads() const { return heads_; }
    /// The first point below each head.
    [[nodiscard]] const std::vector<PointNumber>& owners() const { return owners_; }

private:
    [[nodiscard]] std::vector<WayTime> sheet_times(const TravelSetting& setting) const;
    [[nodiscard]] WayTime link_time(const PathLink& link, const TravelSetting& setting, const std::vector<WayTime>& sheet) const;

    void keep_links();
    void keep_sheet_cells();

    TravelRules rules_;
    std::vector<Cell> heads_;
    std::vector<PointNumber> owners_;
    std::vector<SheetCell> sheet_cells_;          ///< upstream first
    std::vector<PathLink> links_;                 ///< downstream first
    std::vector<std::size_t> link_of_head_;
    std::vector<std::size_t> link_of_point_;
};

}  // namespace rillclock
