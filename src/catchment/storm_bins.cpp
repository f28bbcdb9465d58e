#include "rillclock/catchment/storm_bins.hpp"

#include <utility>
#include <vector>

namespace rillclock {

void StormBins::add(const Head& head, FixedArea area, double reference_factor) {
    const Key key{ArrivalBins::second_of({.fixed = 0, .storm = head.time.storm}, reference_factor),
                  ArrivalBins::second_of({.fixed = head.time.fixed, .storm = 0}, reference_factor)};
    add(key, {area, head}, reference_factor);
}

void StormBins::add(const Key& key, const Bin& bin, double reference_factor) {
    const auto [at, is_new] = bins_.try_emplace(key, bin);
    if (is_new) return;
    at->second.area += bin.area;
    if (arrives_later(bin.last, at->second.last, reference_factor)) at->second.last = bin.last;
}

void StormBins::take(StormBins&& other, double reference_factor) {
    // The larger one stays where it is, so that a long chain of points costs little.
    if (other.bins_.size() > bins_.size()) std::swap(bins_, other.bins_);
    for (const auto& [key, bin] : other.bins_) add(key, bin, reference_factor);
}

ArrivalBins StormBins::under(double storm_factor) const {
    std::vector<ArrivalBins::Bin> by_second;
    by_second.reserve(bins_.size());
    for (const auto& [key, bin] : bins_) {
        by_second.push_back({ArrivalBins::second_of(bin.last.time, storm_factor), bin.area, bin.last});
    }
    ArrivalBins arrivals;
    arrivals.add(std::move(by_second), storm_factor);
    return arrivals;
}

}  // namespace rillclock
