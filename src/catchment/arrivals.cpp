#include "rillclock/catchment/arrivals.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

bool exceeds_in_both(const StepTime& a, const StepTime& b) { return a.fixed >= b.fixed && a.storm >= b.storm; }

/// The one to keep as the cell of greatest flow distance.
Cell farther_of(const TravelField& field, Cell a, Cell b) {
    if (a == no_cell || b == no_cell) return a == no_cell ? b : a;
    const FixedLength da = field.flow_distance[a];
    const FixedLength db = field.flow_distance[b];
    if (da != db) return da > db ? a : b;
    return std::min(a, b);
}

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

void ArrivalBins::put(std::int64_t key, const Bin& bin, double storm_factor) {
    const auto [at, is_new] = bins_.try_emplace(key, bin);
    if (is_new) return;
    at->second.area += bin.area;
    if (arrives_later(bin.last, at->second.last, storm_factor)) at->second.last = bin.last;
}

void ArrivalBins::add(const Head& head, FixedArea area, double storm_factor) {
    const auto key = static_cast<std::int64_t>(std::floor(in_seconds(head.time.under(storm_factor))));
    put(key, {area, head}, storm_factor);
}

void ArrivalBins::take(ArrivalBins&& other, double storm_factor) {
    // The larger map stays where it is, so that a long chain of points costs little.
    if (other.bins_.size() > bins_.size()) std::swap(bins_, other.bins_);
    for (const auto& [key, bin] : other.bins_) put(key, bin, storm_factor);
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

std::vector<Arrivals> arrivals_by_subarea(const ArrivalInputs& in) {
    std::vector<Arrivals> subareas(in.tree.next.size());
    const FlowForest& forest = in.travel.forest;
    for (const Cell cell : forest.order()) {
        const PointNumber owner = in.tree.owner[cell];
        if (owner == 0) continue;
        Arrivals& subarea = subareas[owner - 1];
        const FixedArea area = in.travel.ground.cell_area(forest.row(cell));
        const Head head{cell, in.field.time_to_root(cell)};
        subarea.area += area;
        subarea.border_cells += is_border(in.travel.elevations, {forest.row(cell), cell % forest.columns()}) ? 1 : 0;
        subarea.farthest = farther_of(in.field, subarea.farthest, cell);
        subarea.front.add(head);
        subarea.bins.add(head, area, in.storm_factor);
    }
    return subareas;
}

void merge(Arrivals& into, Arrivals&& from, const ArrivalInputs& in) {
    into.area += from.area;
    into.border_cells += from.border_cells;
    into.farthest = farther_of(in.field, into.farthest, from.farthest);
    into.front.add(from.front);
    into.bins.take(std::move(from.bins), in.storm_factor);
}

}  // namespace rillclock
