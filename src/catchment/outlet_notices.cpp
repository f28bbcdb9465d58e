#include "rillclock/catchment/outlet_notices.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

constexpr double most_ponded_share = 0.10;
constexpr double most_floor_share = 0.25;
constexpr double least_fall_ratio = 0.8;
constexpr double most_fall_ratio = 1.25;
constexpr double most_tail = 1.25;
constexpr double most_end_to_end = 1.5;
constexpr double most_head_time = 0.25;

std::string percent(double share) { return significant(100.0 * share, 3) + " %"; }
std::string in_min(double s) { return significant(s / 60.0, 4) + " min"; }

class Looking {
public:
    Looking(const Outlet& outlet, const Grid& grid) : outlet_(outlet), grid_(grid) {}

    Notices all() {
        edge();
        ponded();
        floor();
        fall();
        tail();
        end_to_end();
        shallow();
        channel();
        channel_size();
        head();
        return std::move(found_);
    }

private:
    void say(const char* code, const std::string& text, double value, double threshold, double effect_s) {
        found_.push_back({.code = code, .text = "'" + outlet_.point.name + "': " + text, .point = outlet_.point.name,
                          .value = value, .threshold = threshold, .place = grid_.centre(outlet_.point.cell),
                          .effect_s = effect_s});
    }

    void edge() {
        if (!outlet_.touches_edge()) return;
        say("catchment-touches-edge",
            "the catchment touches the edge of the data or a void at " + std::to_string(outlet_.border_cells) +
                " cells, so its area and time are lower bounds; use elevations that reach beyond the divide",
            static_cast<double>(outlet_.border_cells), 0.0, outlet_.time_of_concentration_s());
    }

    void ponded() {
        const PathSummary& path = outlet_.governing.summary;
        const double share = path.share_of_length(path.ponded_length_m);
        if (!(share > most_ponded_share)) return;
        say("path-ponded",
            percent(share) + " of the governing path is ponded, where water moves at wave celerity up to pond_speed; look for " +
                "culverts that the elevations do not show, and vary pond_speed",
            share, most_ponded_share, share * outlet_.time_of_concentration_s());
    }

    void floor() {
        const PathSummary& path = outlet_.governing.summary;
        const double share = path.share_of_length(path.floor_length_m);
        if (!(share > most_floor_share)) return;
        say("path-on-slope-floor",
            percent(share) + " of the governing path runs on the least slope allowed; there the answer is an assumption, not a measurement",
            share, most_floor_share, share * outlet_.time_of_concentration_s());
    }

    void fall() {
        const double ratio = outlet_.governing.summary.fall_ratio();
        if (std::isnan(ratio) || (ratio >= least_fall_ratio && ratio <= most_fall_ratio)) return;
        say("fall-ratio",
            "the slopes used along the governing path add up to " + significant(ratio, 3) +
                " times its real fall (0.8 to 1.25 is usual); check vertical_step and slope_window against the data's accuracy",
            ratio, ratio < 1 ? least_fall_ratio : most_fall_ratio,
            std::abs(1.0 - std::sqrt(ratio)) * outlet_.time_of_concentration_s());
    }

    void tail() {
        const double most = outlet_.arrival_s.back();
        if (!(outlet_.greatest_s > most_tail * most)) return;
        say("slow-tail",
            "the last 1 % of the area takes the time from " + in_min(most) + " to " + in_min(outlet_.greatest_s) +
                "; look at the governing path's head, and see ignore_tail",
            most > 0 ? outlet_.greatest_s / most : 0.0, most_tail, outlet_.greatest_s - most);
    }

    void end_to_end() {
        const PointPath& path = outlet_.governing;
        if (!(path.seconds > 0 && path.end_to_end_s > 0)) return;
        const double ratio = path.end_to_end_s / path.seconds;
        if (ratio <= most_end_to_end && ratio >= 1.0 / most_end_to_end) return;
        say("end-to-end-differs",
            "end-to-end slopes, as read from a map, would give " + in_min(path.end_to_end_s) + " where the steps add up to " +
                in_min(path.seconds) + "; the path is uneven, so compare both with what is known of it",
            ratio, most_end_to_end, std::abs(path.end_to_end_s - path.seconds));
    }

    /// Of a part of the governing path, in percent.
    [[nodiscard]] std::string share(const Beyond& beyond) const {
        return percent(outlet_.governing.summary.share_of_length(beyond.length_m));
    }

    void shallow() {
        const PathDoubts& doubts = outlet_.governing.doubts;
        if (doubts.shallow_length.length_m > 0) {
            say("shallow-flow-long",
                "shallow flow runs " + significant(doubts.shallow_length.greatest, 4) +
                    " m without a break, more than 1 000 ft (304.8 m), where it has usually found a channel; see channel_from, or map the channel",
                doubts.shallow_length.greatest, in_metres(longest_shallow_flow), doubts.shallow_length.effect_s);
        }
        if (doubts.shallow_speed.length_m > 0) {
            say("shallow-flow-fast",
                "shallow flow is faster than 3 m/s along " + share(doubts.shallow_speed) + " of the governing path, at most " +
                    significant(doubts.shallow_speed.greatest, 3) + " m/s; its formula was not made for ground so steep or smooth",
                doubts.shallow_speed.greatest, in_metres_per_second(fastest_shallow_flow), doubts.shallow_speed.effect_s);
        }
    }

    void channel() {
        const PathDoubts& doubts = outlet_.governing.doubts;
        if (doubts.channel_speed.length_m > 0) {
            say("channel-fast",
                "channel flow is faster than 5 m/s along " + share(doubts.channel_speed) + " of the governing path, at most " +
                    significant(doubts.channel_speed.greatest, 3) + " m/s; few beds bear that, so look at n and the section",
                doubts.channel_speed.greatest, in_metres_per_second(fastest_channel_flow), doubts.channel_speed.effect_s);
        }
        if (doubts.supercritical.length_m > 0) {
            say("channel-supercritical",
                "channel flow is supercritical along " + share(doubts.supercritical) + " of the governing path, Froude number at most " +
                    significant(doubts.supercritical.greatest, 3) +
                    "; natural channels seldom keep that up, so n is likely too low or the section too large there",
                doubts.supercritical.greatest, 1.0, doubts.supercritical.effect_s);
        }
    }

    void channel_size() {
        const Beyond& small = outlet_.governing.doubts.small_channels;
        if (!(small.length_m > 0)) return;
        say("channel-smaller-than-its-law",
            share(small) + " of the governing path is channel that drains less than the smallest channels its width and depth were made " +
                "from, down to one part in " + significant(small.greatest, 3) + "; state a section there, or a hydraulic_radius",
            small.greatest, 1.0, small.effect_s);
    }

    void head() {
        const double time = outlet_.time_of_concentration_s();
        const double head_s = outlet_.governing.doubts.head_s;
        if (!(head_s > most_head_time * time)) return;
        say("slow-head",
            "the uppermost 5 % of the governing path takes " + percent(head_s / time) + " of its time (" + in_min(head_s) +
                "); look at what grows there and at sheet_limit",
            head_s / time, most_head_time, head_s - most_head_time * time);
    }

    const Outlet& outlet_;
    const Grid& grid_;
    Notices found_;
};

}  // namespace

Notices notices_of(const Outlet& outlet, const Grid& grid) { return Looking(outlet, grid).all(); }

}  // namespace rillclock
