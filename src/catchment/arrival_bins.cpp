#include "rillclock/catchment/arrival_bins.hpp"

#include <cmath>
#include <utility>

namespace rillclock {

bool arrives_later(const Head& a, const Head& b, double storm_factor) {
    const double ta = in_seconds(a.time.under(storm_factor));
    const double tb = in_seconds(b.time.under(storm_factor));
    return ta != tb ? ta > tb : a.cell < b.cell;
}

void ArrivalBins::add(std::int64_t second, const Bin& bin, double storm_factor) {
    area_ += bin.area;
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
    if (other.bins_.size() > bins_.size()) std::swap(*this, other);
    for (const auto& [second, bin] : other.bins_) add(second, bin, storm_factor);
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

}  // namespace rillclock
