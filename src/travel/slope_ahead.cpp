#include "rillclock/travel/slope_ahead.hpp"

#include <algorithm>
#include <cstddef>
#include <limits>
#include <utility>
#include <vector>

namespace rillclock {
namespace {

/// The flow path below a cell, root first, as far as the depth-first walk has come: distance and spill elevation both never fall
/// with the position, so places on it are found by bisection. Falls are differences of elevations as the file has them: an added
/// constant changes no bit of them.
class Profile {
public:
    void put(std::size_t position, double distance_m, double level, bool concentrated) {
        const std::size_t size = position + 1;
        distance_.resize(size);
        level_.resize(size);
        concentrated_.resize(size);
        distance_[position] = distance_m;
        level_[position] = level;
        // Of the last cell at or below `position` that is channel or water; npos where there is none.
        concentrated_[position] = concentrated ? position : position == 0 ? npos : concentrated_[position - 1];
    }

    [[nodiscard]] double length() const { return distance_.back(); }
    [[nodiscard]] double fall_to(std::size_t position) const { return level_.back() - level_[position]; }
    [[nodiscard]] double fall_to_root() const { return fall_to(0); }

    /// Fall from the top of the path to the place `reach` ahead; the reach ends at the root.
    [[nodiscard]] double fall_within(double reach) const {
        const double target = distance_.back() - reach;
        if (!(target > 0)) return fall_to_root();
        const auto above = std::upper_bound(distance_.begin(), distance_.end(), target);
        if (above == distance_.end()) return 0.0;
        const auto i = static_cast<std::size_t>(above - distance_.begin());
        const double share = (target - distance_[i - 1]) / (distance_[i] - distance_[i - 1]);
        return fall_to(i - 1) - share * (level_[i] - level_[i - 1]);
    }

    /// Distance ahead at which the path has fallen by `fall`, which must be positive and no more than its fall to the root.
    [[nodiscard]] double distance_to_fall(double fall) const {
        const double top = level_.back();
        const auto above = std::partition_point(level_.begin(), level_.end(), [&](double l) { return top - l >= fall; });
        const auto i = static_cast<std::size_t>(above - level_.begin());
        const double share = (fall_to(i - 1) - fall) / (level_[i] - level_[i - 1]);
        return distance_.back() - (distance_[i - 1] + share * (distance_[i] - distance_[i - 1]));
    }

    /// How far ahead channel or water begins; infinite where the path has none.
    [[nodiscard]] double distance_to_concentrated() const {
        const std::size_t at = concentrated_.back();
        return at == npos ? std::numeric_limits<double>::infinity() : distance_.back() - distance_[at];
    }

private:
    static constexpr std::size_t npos = SIZE_MAX;
    std::vector<double> distance_;
    std::vector<double> level_;
    std::vector<std::size_t> concentrated_;
};

double floor_of(GroundKind kind, const SlopeRules& rules) {
    return std::max(kind == GroundKind::overland ? rules.overland_floor : rules.channel_floor, least_slope);
}

class Walk {
public:
    Walk(const SlopeInputs& inputs, const SlopeRules& rules)
        : in_(inputs), rules_(rules), step_(in_metres(rules.vertical_step) / inputs.metres_per_elevation_unit),
          result_{.slope = Raster<float>(inputs.forest.rows(), inputs.forest.columns()),
                  .falls_within = Raster<std::uint8_t>(inputs.forest.rows(), inputs.forest.columns())} {}

    /// Visits the tree of a root, each cell after the one below it.
    void visit_tree(Cell root) {
        pending_.push_back({root, 0});
        while (!pending_.empty()) {
            const auto [cell, position] = pending_.back();
            pending_.pop_back();
            visit(cell, position);
            in_.forest.for_each_upstream(cell, [&](Cell up) { pending_.push_back({up, position + 1}); });
        }
    }

    [[nodiscard]] SlopeAhead result() { return std::move(result_); }

private:
    struct Pending {
        Cell cell;
        std::size_t position;
    };

    void visit(Cell cell, std::size_t position) {
        const GroundKind kind = in_.kind[cell];
        path_.put(position, from_fixed(in_.flow_distance[cell]), in_.spill[cell], kind != GroundKind::overland);
        const double slope = position == 0 ? 0.0 : slope_at_top(kind) * in_.metres_per_elevation_unit;
        result_.slope[cell] = static_cast<float>(std::max(slope, floor_of(kind, rules_)));
        result_.falls_within[cell] = path_.fall_within(in_metres(rules_.window)) > step_ ? 1 : 0;
    }

    /// In elevation units a metre, before the floor.
    [[nodiscard]] double slope_at_top(GroundKind kind) const {
        double reach = std::min(in_metres(rules_.window), path_.length());
        if (kind == GroundKind::overland) reach = std::min(reach, path_.distance_to_concentrated());
        const double fall = path_.fall_within(reach);
        if (fall > 0 && fall >= step_) return fall / reach;
        if (!(step_ > 0 && path_.fall_to_root() >= step_)) return path_.fall_to_root() / path_.length();
        return step_ / path_.distance_to_fall(step_);
    }

    const SlopeInputs& in_;
    const SlopeRules& rules_;
    double step_;  ///< the vertical step in elevation units
    SlopeAhead result_;
    Profile path_;
    std::vector<Pending> pending_;
};

}  // namespace

SlopeAhead slope_ahead(const SlopeInputs& inputs, const SlopeRules& rules) {
    Walk walk(inputs, rules);
    for (const Cell cell : inputs.forest.order()) {
        if (inputs.forest.is_root(cell)) walk.visit_tree(cell);
    }
    return walk.result();
}

}  // namespace rillclock
