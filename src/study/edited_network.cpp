#include "rillclock/study/edited_network.hpp"

#include <unordered_map>
#include <utility>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/graph/downstream_tree.hpp"

namespace rillclock {
namespace {

/// Points by their names.
class Names {
public:
    explicit Names(std::span<const Outlet> outlets) : outlets_(outlets) {
        for (const Outlet& outlet : outlets) ++times_[outlet.point.name];
    }
    [[nodiscard]] PointNumber find(const std::string& name, const std::string& place) const {
        const auto known = times_.find(name);
        if (known == times_.end()) throw input_error(place + " names the point '" + name + "', which is not among the design points" + nearest(name));
        if (known->second > 1) throw input_error(place + " names the point '" + name + "', but several points have that name; give each its own");
        for (const Outlet& outlet : outlets_) {
            if (outlet.point.name == name) return outlet.number;
        }
        throw bug("a point that has a name was not found by it");
    }

private:
    [[nodiscard]] std::string nearest(const std::string& name) const {
        std::vector<std::string_view> names;
        for (const Outlet& outlet : outlets_) names.push_back(outlet.point.name);
        return did_you_mean(name, names);
    }
    std::span<const Outlet> outlets_;
    std::unordered_map<std::string, int> times_;
};

PointNumber next_of(const Outlet& outlet, const PointEdit& edit) { return edit.pipe != nullptr ? edit.piped_to : outlet.next; }

void refuse_circles(std::span<const PointEdit> edits, std::span<const Outlet> outlets) {
    std::vector<Node> next;
    for (std::size_t i = 0; i < outlets.size(); ++i) {
        const PointNumber number = next_of(outlets[i], edits[i]);
        next.push_back(number == 0 ? nowhere : number - 1);
    }
    const auto circle = circle_in(next);
    if (!circle) return;
    std::string names;
    std::string place;
    for (const Node node : *circle) {
        names += outlets[node].point.name + " > ";
        if (edits[node].pipe != nullptr && place.empty()) place = edits[node].pipe->place;
    }
    throw input_error(place + " closes a circle of points, " + names + outlets[circle->front()].point.name + "; lead the pipe to a point below");
}

NetworkPoint edited_point(const Outlet& outlet, const PointEdit& edit, Speed velocity) {
    NetworkPoint point{.next = next_of(outlet, edit), .to_root = outlet.time_to_root, .own = outlet.own_front};
    if (edit.pipe != nullptr) point.stated_way = StepTime{.fixed = to_fixed(in_seconds(edit.pipe->length / velocity))};
    if (edit.stated == nullptr) return point;
    if (edit.stated->way_time) point.stated_way = StepTime{.fixed = to_fixed(in_seconds(*edit.stated->way_time))};
    if (edit.stated->time) {
        const StepTime own{.fixed = to_fixed(in_seconds(*edit.stated->time))};
        point.own = Front();
        point.own.add({.cell = outlet.own_front.heads().front().cell, .time = outlet.time_to_root + own});
    }
    if (edit.stated->restated) {
        point.own = Front();
        point.own.add({.cell = outlet.own_front.heads().front().cell, .time = outlet.time_to_root + *edit.stated->restated});
    }
    return point;
}

}  // namespace

std::vector<PointEdit> point_edits(std::span<const StatedPipe> pipes, std::span<const PointOverride> overrides,
                                   std::span<const Outlet> outlets) {
    const Names names(outlets);
    std::vector<PointEdit> edits(outlets.size());
    for (const StatedPipe& pipe : pipes) {
        PointEdit& edit = edits[names.find(pipe.from, pipe.place) - 1];
        edit.pipe = &pipe;
        edit.piped_to = names.find(pipe.to, pipe.place);
    }
    for (const PointOverride& stated : overrides) {
        const PointNumber number = names.find(stated.point, stated.place);
        edits[number - 1].stated = &stated;
        if (stated.way_time && next_of(outlets[number - 1], edits[number - 1]) == 0)
            throw input_error(stated.place + " states a way_time of '" + stated.point + "', below which there is no point; leave it empty");
    }
    refuse_circles(edits, outlets);
    return edits;
}

Speed pipe_velocity(const StatedPipe& pipe, std::optional<Discharge> flow) {
    const Speed full = full_bore_velocity(pipe.pipe, pipe.bed);
    if (!flow || !(*flow > Discharge{})) return full;
    const std::optional<Length> depth = normal_depth(pipe.pipe, *flow, pipe.bed);
    if (!depth) return full;
    return Speed::from_si(flow->si() / in_square_metres(wetted(pipe.pipe, *depth).flow_area));
}

DrainageNetwork edited_network(std::span<const Outlet> outlets, std::span<const PointEdit> edits, std::span<const Speed> velocities) {
    std::vector<NetworkPoint> points;
    points.reserve(outlets.size());
    for (std::size_t i = 0; i < outlets.size(); ++i) points.push_back(edited_point(outlets[i], edits[i], velocities[i]));
    return DrainageNetwork(std::move(points));
}

bool PointEdit::changes_times() const {
    if (pipe != nullptr) return true;
    return stated != nullptr && (stated->time || stated->way_time || stated->overland.sheet_length || stated->overland.n);
}

std::string marks_of(const PointEdit& edit) {
    std::string text;
    const auto add = [&](const char* what) { text += (text.empty() ? "" : ", ") + std::string(what); };
    if (edit.stated != nullptr && edit.stated->time) add("time");
    if (edit.stated != nullptr && edit.stated->overland.sheet_length) add("sheet length");
    if (edit.stated != nullptr && edit.stated->overland.n) add("n");
    if (edit.stated != nullptr && edit.stated->coefficient) add("C");
    if (edit.stated != nullptr && edit.stated->way_time) add("way");
    if (edit.pipe != nullptr) add("pipe");
    return text;
}

}  // namespace rillclock
