#include "rillclock/study/catchment_runoff.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <utility>

#include "rillclock/catchment/drainage_network.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {

const KindCoefficient& Coefficients::of(const LandKind& kind, std::size_t period) {
    const auto [at, is_new] = known_.try_emplace({kind, period});
    const std::size_t classes = book_.classes().size();
    if (is_new && kind.cover >= classes) at->second = {.value = stated_[kind.cover - classes]};
    if (is_new && kind.cover < classes) at->second = kind_coefficient(book_, kind, source_, periods_[period]);
    return at->second;
}

double Coefficients::frequency_factor(std::size_t period) const {
    return rillclock::frequency_factor(factors_, periods_[period]);
}

double Coefficients::factor(const LandKind& kind, std::size_t period) {
    return of(kind, period).varies_with_period ? 1.0 : frequency_factor(period);
}

double Coefficients::capped(const LandKind& kind, std::size_t period) {
    return std::min(1.0, factor(kind, period) * of(kind, period).value.value());
}

LandAreas land_areas(const ArrivalHistogram& histogram) {
    LandAreas areas;
    for (const HistogramEntry& entry : histogram.entries()) areas[entry.kind] += entry.area;
    return areas;
}

std::vector<double> stated_coefficients(std::span<const PointEdit> edits, const CoverBook& book) {
    std::vector<double> stated;
    for (const PointEdit& edit : edits) {
        if (edit.stated != nullptr && edit.stated->coefficient) stated.push_back(*edit.stated->coefficient);
    }
    std::sort(stated.begin(), stated.end());
    stated.erase(std::unique(stated.begin(), stated.end()), stated.end());
    if (book.classes().size() + stated.size() > 256)
        throw input_error("the overrides state " + std::to_string(stated.size()) + " different runoff coefficients, more than the " +
                          std::to_string(256 - book.classes().size()) + " that a book of " + std::to_string(book.classes().size()) +
                          " classes leaves room for; round them to two decimals");
    return stated;
}

namespace {

std::optional<LandKind> stated_kind(const PointEdit& edit, const CoverBook& book, std::span<const double> stated) {
    if (edit.stated == nullptr || !edit.stated->coefficient) return std::nullopt;
    const auto place = std::lower_bound(stated.begin(), stated.end(), *edit.stated->coefficient) - stated.begin();
    return LandKind{.cover = static_cast<std::uint8_t>(book.classes().size() + static_cast<std::size_t>(place))};
}

/// What is stated of an own time, or follows from the sheet flow that is stated, under a storm factor.
std::optional<FixedTime> stated_own_time(const PointEdit& edit, double storm_factor) {
    if (edit.stated == nullptr) return std::nullopt;
    if (edit.stated->time) return to_fixed(in_seconds(*edit.stated->time));
    if (edit.stated->restated) return fixed_under(*edit.stated->restated, storm_factor);
    return std::nullopt;
}

/// The last arrival of a subarea after its point's cell.
FixedTime own_time_of(const Outlet& outlet, double storm_factor) {
    const FixedTime here = fixed_under(outlet.time_to_root, storm_factor);
    FixedTime latest = here;
    for (const Head& head : outlet.own_front.heads()) latest = std::max(latest, fixed_under(head.time, storm_factor));
    return latest - here;
}

/// Moves an entry so that its time after the point's cell is stretched as the own time is, under the storm that times are binned for.
void stretch(HistogramEntry& entry, const Outlet& outlet, const HistogramRules& rules, FixedTime stated) {
    const FixedTime here = fixed_under(outlet.time_to_root, rules.storm_factor);
    const FixedTime own = own_time_of(outlet, rules.storm_factor);
    const FixedTime after = std::max<FixedTime>(0, (FixedTime{entry.storm_bin} + entry.fixed_bin) * rules.bin - here);
    const double share = own > 0 ? std::min(1.0, static_cast<double>(after) / static_cast<double>(own)) : 1.0;
    const FixedTime stretched = nearest_whole(share * static_cast<double>(stated));
    const bool one = rules.storms == Storms::one;
    const FixedTime storm_part = fixed_under({.fixed = 0, .storm = outlet.time_to_root.storm}, rules.storm_factor);
    entry.storm_bin = one ? 0 : static_cast<std::int32_t>(bin_of(storm_part, rules.bin));
    entry.fixed_bin = static_cast<std::int32_t>(bin_of((one ? here : outlet.time_to_root.fixed) + stretched, rules.bin));
}

}  // namespace

LandAreas with_stated_coefficient(LandAreas land, const PointEdit& edit, const CoverBook& book, std::span<const double> stated) {
    const std::optional<LandKind> kind = stated_kind(edit, book, stated);
    if (!kind) return land;
    FixedArea all = 0;
    for (const auto& [unused, area] : land) all += area;
    return {{*kind, all}};
}

ArrivalHistogram edited_histogram(const ArrivalHistogram& own, const PointEdit& edit, const Outlet& outlet,
                                  const HistogramRules& rules, const CoverBook& book, std::span<const double> stated) {
    std::vector<HistogramEntry> entries(own.entries().begin(), own.entries().end());
    const std::optional<LandKind> kind = stated_kind(edit, book, stated);
    const std::optional<FixedTime> time = stated_own_time(edit, rules.storm_factor);
    for (HistogramEntry& entry : entries) {
        if (time) stretch(entry, outlet, rules, *time);
        if (kind) entry.kind = *kind;
    }
    return ArrivalHistogram(std::move(entries));
}

std::string lacking_coefficient(const LandAreas& land, Coefficients& coefficients, std::size_t period) {
    for (const auto& [kind, area] : land) {
        const KindCoefficient& found = coefficients.of(kind, period);
        if (!found.value) return found.lacking;
    }
    return {};
}

CompositeCoefficient composite_of(const LandAreas& land, Coefficients& coefficients, std::size_t period) {
    CompositeCoefficient made;
    double area_m2 = 0.0;
    double runoff_m2 = 0.0;
    double uncapped_m2 = 0.0;
    for (const auto& [kind, area] : land) {
        const double factor = coefficients.factor(kind, period);
        made.frequency_factor = factor == 1.0 ? made.frequency_factor : factor;
        area_m2 += from_fixed_area(area);
        runoff_m2 += from_fixed_area(area) * coefficients.capped(kind, period);
        uncapped_m2 += from_fixed_area(area) * factor * coefficients.of(kind, period).value.value();
    }
    made.value = runoff_m2 / area_m2;
    made.uncapped = uncapped_m2 / area_m2;
    made.runoff = to_fixed_area(runoff_m2);
    return made;
}

std::int64_t Placing::bin(const HistogramEntry& entry) const {
    if (rules_.storms == Storms::one && entry.shift == StepTime{}) return entry.fixed_bin;
    const double reference_units = static_cast<double>(entry.storm_bin) * static_cast<double>(rules_.bin);
    const FixedTime storm_part = nearest_whole(reference_units * (storm_factor_ / rules_.storm_factor));
    return bin_of(storm_part + entry.fixed_bin * rules_.bin + fixed_under(entry.shift, storm_factor_), rules_.bin);
}

std::int64_t Placing::spread(const ArrivalHistogram& histogram) const {
    if (rules_.storms == Storms::by_point) {
        return 2 + static_cast<std::int64_t>(std::ceil(storm_factor_ / rules_.storm_factor));
    }
    const auto entries = histogram.entries();
    const bool is_shifted = std::any_of(entries.begin(), entries.end(), [](const HistogramEntry& e) { return e.shift != StepTime{}; });
    return is_shifted ? 2 : 1;
}

BinnedLand::BinnedLand(const ArrivalHistogram& histogram, const Placing& placing)
    : width_(seconds(from_fixed(placing.width()))), spread_(placing.spread(histogram)) {
    std::int64_t last = std::numeric_limits<std::int64_t>::min();
    first_ = std::numeric_limits<std::int64_t>::max();
    for (const auto& [kind, area] : land_areas(histogram)) kinds_.push_back(kind);
    for (const HistogramEntry& entry : histogram.entries()) {
        first_ = std::min(first_, placing.bin(entry));
        last = std::max(last, placing.bin(entry));
    }
    bins_ = histogram.entries().empty() ? 0 : static_cast<std::size_t>(last - first_ + 1);
    areas_.assign(bins_ * kinds_.size(), 0);
    for (const HistogramEntry& entry : histogram.entries()) {
        const auto kind = static_cast<std::size_t>(std::lower_bound(kinds_.begin(), kinds_.end(), entry.kind) - kinds_.begin());
        areas_[static_cast<std::size_t>(placing.bin(entry) - first_) * kinds_.size() + kind] += entry.area;
    }
}

ArrivalCurve BinnedLand::curve(Coefficients& coefficients, std::size_t period) const {
    std::vector<double> c;
    for (const LandKind& kind : kinds_) c.push_back(coefficients.capped(kind, period));
    ArrivalCurve made{.first_bin = first_, .runoff = std::vector<FixedArea>(bins_), .bin = width_, .spread = spread_};
    for (std::size_t bin = 0; bin < bins_; ++bin) {
        double runoff = 0.0;
        for (std::size_t kind = 0; kind < kinds_.size(); ++kind) {
            runoff += c[kind] * static_cast<double>(areas_[bin * kinds_.size() + kind]);
        }
        made.runoff[bin] = nearest_whole(runoff);
    }
    return made;
}

}  // namespace rillclock
