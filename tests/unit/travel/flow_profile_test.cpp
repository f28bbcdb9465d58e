// The searches along a path, against a walk from its lowest place up.

#include "flow_profile.hpp"

#include <catch2/catch.hpp>
#include <cstddef>
#include <limits>
#include <optional>
#include <random>
#include <vector>

namespace rillclock {
namespace {

/// Hands out the places beyond an end, the nearest first.
struct PlacesBeyond {
    const std::vector<ProfilePlace>* places = nullptr;
    std::size_t given = 0;

    std::optional<ProfilePlace> operator()() {
        if (given == places->size()) return std::nullopt;
        return (*places)[given++];
    }
};

/// All of a way, from the root up to its top.
using WholeWay = std::vector<ProfilePlace>;

double walked_fall_within(const WholeWay& way, double reach) {
    const ProfilePlace& top = way.back();
    const double target = top.distance_m - reach;
    if (!(target > 0)) return top.level - way.front().level;
    std::size_t above = 0;
    while (above < way.size() && way[above].distance_m <= target) ++above;
    if (above == way.size()) return 0.0;
    const ProfilePlace& low = way[above - 1];
    const double share = (target - low.distance_m) / (way[above].distance_m - low.distance_m);
    return (top.level - low.level) - share * (way[above].level - low.level);
}

std::optional<double> walked_distance_to_fall(const WholeWay& way, double fall) {
    const ProfilePlace& top = way.back();
    if (!(top.level - way.front().level >= fall)) return std::nullopt;
    std::size_t above = 0;
    while (top.level - way[above].level >= fall) ++above;
    const ProfilePlace& low = way[above - 1];
    const double share = ((top.level - low.level) - fall) / (way[above].level - low.level);
    return top.distance_m - (low.distance_m + share * (way[above].distance_m - low.distance_m));
}

double walked_distance_to_concentrated(const WholeWay& way) {
    for (std::size_t i = way.size(); i-- > 0;) {
        if (way[i].concentrated) return way.back().distance_m - way[i].distance_m;
    }
    return std::numeric_limits<double>::infinity();
}

/// A tree walked as the engine does: the top moves up by one place, or back to any place of the path and up another branch.
class RandomTree {
public:
    explicit RandomTree(std::mt19937& random) : random_(random) {}

    /// Places beyond an end, from the nearest to the root at distance 0.
    [[nodiscard]] std::vector<ProfilePlace> beyond(std::size_t count) {
        WholeWay way;
        for (std::size_t i = 0; i < count; ++i) way.push_back(above(way));
        return {way.rbegin(), way.rend()};
    }
    /// A place one step above the last of a way; half of all steps are level.
    [[nodiscard]] ProfilePlace above(const WholeWay& way) {
        const bool is_channel = number(0, 30) == 0 || (!way.empty() && way.back().concentrated && number(0, 3) > 0);
        if (way.empty()) return {.distance_m = 0.0, .level = 10.0, .concentrated = is_channel};
        const double rise = number(0, 1) == 0 ? 0.0 : number(1, 40) / 16.0;
        return {.distance_m = way.back().distance_m + number(4, 6) / 4.0, .level = way.back().level + rise, .concentrated = is_channel};
    }
    [[nodiscard]] int number(int least, int most) { return std::uniform_int_distribution<int>(least, most)(random_); }

private:
    std::mt19937& random_;
};

TEST_CASE("searches along a path find what a walk from its lowest place finds, wherever the branches of a tree begin") {
    std::mt19937 random(Catch::rngSeed() + 1U);
    RandomTree tree(random);
    FlowProfile<PlacesBeyond> path(PlacesBeyond{});
    for (int round = 0; round < 200; ++round) {
        const auto beyond = tree.beyond(static_cast<std::size_t>(tree.number(0, 60)));
        path.begin({&beyond});
        WholeWay way(beyond.rbegin(), beyond.rend());
        const double reach = tree.number(1, 120) / 4.0;
        const double fall = tree.number(1, 200) / 16.0;
        for (int step = 0; step < 100; ++step) {
            if (way.size() > beyond.size() && tree.number(0, 9) == 0) {
                way.resize(beyond.size() + static_cast<std::size_t>(tree.number(1, static_cast<int>(way.size() - beyond.size()))));
            }
            way.push_back(tree.above(way));
            path.put(way.size() - beyond.size() - 1, way.back());
            if (way.size() == 1) continue;   // a root is asked nothing
            INFO("seed " << Catch::rngSeed() << ", round " << round << ", step " << step);
            if (tree.number(0, 3) > 0) REQUIRE(path.fall_within(reach) == walked_fall_within(way, reach));
            if (tree.number(0, 3) > 0) REQUIRE(path.distance_to_fall(fall, 1e9) == walked_distance_to_fall(way, fall));
            REQUIRE(path.distance_to_concentrated(1e9) == walked_distance_to_concentrated(way));
        }
    }
}

}  // namespace
}  // namespace rillclock
