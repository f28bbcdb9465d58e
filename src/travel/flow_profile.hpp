#pragma once

#include <algorithm>
#include <cstddef>
#include <limits>
#include <optional>
#include <vector>

namespace rillclock {

/// A place on a flow path as its profile knows it.
struct ProfilePlace {
    double distance_m = 0.0;      ///< to the root
    double level = 0.0;           ///< spill elevation, in elevation units
    bool concentrated = false;    ///< channel or open water
};

/// The profile of the flow path below a cell, kept while a tree of cells is walked upward from an end.
///
/// `put` sets the path's own places, the end first; places beyond the end are fetched one by one, and only when a search needs them.
/// Distance to the root and level never fall along the path upward, so places are found by bisection. Falls are differences of
/// elevations as the file has them: an added constant changes no bit of them.
template <class Fetch>
class FlowProfile {
public:
    /// `fetch` returns the next place beyond the last one it returned, or nothing once the root was reached.
    explicit FlowProfile(Fetch fetch) : fetch_(std::move(fetch)) {}

    void put(std::size_t position, const ProfilePlace& place) {
        if (position >= inside_.size()) inside_.resize(position + 1);
        top_ = position;
        Inside& at = inside_[position];
        const Inside* below = position == 0 ? nullptr : &inside_[position - 1];
        at.place = place;
        at.concentrated = place.concentrated ? position : below == nullptr ? npos : below->concentrated;
        at.window_end = below == nullptr ? 0 : below->window_end;
        at.step_end = below == nullptr ? 0 : below->step_end;
    }

    /// Distance from the top of the path to the root.
    [[nodiscard]] double length() const { return top().distance_m; }

    /// Fall from the top to the place `reach` ahead, no farther than the root.
    [[nodiscard]] double fall_within(double reach) {
        const double target = top().distance_m - reach;
        if (!(target > 0)) return fall_to(*reach_down([](const ProfilePlace&) { return false; }, infinite));
        reach_down([&](const ProfilePlace& place) { return place.distance_m <= target; }, infinite);
        const std::size_t above = first_above([&](const ProfilePlace& place) { return place.distance_m <= target; },
                                              inside_[top_].window_end);
        if (above == size()) return 0.0;
        const ProfilePlace& low = at(above - 1);
        const ProfilePlace& high = at(above);
        const double share = (target - low.distance_m) / (high.distance_m - low.distance_m);
        return fall_to(low) - share * (high.level - low.level);
    }

    /// Distance ahead at which the path has fallen by `fall` (positive), interpolated; none where it does not within `limit` or before the
    /// root.
    [[nodiscard]] std::optional<double> distance_to_fall(double fall, double limit) {
        const auto has_fallen = [&](const ProfilePlace& place) { return fall_to(place) >= fall; };
        const ProfilePlace* lowest = reach_down(has_fallen, limit);
        if (!has_fallen(*lowest)) return std::nullopt;
        const std::size_t above = first_above(has_fallen, inside_[top_].step_end);
        const ProfilePlace& low = at(above - 1);
        const ProfilePlace& high = at(above);
        const double share = (fall_to(low) - fall) / (high.level - low.level);
        return top().distance_m - (low.distance_m + share * (high.distance_m - low.distance_m));
    }

    /// The fall to the root where it was reached; none where a search gave up before.
    [[nodiscard]] std::optional<double> fall_to_root() const {
        if (!ended_) return std::nullopt;
        return fall_to(at(0));
    }

    /// How far ahead channel or water begins; infinite where it does not within `reach`.
    [[nodiscard]] double distance_to_concentrated(double reach) {
        if (inside_[top_].concentrated != npos) return top().distance_m - inside_[inside_[top_].concentrated].place.distance_m;
        reach_down([&](const ProfilePlace& place) { return top().distance_m - place.distance_m >= reach; }, infinite);
        return beyond_concentrated_ == npos ? infinite : top().distance_m - beyond_[beyond_concentrated_].distance_m;
    }

private:
    static constexpr std::size_t npos = SIZE_MAX;
    static constexpr double infinite = std::numeric_limits<double>::infinity();

    /// A place of the path itself. Where searches from it ended is where those from the place above it begin; counted from the path's end,
    /// so negative beyond it.
    struct Inside {
        ProfilePlace place;
        std::size_t concentrated = npos;   ///< position of the last place at or below it that is concentrated
        std::ptrdiff_t window_end = 0;
        std::ptrdiff_t step_end = 0;
    };

    [[nodiscard]] const ProfilePlace& top() const { return inside_[top_].place; }
    [[nodiscard]] double fall_to(const ProfilePlace& place) const { return top().level - place.level; }
    [[nodiscard]] std::size_t size() const { return beyond_.size() + top_ + 1; }
    /// Places from the lowest known up.
    [[nodiscard]] const ProfilePlace& at(std::size_t i) const {
        return i < beyond_.size() ? beyond_[beyond_.size() - 1 - i] : inside_[i - beyond_.size()].place;
    }
    [[nodiscard]] const ProfilePlace& lowest() const { return at(0); }

    /// Fetches places until one is `far_enough`, lies more than `limit` below the top, or is the root; returns the lowest known.
    template <class FarEnough>
    const ProfilePlace* reach_down(FarEnough far_enough, double limit) {
        while (!ended_ && !far_enough(lowest()) && !(top().distance_m - lowest().distance_m > limit)) {
            const std::optional<ProfilePlace> next = fetch_();
            ended_ = !next;
            if (!next) break;
            if (next->concentrated && beyond_concentrated_ == npos) beyond_concentrated_ = beyond_.size();
            beyond_.push_back(*next);
        }
        return &lowest();
    }

    /// The first place, from the lowest up, that is not `below`; the lowest is. What is looked for lies close to where the search from the place
    /// under the top ended, which is `hint`: so first in growing strides from there, then by halves. Sets `hint` to where it ended.
    template <class Below>
    [[nodiscard]] std::size_t first_above(Below below, std::ptrdiff_t& hint) const {
        const auto beyond = static_cast<std::ptrdiff_t>(beyond_.size());
        std::size_t low = static_cast<std::size_t>(std::max<std::ptrdiff_t>(hint + beyond, 1) - 1);
        std::size_t high = low + 1;
        if (below(at(low))) {
            for (std::size_t stride = 1; high < size() && below(at(high)); stride *= 2) {
                low = high;
                high = std::min(high + stride, size());
            }
        } else {
            for (std::size_t stride = 1; low > 0 && !below(at(low)); stride *= 2) {
                high = low;
                low -= std::min(stride, low);
            }
        }
        while (high - low > 1) {
            const std::size_t middle = low + (high - low) / 2;
            (below(at(middle)) ? low : high) = middle;
        }
        hint = static_cast<std::ptrdiff_t>(high) - beyond;
        return high;
    }

    Fetch fetch_;
    std::vector<Inside> inside_;   ///< up to the top; room beyond it
    std::size_t top_ = 0;
    std::vector<ProfilePlace> beyond_;
    std::size_t beyond_concentrated_ = npos;
    bool ended_ = false;
};

}  // namespace rillclock
