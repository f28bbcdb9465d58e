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

    /// Begins another path with an end of its own, in the memory of the one before.
    void begin(Fetch fetch) {
        fetch_ = std::move(fetch);
        lowest_ = end_;
        beyond_concentrated_ = nowhere;
        ended_ = false;
    }

    void put(std::size_t position, const ProfilePlace& place) {
        top_ = end_ + position;
        if (top_ + looked_at_together >= distance_.size()) make_room_above();
        distance_[top_] = place.distance_m;
        level_[top_] = place.level;
        Found& found = found_[position];
        found = position == 0 ? Found{} : found_[position - 1];
        if (place.concentrated) found.concentrated = static_cast<std::ptrdiff_t>(position);
    }

    /// Distance from the top of the path to the root.
    [[nodiscard]] double length() const { return distance_[top_]; }

    /// Fall from the top to the place `reach` ahead, no farther than the root.
    [[nodiscard]] double fall_within(double reach) {
        const double target = distance_[top_] - reach;
        if (!(target > 0)) {
            reach_down([](std::size_t) { return false; }, infinite);
            return fall_to(lowest_);
        }
        const auto is_below = [this, target](std::size_t i) { return distance_[i] <= target; };
        reach_down(is_below, infinite);
        const std::size_t above = first_above(is_below, found_at_top().window_end);
        if (above > top_) return 0.0;
        const std::size_t low = above - 1;
        const double share = (target - distance_[low]) / (distance_[above] - distance_[low]);
        return fall_to(low) - share * (level_[above] - level_[low]);
    }

    /// Distance ahead at which the path has fallen by `fall` (positive), interpolated; none where it does not within `limit` or before the
    /// root.
    [[nodiscard]] std::optional<double> distance_to_fall(double fall, double limit) {
        const auto has_fallen = [this, fall](std::size_t i) { return fall_to(i) >= fall; };
        reach_down(has_fallen, limit);
        if (!has_fallen(lowest_)) return std::nullopt;
        const std::size_t above = first_above(has_fallen, found_at_top().step_end);
        const std::size_t low = above - 1;
        const double share = (fall_to(low) - fall) / (level_[above] - level_[low]);
        return distance_[top_] - (distance_[low] + share * (distance_[above] - distance_[low]));
    }

    /// The fall to the root where it was reached; none where a search gave up before.
    [[nodiscard]] std::optional<double> fall_to_root() const {
        if (!ended_) return std::nullopt;
        return fall_to(lowest_);
    }

    /// How far ahead channel or water begins; infinite where it does not within `reach`.
    [[nodiscard]] double distance_to_concentrated(double reach) {
        std::ptrdiff_t nearest = found_at_top().concentrated;
        if (nearest == nowhere) {
            reach_down([&](std::size_t i) { return distance_[top_] - distance_[i] >= reach; }, infinite);
            nearest = beyond_concentrated_;
        }
        return nearest == nowhere ? infinite : distance_[top_] - distance_[index(nearest)];
    }

private:
    static constexpr std::ptrdiff_t nowhere = std::numeric_limits<std::ptrdiff_t>::min();
    static constexpr double infinite = std::numeric_limits<double>::infinity();
    static constexpr std::size_t looked_at_together = 4;

    /// What is known of a place of the path itself, by positions that count from the path's end, so negative beyond it. Where searches from the
    /// place ended is where those from the place above it begin.
    struct Found {
        std::ptrdiff_t concentrated = nowhere;   ///< the last place at or below it that is concentrated
        std::ptrdiff_t window_end = 0;
        std::ptrdiff_t step_end = 0;
    };

    [[nodiscard]] Found& found_at_top() { return found_[top_ - end_]; }
    [[nodiscard]] std::size_t index(std::ptrdiff_t position) const {
        return static_cast<std::size_t>(static_cast<std::ptrdiff_t>(end_) + position);
    }
    [[nodiscard]] double fall_to(std::size_t i) const { return level_[top_] - level_[i]; }

    /// Fetches places until one is `far_enough`, lies more than `limit` below the top, or is the root.
    template <class FarEnough>
    void reach_down(FarEnough far_enough, double limit) {
        while (!ended_ && !far_enough(lowest_) && !(distance_[top_] - distance_[lowest_] > limit)) fetch_one();
    }

    void fetch_one() {
        const std::optional<ProfilePlace> next = fetch_();
        ended_ = !next;
        if (!next) return;
        if (lowest_ == 0) make_room_beyond();
        --lowest_;
        distance_[lowest_] = next->distance_m;
        level_[lowest_] = next->level;
        if (next->concentrated && beyond_concentrated_ == nowhere) {
            beyond_concentrated_ = static_cast<std::ptrdiff_t>(lowest_) - static_cast<std::ptrdiff_t>(end_);
        }
    }

    void make_room_above() {
        const std::size_t size = 2 * (top_ + looked_at_together + 1);
        distance_.resize(size);
        level_.resize(size);
        found_.resize(size - end_);
    }

    void make_room_beyond() {
        const std::size_t more = distance_.size() + 1;
        distance_.insert(distance_.begin(), more, 0.0);
        level_.insert(level_.begin(), more, 0.0);
        lowest_ += more;
        end_ += more;
        top_ += more;
    }

    /// The first place, from the lowest up, that is not `below`; the lowest is. What is looked for lies close to where the search from the place
    /// under the top ended, which is `hint`: so first among the next few at once, without a step that the processor must guess, then in growing
    /// strides, then by halves. Sets `hint` to where it ended.
    template <class Below>
    [[nodiscard]] std::size_t first_above(Below below, std::ptrdiff_t& hint) const {
        std::size_t low = index(std::max(hint, static_cast<std::ptrdiff_t>(lowest_ + 1) - static_cast<std::ptrdiff_t>(end_)) - 1);
        std::size_t high = low + 1;
        if (below(low)) {
            const std::size_t near = std::min(high + count_below(below, high), top_ + 1);
            if (near < high + looked_at_together) return ended_at(near, hint);
            low = near - 1;
            high = near;
            for (std::size_t stride = looked_at_together; high <= top_ && below(high); stride *= 2) {
                low = high;
                high = std::min(high + stride, top_ + 1);
            }
        } else {
            for (std::size_t stride = 1; low > lowest_ && !below(low); stride *= 2) {
                high = low;
                low -= std::min(stride, low - lowest_);
            }
        }
        while (high - low > 1) {
            const std::size_t middle = low + (high - low) / 2;
            (below(middle) ? low : high) = middle;
        }
        return ended_at(high, hint);
    }

    /// How many places from `first` on are `below`, of those that are looked at together. Above the top stand places of other paths.
    template <class Below>
    [[nodiscard]] static std::size_t count_below(Below below, std::size_t first) {
        unsigned all = 1;
        std::size_t count = 0;
        for (std::size_t i = 0; i < looked_at_together; ++i) {
            all &= static_cast<unsigned>(below(first + i));
            count += all;
        }
        return count;
    }

    [[nodiscard]] std::size_t ended_at(std::size_t place, std::ptrdiff_t& hint) const {
        hint = static_cast<std::ptrdiff_t>(place) - static_cast<std::ptrdiff_t>(end_);
        return place;
    }

    Fetch fetch_;
    // Places from the lowest that is known up to the top, and room on either side.
    std::vector<double> distance_;
    std::vector<double> level_;
    std::vector<Found> found_;   ///< of the path's own places, by position
    std::size_t lowest_ = 0;
    std::size_t end_ = 0;        ///< where the path's position 0 stands
    std::size_t top_ = 0;
    std::ptrdiff_t beyond_concentrated_ = nowhere;
    bool ended_ = false;
};

}  // namespace rillclock
