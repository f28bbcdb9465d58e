#pragma once

#include <optional>

namespace rillclock {

/// From the least to the greatest value something may have.
struct ValueRange {
    double low = 0.0;
    double high = 0.0;   ///< may be infinite where the study says "unlimited"
};

/// What a study states of the ranges of its inputs; what is absent has a range of ours.
struct UncertaintyStudy {
    int draws = 500;
    int seed = 1;
    std::optional<ValueRange> pond_speed = {};             ///< m/s
    std::optional<ValueRange> slope_floor_overland = {};   ///< rise over run
    std::optional<ValueRange> slope_floor_channel = {};    ///< rise over run
    std::optional<ValueRange> sheet_limit = {};            ///< m
    std::optional<ValueRange> rain = {};                   ///< factor on the depth or intensity of rain
    std::optional<ValueRange> shallow_speed = {};          ///< factor on the speed of shallow concentrated flow
    std::optional<ValueRange> channel_n = {};
    std::optional<ValueRange> channel_radius = {};         ///< factor on the hydraulic radius of channels
};

}  // namespace rillclock
