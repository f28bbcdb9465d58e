#pragma once

#include <array>
#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/travel/tiled_travel.hpp"
#include "rillclock/travel/travel_setting.hpp"

namespace rillclock {

/// Step times of a tile under many settings, as estimates: each step of the study is taken to be as many times longer as its kind and
/// surface are under a setting. Times are whole numbers of units, so that their sums depend on no tile.

/// Units of estimated times in a second. Sums reach up to 97 days, and are that beyond it.
inline constexpr float lane_units_per_second = 128.0F;

/// One figure for each setting of a group.
using LaneFigures = std::array<float, up::Lanes::count>;

/// Settings that share a walk over a tile; the last group is filled up with the last setting.
struct SettingGroup {
    std::size_t first = 0;                  ///< the number of its first setting
    std::vector<LaneFigures> factor;        ///< by sort of step
    std::vector<LaneFigures> index_room;    ///< by surface class: sheet index of the study, in m, at which sheet flow ends
    LaneFigures limit{};                    ///< of the distance from the divide, m
    LaneFigures least_wave{};               ///< units of time that a metre of ponded ground takes at least
};

/// What settings do to a step: its time in the study times the factor of its sort; or more than that, in `SheetStep`.
struct ScaledStep {
    float time = 0.0F;        ///< in the study, in units
    std::uint32_t sort = 0;   ///< from `StepSorts::count` on, counted from there: a place among the sheet steps
};

/// A step in which sheet flow may end under some setting, or whose ground is ponded.
struct SheetStep {
    std::uint32_t sheet_sort = 0;
    std::uint32_t shallow_sort = 0;
    std::uint32_t surface = 0;
    float sheet = 0.0F;            ///< time as sheet flow, in units
    float shallow = 0.0F;          ///< time as shallow flow, in units
    float wave = 0.0F;             ///< time of a wave over ponded ground, in units; infinite elsewhere
    float length = 0.0F;           ///< m
    float from_divide = 0.0F;      ///< m
    float index = 0.0F;            ///< sheet index at the cell, m
    float per_index_step = 0.0F;   ///< 1 over what the step adds to it
};

/// How steps are sorted, each sort with a factor of its own.
class StepSorts {
public:
    explicit StepSorts(std::size_t surfaces) : surfaces_(static_cast<std::uint32_t>(surfaces)) {}
    static constexpr std::uint32_t channel = 0;
    static constexpr std::uint32_t water = 1;
    static constexpr std::uint32_t capped_wave = 2;
    static constexpr std::uint32_t free_wave = 3;
    [[nodiscard]] std::uint32_t shallow(std::uint32_t surface) const { return 4 + surface; }
    /// The same on the slope floor; of channels and shallow flow.
    [[nodiscard]] std::uint32_t on_floor(std::uint32_t sort) const { return sort + 4 + surfaces_; }
    [[nodiscard]] std::uint32_t sheet(std::uint32_t surface) const { return 2 * (4 + surfaces_) + surface; }
    [[nodiscard]] std::uint32_t count() const { return 2 * (4 + surfaces_) + surfaces_; }

private:
    std::uint32_t surfaces_;
};

/// The steps of a tile, ready to be scaled.
struct ScaledTile {
    std::vector<ScaledStep> step;   ///< by cell
    std::vector<SheetStep> sheet;
};

/// Sorts steps and scales them.
class ScaledSteps {
public:
    ScaledSteps(const TiledTravel& travel, std::span<const TravelSetting> settings);

    /// The settings, by groups.
    [[nodiscard]] const std::vector<SettingGroup>& groups() const { return groups_; }
    /// Sorts the steps of a tile that was read.
    void sort(const TileDesk& desk, ScaledTile& tile) const;
    /// The time of a step under each setting of a group.
    [[nodiscard]] up::Lanes times(const SettingGroup& group, const ScaledTile& tile, Local cell) const {
        const ScaledStep& step = tile.step[cell];
        if (step.sort >= sorts_.count()) return sheet_times(group, tile.sheet[step.sort - sorts_.count()]);
        const LaneFigures& factor = group.factor[step.sort];
        up::Lanes times;
        for (std::size_t lane = 0; lane < up::Lanes::count; ++lane) times.total[lane] = in_lane(step.time * factor[lane]);
        return times;
    }

private:
    [[nodiscard]] static std::int32_t in_lane(float units) {
        constexpr auto most = static_cast<float>(up::Lanes::most);
        return static_cast<std::int32_t>((units < most ? units : most) + 0.5F);
    }
    [[nodiscard]] static up::Lanes sheet_times(const SettingGroup& group, const SheetStep& step);
    void add_group(std::span<const TravelSetting> settings);
    [[nodiscard]] std::vector<float> factors_of(const TravelSetting& setting) const;
    [[nodiscard]] bool is_always_sheet(const SheetStep& step) const;
    [[nodiscard]] SheetStep sheet_step(const TileDesk& desk, Local local) const;
    [[nodiscard]] std::uint32_t sort_of(const TileDesk& desk, Local local, GroundKind kind) const;
    [[nodiscard]] double ponded_m(const TileDesk& desk, Local local) const;

    const TiledTravel& travel_;
    StepSorts sorts_;
    std::vector<SettingGroup> groups_;
    float least_limit_ = 0.0F;                ///< of all settings, m
    float greatest_limit_ = 0.0F;
    std::vector<float> least_index_room_;     ///< by surface class: of all settings, m
};

}  // namespace rillclock
