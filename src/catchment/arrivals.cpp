#include "rillclock/catchment/arrivals.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

bool exceeds_in_both(const StepTime& a, const StepTime& b) { return a.fixed >= b.fixed && a.storm >= b.storm; }

}  // namespace

bool arrives_later(const Head& a, const Head& b, double storm_factor) {
    const double ta = in_seconds(a.time.under(storm_factor));
    const double tb = in_seconds(b.time.under(storm_factor));
    return ta != tb ? ta > tb : a.cell < b.cell;
}

void Front::add(const Head& head) {
    for (Head& kept : heads_) {
        if (kept.time == head.time) {
            kept.cell = std::min(kept.cell, head.cell);
            return;
        }
        if (exceeds_in_both(kept.time, head.time)) return;
    }
    std::erase_if(heads_, [&](const Head& kept) { return exceeds_in_both(head.time, kept.time); });
    heads_.push_back(head);
}

void Front::add(const Front& other) {
    for (const Head& head : other.heads_) add(head);
}

Head Front::last_to_arrive(double storm_factor) const {
    if (heads_.empty()) throw bug("a catchment without cells was asked for its last arrival");
    return *std::min_element(heads_.begin(), heads_.end(), [&](const Head& a, const Head& b) {
        return arrives_later(a, b, storm_factor);
    });
}

void ArrivalBins::add(std::int64_t second, const Bin& bin, double storm_factor) {
    const auto [at, is_new] = bins_.try_emplace(second, bin);
    if (is_new) return;
    at->second.area += bin.area;
    if (arrives_later(bin.last, at->second.last, storm_factor)) at->second.last = bin.last;
}

std::int64_t ArrivalBins::second_of(const StepTime& time, double storm_factor) {
    return static_cast<std::int64_t>(std::floor(in_seconds(time.under(storm_factor))));
}

void ArrivalBins::add(const Head& head, FixedArea area, double storm_factor) {
    add(second_of(head.time, storm_factor), {area, head}, storm_factor);
}

void ArrivalBins::take(ArrivalBins&& other, double storm_factor) {
    // The larger map stays where it is, so that a long chain of points costs little.
    if (other.bins_.size() > bins_.size()) std::swap(bins_, other.bins_);
    for (const auto& [second, bin] : other.bins_) add(second, bin, storm_factor);
}

FixedArea ArrivalBins::area() const {
    FixedArea sum = 0;
    for (const auto& [key, bin] : bins_) sum += bin.area;
    return sum;
}

Head ArrivalBins::by_share(double share) const {
    const double wanted = share * static_cast<double>(area());
    FixedArea arrived = 0;
    for (const auto& [key, bin] : bins_) {
        arrived += bin.area;
        if (static_cast<double>(arrived) >= wanted) return bin.last;
    }
    return bins_.rbegin()->second.last;
}

Head ArrivalBins::last_without(double share) const {
    const double spared = share * static_cast<double>(area());
    FixedArea left_out = 0;
    for (auto bin = bins_.rbegin(); bin != bins_.rend(); ++bin) {
        left_out += bin->second.area;
        if (static_cast<double>(left_out) > spared) return bin->second.last;
    }
    return bins_.begin()->second.last;
}

void Arrivals::add_farthest(Cell cell, FixedLength distance) {
    const bool is_first = farthest == no_cell;
    if (!is_first && (distance < farthest_distance || (distance == farthest_distance && cell > farthest))) return;
    farthest = cell;
    farthest_distance = distance;
}

void Arrivals::add_unbinned(const ArrivingCell& cell) {
    area += cell.area;
    border_cells += cell.is_border ? 1 : 0;
    add_farthest(cell.head.cell, cell.flow_distance);
    front.add(cell.head);
}

void Arrivals::add(const ArrivingCell& cell, double storm_factor) {
    add_unbinned(cell);
    bins.add(cell.head, cell.area, storm_factor);
}

void Arrivals::add(Arrivals&& other, double storm_factor) {
    if (other.farthest == no_cell) return;
    area += other.area;
    border_cells += other.border_cells;
    add_farthest(other.farthest, other.farthest_distance);
    front.add(other.front);
    bins.take(std::move(other.bins), storm_factor);
}

}  // namespace rillclock
