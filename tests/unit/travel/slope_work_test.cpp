// What the search for the slope ahead costs, counted in the places of the way down that it asks for.

#include <catch2/catch.hpp>
#include <cstddef>
#include <optional>

#include "slope_rules.hpp"

namespace rillclock {
namespace {

/// The ground below an end, one metre a cell: level for `river` cells, then the root.
struct LevelRiver {
    std::size_t river;
    bool concentrated;
    std::size_t asked = 0;

    std::optional<ProfilePlace> next(double distance_of_end) {
        if (asked == river) return std::nullopt;
        ++asked;
        return ProfilePlace{.distance_m = distance_of_end - static_cast<double>(asked), .level = 0.0, .concentrated = concentrated};
    }
};

/// Places asked for by the slopes of all cells of a way of `cells`, one metre long each and `fall` high, above a level river of 5 km.
std::size_t asked_above_river(std::size_t cells, double fall, GroundKind kind, bool river_is_channel, const SlopeRules& rules) {
    LevelRiver river{5000, river_is_channel};
    FlowProfile path([&] { return river.next(5000.0); });
    const SlopeAtTop at_top(rules, 1.0);
    for (std::size_t i = 0; i < cells; ++i) {
        path.put(i, {.distance_m = 5000.0 + static_cast<double>(i), .level = fall * static_cast<double>(i + 1),
                     .concentrated = kind != GroundKind::overland});
        (void)at_top.slope(path, kind);
    }
    return river.asked;
}

const SlopeRules rules = {.window = metres(20), .vertical_step = metres(0.2), .overland_floor = 0.001, .channel_floor = 0.0001};

TEST_CASE("the slopes of a steep way ask for no more of the river below than their window") {
    CHECK(asked_above_river(300, 0.5, GroundKind::overland, false, rules) == 20);
    CHECK(asked_above_river(300, 0.5, GroundKind::overland, true, rules) == 20);
    CHECK(asked_above_river(1, 0.5, GroundKind::overland, false, rules) == 20);
}

TEST_CASE("a thousand steep tributaries ask for a window each of the level river below, not for its length") {
    std::size_t asked = 0;
    for (int i = 0; i < 1000; ++i) asked += asked_above_river(50, 0.5, GroundKind::overland, false, rules);
    CHECK(asked == 1000 * 20);
}

TEST_CASE("on level ground the search gives up where its answer would lie under the floor") {
    // 0.2 m over a floor of 0.001 is 200 m, over one of 0.0001 it is 2 km; the next place beyond ends it. The end is the first to look.
    CHECK(asked_above_river(1, 0.0, GroundKind::overland, false, rules) == 201);
    CHECK(asked_above_river(1, 0.0, GroundKind::channel, true, rules) == 2001);
    CHECK(asked_above_river(1000, 0.0, GroundKind::channel, true, rules) == 2001);   // and those above it look no farther
}

}  // namespace
}  // namespace rillclock
