#pragma once

#include <vector>

#include "rillclock/travel/surface_table.hpp"
#include "rillclock/travel/travel_rules.hpp"

namespace rillclock {

/// The figures that times hang on and that a person might state otherwise: the rules and what each surface class does to water. One
/// setting gives one answer.
struct TravelSetting {
    TravelRules rules;
    std::vector<SurfaceHydraulics> classes;
    double intensity_factor = 1.0;   ///< of the design rain, where points have storms of their own
};

/// Within what bounds settings lie that are to be compared on one set of paths. Beyond these nothing may differ that says where a
/// regime begins or how a slope is read: channels, ponded ground, slope window and vertical step.
struct SettingBounds {
    Length greatest_sheet_limit;
    double least_overland_floor = 0.0;      ///< rise over run
    double least_channel_floor = 0.0;
    double greatest_overland_floor = 0.0;
    double greatest_channel_floor = 0.0;
};

}  // namespace rillclock
