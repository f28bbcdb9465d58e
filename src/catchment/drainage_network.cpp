#include "rillclock/catchment/drainage_network.hpp"

#include <algorithm>
#include <tuple>
#include <utility>

namespace rillclock {
namespace {

std::vector<Node> next_nodes(const std::vector<NetworkPoint>& points) {
    std::vector<Node> next;
    next.reserve(points.size());
    for (const NetworkPoint& point : points) next.push_back(point.next == 0 ? nowhere : point.next - 1);
    return next;
}

/// The slacks, and what stands out among the arrivals.
void settle_last(PointArrivals& at) {
    const auto last = std::max_element(at.subareas.begin(), at.subareas.end(), [](const auto& a, const auto& b) {
        return a.arrival() < b.arrival();  // of equal ones the first, which has the smaller number
    });
    at.time = last->arrival();
    at.last = last->subarea;
    for (SubareaArrival& subarea : at.subareas) {
        subarea.slack = at.time - subarea.arrival();
        if (subarea.subarea != at.last) at.lead = std::min(at.lead.value_or(subarea.slack), subarea.slack);
    }
}

}  // namespace

FixedTime fixed_under(const StepTime& time, double storm_factor) {
    return nearest_whole(static_cast<double>(time.storm) * storm_factor) + time.fixed;
}

DrainageNetwork::DrainageNetwork(std::vector<NetworkPoint> points)
    : points_(std::move(points)), tree_(next_nodes(points_)), shifts_(points_.size()) {
    const std::vector<Node> upstream_first = tree_.upstream_first();
    for (auto node = upstream_first.rbegin(); node != upstream_first.rend(); ++node) {
        const NetworkPoint& point = points_[*node];
        if (point.next == 0) continue;
        const StepTime ground_way = point.to_root - points_[point.next - 1].to_root;
        shifts_[*node] = shift(point.next) + point.stated_way.value_or(ground_way) - ground_way;
    }
}

std::vector<PointNumber> DrainageNetwork::above(PointNumber number) const {
    std::vector<PointNumber> numbers;
    for (const Node node : tree_.above(number - 1)) numbers.push_back(node + 1);
    std::sort(numbers.begin(), numbers.end());
    return numbers;
}

std::vector<PointNumber> DrainageNetwork::way(PointNumber from, PointNumber to) const {
    std::vector<PointNumber> numbers;
    for (const Node node : tree_.way(from - 1, to - 1)) numbers.push_back(node + 1);
    return numbers;
}

StepTime DrainageNetwork::way_time(PointNumber number) const {
    const PointNumber next = next_of(number);
    return next == 0 ? StepTime{} : to_root(number) - to_root(next);
}

FixedTime DrainageNetwork::own_time(PointNumber number, double storm_factor) const {
    const FixedTime from_point = fixed_under(to_root(number), storm_factor);
    FixedTime latest = from_point;
    for (const Head& head : points_[number - 1].own.heads()) {
        latest = std::max(latest, fixed_under(head.time + shift(number), storm_factor));
    }
    return latest - from_point;
}

PointArrivals DrainageNetwork::arrivals_at(PointNumber number, double storm_factor) const {
    const FixedTime here = fixed_under(to_root(number), storm_factor);
    PointArrivals at;
    for (const PointNumber subarea : above(number)) {
        at.subareas.push_back({.subarea = subarea,
                               .own = own_time(subarea, storm_factor),
                               .way = fixed_under(to_root(subarea), storm_factor) - here});
    }
    settle_last(at);
    return at;
}

std::vector<SubareaArrival> least_slacks(const PointArrivals& arrivals, std::size_t most) {
    std::vector<SubareaArrival> sorted = arrivals.subareas;
    const std::size_t kept = std::min(sorted.size(), most + 1);
    std::partial_sort(sorted.begin(), sorted.begin() + static_cast<std::ptrdiff_t>(kept), sorted.end(),
                      [](const SubareaArrival& a, const SubareaArrival& b) {
                          return std::tie(a.slack, a.subarea) < std::tie(b.slack, b.subarea);
                      });
    sorted.resize(kept);
    return sorted;
}

}  // namespace rillclock
