#pragma once

#include <cstdint>
#include <limits>
#include <unordered_map>

#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/channel_flow.hpp"
#include "rillclock/raster/grid.hpp"

namespace rillclock {

/// How the section of a mapped channel is stated.
enum class SectionShape { by_area, trapezoid, gutter };

/// The section of a mapped channel line, from its attributes.
struct MappedSection {
    SectionShape shape = SectionShape::by_area;
    double n = 0.0;             ///< Manning's n, above 0
    Trapezoid trapezoid = {};   ///< and the depth of the flow in it
    Length depth = {};
    double cross_fall = 0.0;    ///< gutter: rise over run across the street
    Length spread = {};         ///< width of the water from the curb
};

/// No mapped section.
inline constexpr std::uint32_t no_section = std::numeric_limits<std::uint32_t>::max();

/// What the design storm brings a channel cell, and the depth at which its section carries that; flow 0 where no storm was asked for.
struct DesignFlow {
    double arrival_s = 0.0;        ///< of the water that arrives last
    Intensity intensity = {};      ///< of a storm that lasts as long
    double runoff_area_m2 = 0.0;   ///< Σ C·A
    double m3_per_s = 0.0;
    double slope = 0.0;
    double bottom_width_m = 0.0;   ///< 0 for a gutter, whose side slope is one side's alone
    double side_slope = 0.0;       ///< run over rise
    double depth_m = 0.0;          ///< normal depth; of a gutter at the curb
};

/// What times the flow in one channel cell in place of the rules by area.
struct ChannelReach {
    double n = 0.0;
    double radius_m = 0.0;       ///< hydraulic radius; 0 where the size goes by area all the same
    double mean_depth_m = 0.0;   ///< flow area over top width
    std::uint32_t section = no_section;   ///< position among the mapped sections
    DesignFlow flow = {};
};

/// A trapezoid has the radius of its wetted part. A gutter's is 0.752^1.5·Sx·T, with which Manning's formula is that of HEC-22:
/// V = 0.752/n · √SL · (Sx·T)^(2/3).
[[nodiscard]] ChannelReach reach_of(const MappedSection& section, std::uint32_t position);

/// The channel cells that have a reach of their own.
using ChannelReaches = std::unordered_map<Cell, ChannelReach>;

/// The reach of a cell; null where it has none of its own.
[[nodiscard]] inline const ChannelReach* reach_at(const ChannelReaches& reaches, Cell cell) {
    const auto found = reaches.find(cell);
    return found == reaches.end() ? nullptr : &found->second;
}

}  // namespace rillclock
