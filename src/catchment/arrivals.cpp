#include "rillclock/catchment/arrivals.hpp"

#include <algorithm>
#include <utility>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

bool exceeds_in_both(const StepTime& a, const StepTime& b) { return a.fixed >= b.fixed && a.storm >= b.storm; }

}  // namespace

void Front::add(const Head& head) {
    for (const Head& kept : heads_) {
        const bool takes_its_place = kept.time == head.time && head.cell < kept.cell;
        if (!takes_its_place && exceeds_in_both(kept.time, head.time)) return;
    }
    std::erase_if(heads_, [&](const Head& kept) { return exceeds_in_both(head.time, kept.time); });
    const auto place = std::lower_bound(heads_.begin(), heads_.end(), head.cell, [](const Head& kept, Cell cell) { return kept.cell < cell; });
    heads_.insert(place, head);
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
    ground.add(other.ground);
    bins.take(std::move(other.bins), storm_factor);
    storm_bins.take(std::move(other.storm_bins), storm_factor);
}

}  // namespace rillclock
