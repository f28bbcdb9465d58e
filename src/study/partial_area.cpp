#include "rillclock/study/partial_area.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

namespace rillclock {
namespace {

double product_of(FixedArea runoff, Intensity intensity) { return from_fixed_area(runoff) * intensity.si(); }

/// Sums of C·A before each bin, and the most within any run of bins.
class MostWithin {
public:
    explicit MostWithin(const ArrivalCurve& curve) : before_(curve.runoff.size() + 1, 0) {
        std::partial_sum(curve.runoff.begin(), curve.runoff.end(), before_.begin() + 1);
    }

    struct Run {
        std::int64_t first = 0;
        FixedArea runoff = 0;
    };
    [[nodiscard]] Run of(std::int64_t bins) const {
        const auto all = static_cast<std::int64_t>(before_.size()) - 1;
        if (bins <= 0) return {};
        if (bins >= all) return {0, before_.back()};
        Run best;
        for (std::int64_t first = 0; first + bins <= all; ++first) {
            const FixedArea within = before_[static_cast<std::size_t>(first + bins)] - before_[static_cast<std::size_t>(first)];
            if (within > best.runoff) best = {first, within};
        }
        return best;
    }
    [[nodiscard]] FixedArea whole() const { return before_.back(); }

private:
    std::vector<FixedArea> before_;
};

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
    Search(const ArrivalCurve& curve, const PartialAreaSearch& asked, BinsInWindow held = {})
        : curve_(curve), asked_(asked), most_(curve), held_(held) {}

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
    void between(std::int64_t first, std::int64_t last) {
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
    // A cell lies up to `spread` widths after its bin's place: so many bins more or fewer could belong to a window, and
    // one more since durations between two whole numbers of bins are not tried.
    peak.least_product = Search(curve, search, {.least = 0, .more = 1 - curve.spread}).best().product;
    peak.greatest_product = Search(curve, search, {.more = 1 + curve.spread}).best().product;
    return peak;
}

std::vector<FixedArea> translated_runoff(const ArrivalCurve& curve, std::size_t rain_bins) {
    std::vector<FixedArea> contributing(curve.runoff.size() + rain_bins, 0);
    for (std::size_t bin = 0; bin < curve.runoff.size(); ++bin) {
        for (std::size_t rain = 0; rain < rain_bins; ++rain) contributing[bin + rain] += curve.runoff[bin];
    }
    return contributing;
}

std::optional<RainWindow> rain_window(const ArrivalCurve& curve, const PartialAreaSearch& search, Duration duration) {
    if (!search.rain(duration)) return std::nullopt;
    return Search(curve, search).window(duration);
}

}  // namespace rillclock
