#include "rillclock/catchment/arrival_bins.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

namespace rillclock {
namespace {

bool is_earlier(const ArrivalBins::Bin& a, const ArrivalBins::Bin& b) { return a.second < b.second; }

void put_into(const ArrivalBins::Bin& bin, ArrivalBins::Bin& into, double storm_factor) {
    into.area += bin.area;
    if (arrives_later(bin.last, into.last, storm_factor)) into.last = bin.last;
}

/// Sorts bins by second; those of one second become one.
void sort_and_join(std::vector<ArrivalBins::Bin>& bins, double storm_factor) {
    std::sort(bins.begin(), bins.end(), is_earlier);
    std::size_t kept = 0;
    for (std::size_t i = 1; i < bins.size(); ++i) {
        if (bins[i].second == bins[kept].second) put_into(bins[i], bins[kept], storm_factor);
        else bins[++kept] = bins[i];
    }
    if (!bins.empty()) bins.resize(kept + 1);
}

/// The first bin from `at` on that is not before a second: it mostly lies near, so steps begin small and double.
template <class At>
At seek(At at, At end, std::int64_t second) {
    std::ptrdiff_t step = 1;
    while (step <= end - at && (at + step - 1)->second < second) {
        at += step;
        step *= 2;
    }
    const At last = at + std::min(step - 1, end - at);
    return std::lower_bound(at, last, second, [](const ArrivalBins::Bin& bin, std::int64_t s) { return bin.second < s; });
}

}  // namespace

bool arrives_later(const Head& a, const Head& b, double storm_factor) {
    const double ta = in_seconds(a.time.under(storm_factor));
    const double tb = in_seconds(b.time.under(storm_factor));
    return ta != tb ? ta > tb : a.cell < b.cell;
}

void ArrivalBins::add(const Head& head, FixedArea area, double storm_factor) {
    const Bin bin{second_of(head.time, storm_factor), area, head};
    add_in_order({&bin, 1}, storm_factor);
}

void ArrivalBins::add(std::vector<Bin> bins, double storm_factor) {
    sort_and_join(bins, storm_factor);
    if (!bins_.empty() || !fresh_.empty()) return add_in_order(bins, storm_factor);
    for (const Bin& bin : bins) area_ += bin.area;
    bins_ = std::move(bins);
    storm_factor_ = storm_factor;
}

/// Most seconds are there already as a rule; new ones are put in their places all together, once they are many.
void ArrivalBins::add_in_order(std::span<const Bin> bins, double storm_factor) {
    storm_factor_ = storm_factor;
    auto at = bins_.begin();
    for (const Bin& bin : bins) {
        area_ += bin.area;
        at = seek(at, bins_.end(), bin.second);
        if (at != bins_.end() && at->second == bin.second) put_into(bin, *at, storm_factor);
        else fresh_.push_back(bin);
    }
    constexpr std::size_t few = 32;
    if (fresh_.size() > few && fresh_.size() > bins_.size() / 8) settle();
}

/// Puts the new seconds in their places.
void ArrivalBins::settle() {
    if (fresh_.empty()) return;
    sort_and_join(fresh_, storm_factor_);
    const auto there = static_cast<std::ptrdiff_t>(bins_.size());
    bins_.insert(bins_.end(), fresh_.begin(), fresh_.end());
    std::inplace_merge(bins_.begin(), bins_.begin() + there, bins_.end(), is_earlier);
    fresh_.clear();
}

/// All bins by second, put together in `room` where some are apart.
std::span<const ArrivalBins::Bin> ArrivalBins::in_order(ArrivalBins& room) const {
    if (fresh_.empty()) return bins_;
    room = *this;
    room.settle();
    return room.bins_;
}

std::int64_t ArrivalBins::second_of(const StepTime& time, double storm_factor) {
    return static_cast<std::int64_t>(std::floor(in_seconds(time.under(storm_factor))));
}

void ArrivalBins::take(ArrivalBins&& other, double storm_factor) {
    // The larger array stays where it is, so that a long chain of points costs little.
    if (other.bins_.size() > bins_.size()) std::swap(*this, other);
    other.settle();
    add_in_order(other.bins_, storm_factor);
}

Head ArrivalBins::by_share(double share) const { return by_shares({&share, 1}).front(); }

std::vector<Head> ArrivalBins::by_shares(std::span<const double> shares) const {
    ArrivalBins room;
    const std::span<const Bin> bins = in_order(room);
    std::vector<Head> heads;
    FixedArea arrived = 0;
    for (const Bin& bin : bins) {
        arrived += bin.area;
        while (heads.size() < shares.size() && static_cast<double>(arrived) >= shares[heads.size()] * static_cast<double>(area())) {
            heads.push_back(bin.last);
        }
        if (heads.size() == shares.size()) return heads;
    }
    heads.resize(shares.size(), bins.back().last);
    return heads;
}

Head ArrivalBins::last_without(double share) const {
    const double spared = share * static_cast<double>(area());
    ArrivalBins room;
    const std::span<const Bin> bins = in_order(room);
    FixedArea left_out = 0;
    for (auto bin = bins.rbegin(); bin != bins.rend(); ++bin) {
        left_out += bin->area;
        if (static_cast<double>(left_out) > spared) return bin->last;
    }
    return bins.front().last;
}

}  // namespace rillclock
