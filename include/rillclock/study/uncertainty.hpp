#pragma once

#include <array>
#include <functional>
#include <optional>
#include <vector>

#include "rillclock/catchment/head_paths.hpp"
#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/core/progress.hpp"
#include "rillclock/hydraulics/storm_time.hpp"
#include "rillclock/study/uncertain_inputs.hpp"
#include "rillclock/tiles/executor.hpp"

namespace rillclock {

/// Shares of the draws whose times every point tells.
inline constexpr std::array<double, 7> told_percentiles = {0.05, 0.10, 0.25, 0.50, 0.75, 0.90, 0.95};

/// Time of concentration of a point under a setting, and which subarea's water arrives last; of equal ones the smaller number.
struct SettingTime {
    double seconds = 0.0;
    PointNumber last = 0;
};

/// The time with one input at an end of its range and all others at their typical values.
struct InputEffect {
    std::size_t input = 0;   ///< among the inputs
    double low_s = 0.0;      ///< at the input's low value
    double high_s = 0.0;
    /// How far the time moves over the input's range, the study's own time counted in.
    [[nodiscard]] double swing_s(double typical_s) const;
};

/// How often the water of a subarea arrived last.
struct LastShare {
    PointNumber subarea = 0;
    int draws = 0;   ///< in which its water arrives last
};

/// What the ranges of the inputs make of one point's time.
struct PointUncertainty {
    double fast_s = 0.0;      ///< all inputs at the end at which water is faster
    double typical_s = 0.0;   ///< the study's own values: the time of concentration
    double slow_s = 0.0;
    std::vector<InputEffect> effects;              ///< the greatest swing first
    std::array<double, told_percentiles.size()> percentile_s{};
    std::vector<LastShare> last;                   ///< the most draws first
};

/// What the ranges of a study's inputs make of its times.
struct Uncertainty {
    std::vector<UncertainInput> inputs;
    int seed = 1;
    std::size_t kept_heads = 0;
    std::vector<std::vector<double>> draws;         ///< values, one an input
    std::vector<std::vector<double>> draw_times_s;  ///< by draw, then by point
    std::vector<PointUncertainty> points;           ///< by number − 1
};

/// How points are timed where each has a storm of its own.
struct DrawnStorms {
    IntensityOfDuration rain;
    std::optional<Duration> last;   ///< of the rain: longer storms are read there, since a draw may outlast what the study does not
    StormDuration duration = StormDuration::whole_path;
    StormSearch search = {};
};

/// What the draws are made on.
struct UncertaintyGround {
    const HeadPaths& paths;
    const PointTree& tree;
    TravelSetting base;
    std::optional<DrawnStorms> storms;   ///< none where one storm times all
};

/// Times of all points (by number − 1) under a setting.
[[nodiscard]] std::vector<SettingTime> times_under(const UncertaintyGround& ground, const TravelSetting& setting);

/// Settings that between them make very different heads the last: all inputs fast and slow, roughness against the rest, each of a few
/// classes rough, and the first draws. At most 25, whatever the study.
[[nodiscard]] std::vector<TravelSetting> searching_settings(const std::vector<UncertainInput>& inputs, const TravelSetting& base, int seed);

/// Of the kept heads, which come within half a percent of the last of their subarea under any of the settings.
[[nodiscard]] std::vector<bool> heads_that_may_be_last(const HeadPaths& paths, const std::vector<TravelSetting>& settings,
                                                       const Executor& executor, const Progress& progress = {});

/// Evaluates ends, one input at a time, and the draws. The same on every machine and with any number of threads. Tells of settings done, as the
/// stage "uncertainty".
[[nodiscard]] Uncertainty uncertainty_of(const UncertaintyGround& ground, std::vector<UncertainInput> inputs, int draws, int seed,
                                         const Executor& executor, const Progress& progress = {});

}  // namespace rillclock
