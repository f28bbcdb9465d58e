#include "rillclock/catchment/arrivals.hpp"

#include <algorithm>
#include <utility>

#include "rillclock/core/error.hpp"

namespace rillclock {

void Front::take_in(const Head& head) {
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
