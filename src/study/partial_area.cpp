#include "rillclock/study/partial_area.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

double product_of(FixedArea runoff, Intensity intensity) { return from_fixed_area(runoff) * intensity.si(); }

using Runoff = std::vector<FixedArea>;

Runoff sums_before(const Runoff& runoff) {
    Runoff before(runoff.size() + 1, 0);
    std::partial_sum(runoff.begin(), runoff.end(), before.begin() + 1);
    return before;
}

/// The most C·A within any run of bins: what has arrived when it ends, by one placing of the land, less what had when it began, by
/// another. Land in its last bins at the end and in its first ones at the beginning counts no more than what must arrive within
/// (and negative where the run is shorter than what is not sure); the other way round, what may.
class MostWithin {
public:
    MostWithin(const Runoff& at_the_beginning, const Runoff& at_the_end, FixedArea whole)
        : begun_(sums_before(at_the_beginning)), ended_(sums_before(at_the_end)), whole_(whole) {}

    struct Run {
        std::int64_t first = 0;
        FixedArea runoff = 0;
    };
    [[nodiscard]] Run of(std::int64_t bins) const {
        const auto all = static_cast<std::int64_t>(ended_.size()) - 1;
        if (bins <= 0) return {};
        if (bins >= all) return {0, whole_};
        Run best;
        for (std::int64_t first = 0; first + bins <= all; ++first) {
            const FixedArea within = ended_[static_cast<std::size_t>(first + bins)] - begun_[static_cast<std::size_t>(first)];
            if (within > best.runoff) best = {first, within};
        }
        return best;
    }
    [[nodiscard]] FixedArea whole() const { return whole_; }

private:
    Runoff begun_;
    Runoff ended_;
    FixedArea whole_;
};

/// Which land counts to a run of bins.
enum class Counted { as_spread, what_must, what_may };

MostWithin most_within(const ArrivalCurve& curve, Counted counted) {
    const FixedArea whole = std::accumulate(curve.runoff.begin(), curve.runoff.end(), FixedArea{0});
    const Runoff& earliest = curve.by_earliest.empty() ? curve.runoff : curve.by_earliest;
    const Runoff& latest = curve.by_latest.empty() ? curve.runoff : curve.by_latest;
    switch (counted) {
        case Counted::as_spread: return {curve.runoff, curve.runoff, whole};
        case Counted::what_must: return {earliest, latest, whole};
        case Counted::what_may: return {latest, earliest, whole};
    }
    throw bug("land that counts in no known way");
}

/// How many bins a window of a duration holds.
struct BinsInWindow {
    std::int64_t least = 1;
    std::int64_t more = 0;  ///< beside those that fit

    [[nodiscard]] std::int64_t operator()(Duration duration, Duration bin) const {
        return std::max(least, static_cast<std::int64_t>(std::floor(duration / bin)) + more);
    }
};

/// Tries durations of whole numbers of bins.
class Search {
public:
    Search(const ArrivalCurve& curve, const PartialAreaSearch& asked, Counted counted = Counted::as_spread, BinsInWindow held = {})
        : curve_(curve), asked_(asked), most_(most_within(curve, counted)), held_(held) {}

    [[nodiscard]] RainWindow window(Duration duration) const {
        if (duration >= asked_.whole_time) return whole(duration);
        const std::int64_t bins = held_(duration, curve_.bin);
        const MostWithin::Run run = most_.of(bins);
        return made(duration, run, bins);
    }
    [[nodiscard]] RainWindow whole(Duration duration) const {
        const auto all = static_cast<std::int64_t>(curve_.runoff.size());
        return made(duration, {0, most_.whole()}, all);
    }

    [[nodiscard]] RainWindow best() {
        const Duration longest = std::max(asked_.whole_time, asked_.least_time);
        best_ = whole(longest);
        if (asked_.least_time < asked_.whole_time) {
            offer(window(asked_.least_time));
            const auto first = static_cast<std::int64_t>(std::floor(asked_.least_time / curve_.bin)) + 1;
            const auto last = static_cast<std::int64_t>(std::ceil(asked_.whole_time / curve_.bin)) - 1;
            if (first <= last) between(first, last);
        }
        return best_;
    }

private:
    [[nodiscard]] Intensity intensity(Duration duration) const {
        return asked_.rain(duration).value_or(Intensity{});
    }
    [[nodiscard]] RainWindow made(Duration duration, MostWithin::Run run, std::int64_t bins) const {
        return {.duration = duration, .first_bin = curve_.first_bin + run.first, .bins = bins, .runoff = run.runoff,
                .product = product_of(run.runoff, intensity(duration))};
    }
    void offer(const RainWindow& tried) {
        const bool better = tried.product > best_.product;
        const bool equal_and_longer = tried.product == best_.product && tried.duration > best_.duration;
        if (better || equal_and_longer) best_ = tried;
    }

    /// Looks among the durations of `first` to `last` bins. No recursion deeper than the number of halvings.
    void between(std::int64_t first, std::int64_t last) {   // NOLINT(misc-no-recursion)
        const RainWindow shortest = window(curve_.bin * static_cast<double>(first));
        const RainWindow longest = window(curve_.bin * static_cast<double>(last));
        offer(shortest);
        offer(longest);
        if (last - first < 2) return;
        if (product_of(longest.runoff, intensity(shortest.duration)) < best_.product) return;
        const std::int64_t middle = first + (last - first) / 2;
        between(first, middle);
        between(middle, last);
    }

    const ArrivalCurve& curve_;
    const PartialAreaSearch& asked_;
    MostWithin most_;
    BinsInWindow held_;
    RainWindow best_;
};

}  // namespace

std::optional<PartialPeak> partial_peak(const ArrivalCurve& curve, const PartialAreaSearch& search) {
    const Duration longest = std::max(search.whole_time, search.least_time);
    if (!search.rain(longest) || curve.runoff.empty()) return std::nullopt;
    Search as_binned(curve, search);
    PartialPeak peak{.best = as_binned.best(), .whole = as_binned.whole(longest)};
    // C·A of each bin is rounded to a square centimetre, so that sums over other bins may miss `best` by some of these.
    peak.least_product = std::min(peak.best.product, Search(curve, search, Counted::what_must, {.least = 0}).best().product);
    // A stretch that does not begin with a bin touches one more, and one of up to a bin longer, which is not tried, another.
    peak.greatest_product = std::max(peak.best.product, Search(curve, search, Counted::what_may, {.more = 2}).best().product);
    return peak;
}

std::optional<RainWindow> rain_window(const ArrivalCurve& curve, const PartialAreaSearch& search, Duration duration) {
    if (!search.rain(duration)) return std::nullopt;
    return Search(curve, search).window(duration);
}

}  // namespace rillclock
