#include "rillclock/catchment/path_doubts.hpp"

#include <algorithm>

#include "rillclock/hydraulics/open_water.hpp"

namespace rillclock {
namespace {

void count_beyond(Beyond& beyond, const StepPart& part, double value, double speed_at_bound) {
    beyond.length_m += part.length_m;
    beyond.greatest = std::max(beyond.greatest, value);
    beyond.effect_s += part.length_m / speed_at_bound - part.length_m / part.speed_m_per_s;
}

void count_speed(Beyond& beyond, const StepPart& part, Speed bound) {
    const double bound_m_per_s = in_metres_per_second(bound);
    if (part.speed_m_per_s > bound_m_per_s) count_beyond(beyond, part, part.speed_m_per_s, bound_m_per_s);
}

class LookingAlong {
public:
    explicit LookingAlong(const PathGround& ground) : ground_(ground) {}

    PathDoubts look(std::span<const PathPiece> pieces) {
        for (const PathPiece& piece : pieces) {
            follow_shallow(piece.part);
            if (!piece.part.ponded) look_at(piece);
        }
        end_shallow();
        doubts_.head_s = head_seconds(pieces);
        return doubts_;
    }

private:
    [[nodiscard]] double seconds(const StepPart& part) const { return in_seconds(part.time.under(ground_.storm_factor)); }

    void look_at(const PathPiece& piece) {
        if (piece.part.regime == Regime::shallow) count_speed(doubts_.shallow_speed, piece.part, fastest_shallow_flow);
        if (piece.part.regime != Regime::channel) return;
        count_speed(doubts_.channel_speed, piece.part, fastest_channel_flow);
        const bool has_own_size = piece.reach && piece.reach->radius_m > 0;
        const Area area = square_metres(from_fixed_area(piece.area));
        if (!has_own_size) look_at_size(piece.part, area);
        const Length depth = has_own_size ? metres(piece.reach->mean_depth_m) : ground_.rules.channel.mean_depth_at(area);
        const double critical = in_metres_per_second(wave_celerity(depth));
        if (piece.part.speed_m_per_s > critical) {
            count_beyond(doubts_.supercritical, piece.part, piece.part.speed_m_per_s / critical, critical);
        }
    }

    void look_at_size(const StepPart& part, Area area) {
        const std::optional<Area>& from = ground_.rules.channel.sizes_from;
        if (!from || !(area < *from)) return;
        Beyond& found = doubts_.small_channels;
        found.length_m += part.length_m;
        found.greatest = std::max(found.greatest, *from / area);
        found.effect_s += seconds(part);
    }

    /// Ponds do not break a stretch of shallow flow, and do not lengthen it.
    void follow_shallow(const StepPart& part) {
        if (part.regime != Regime::shallow) return end_shallow();
        if (part.ponded) return;
        stretch_m_ += part.length_m;
        stretch_s_ += seconds(part);
    }

    void end_shallow() {
        const double beyond_m = stretch_m_ - in_metres(longest_shallow_flow);
        if (beyond_m > 0) {
            Beyond& found = doubts_.shallow_length;
            found.length_m += beyond_m;
            found.greatest = std::max(found.greatest, stretch_m_);
            found.effect_s += stretch_s_ * beyond_m / stretch_m_;
        }
        stretch_m_ = stretch_s_ = 0.0;
    }

    /// The piece in which the head ends counts by its share of length.
    [[nodiscard]] double head_seconds(std::span<const PathPiece> pieces) const {
        double left_m = 0.0;
        for (const PathPiece& piece : pieces) left_m += head_share * piece.part.length_m;
        double found = 0.0;
        for (const PathPiece& piece : pieces) {
            if (!(left_m > 0)) break;
            found += seconds(piece.part) * std::min(1.0, left_m / piece.part.length_m);
            left_m -= piece.part.length_m;
        }
        return found;
    }

    const PathGround& ground_;
    PathDoubts doubts_;
    double stretch_m_ = 0.0;
    double stretch_s_ = 0.0;
};

}  // namespace

PathDoubts doubts_of(const PathGround& ground, std::span<const PathPiece> pieces) { return LookingAlong(ground).look(pieces); }

}  // namespace rillclock
