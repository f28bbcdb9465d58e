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

/// What is stated of an own time, or follows from the sheet flow that is stated.
std::optional<StepTime> stated_own_time(const PointEdit& edit) {
    if (edit.stated == nullptr) return std::nullopt;
    if (edit.stated->time) return StepTime{.fixed = to_fixed(in_seconds(*edit.stated->time))};
    return edit.stated->restated;
}

/// The last arrival of a subarea after its point's cell.
FixedTime own_time_of(const Outlet& outlet, double storm_factor) {
    const FixedTime here = fixed_under(outlet.time_to_root, storm_factor);
    FixedTime latest = here;
    for (const Head& head : outlet.own_front.heads()) latest = std::max(latest, fixed_under(head.time, storm_factor));
    return latest - here;
}

StepTime part_of(const StepTime& time, double share) {
    return {.fixed = nearest_whole(share * static_cast<double>(time.fixed)), .storm = nearest_whole(share * static_cast<double>(time.storm))};
}

/// Stretches a bin as the own time is: land that arrived at a share of the own time, under the storm that times are binned for,
/// arrives at that share of the stated one.
void stretch(HistogramEntry& entry, const Outlet& outlet, const HistogramRules& rules, const StepTime& stated) {
    const FixedTime own = own_time_of(outlet, rules.storm_factor);
    const FixedTime begins = (FixedTime{entry.storm_bin} + entry.fixed_bin) * rules.bin - fixed_under(outlet.time_to_root, rules.storm_factor);
    const FixedTime ends = begins + (rules.storms == Storms::one ? 1 : 2) * rules.bin;  // each part of a time has a bin of its own
    const auto stated_at = [&](FixedTime after) {
        return part_of(stated, own > 0 ? std::clamp(static_cast<double>(after) / static_cast<double>(own), 0.0, 1.0) : 1.0);
    };
    entry.storm_bin = 0;
    entry.fixed_bin = 0;
    entry.shift = outlet.time_to_root + stated_at(begins);
    entry.width = stated_at(ends) - stated_at(begins);
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
    const std::optional<StepTime> time = stated_own_time(edit);
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
    double plain_m2 = 0.0;
    double runoff_m2 = 0.0;
    double uncapped_m2 = 0.0;
    for (const auto& [kind, area] : land) {
        const double factor = coefficients.factor(kind, period);
        made.frequency_factor = factor == 1.0 ? made.frequency_factor : factor;
        const double c = coefficients.of(kind, period).value.value();
        area_m2 += from_fixed_area(area);
        plain_m2 += from_fixed_area(area) * c;
        runoff_m2 += from_fixed_area(area) * coefficients.capped(kind, period);
        uncapped_m2 += from_fixed_area(area) * factor * c;
        made.greatest = std::max(made.greatest, factor * c);
    }
    made.plain = plain_m2 / area_m2;
    made.value = runoff_m2 / area_m2;
    made.uncapped = uncapped_m2 / area_m2;
    made.runoff = to_fixed_area(runoff_m2);
    return made;
}

ArrivalSpan BinPlacing::span(const HistogramEntry& entry) const {
    // Times are sums of parts rounded one by one: a unit or two apart from what was rounded as a whole.
    const FixedTime rounding = entry.shift.storm != 0 || entry.width != StepTime{} ? 2 : 0;
    const FixedTime shift = fixed_under(entry.shift, storm_factor_);
    if (entry.width != StepTime{}) return {shift - rounding, shift + fixed_under(entry.width, storm_factor_) + rounding + 1};
    const FixedTime fixed = FixedTime{entry.fixed_bin} * rules_.bin + shift;
    if (rules_.storms == Storms::one) return {fixed - rounding, fixed + rules_.bin + rounding};
    const ArrivalSpan storm = storm_part(entry.storm_bin);
    return {fixed + storm.from - rounding, fixed + rules_.bin + storm.to + rounding};
}

ArrivalSpan BinPlacing::storm_part(std::int32_t storm_bin) const {
    const FixedTime from = FixedTime{storm_bin} * rules_.bin;
    const FixedTime last = from + rules_.bin - 1;
    if (storm_factor_ == rules_.storm_factor) return {from, last};
    // Both times are rounded to a unit: what was binned stands for half a unit more or less.
    const double ratio = storm_factor_ / rules_.storm_factor;
    return {std::max<FixedTime>(0, static_cast<FixedTime>(std::floor((static_cast<double>(from) - 0.5) * ratio - 0.5))),
            static_cast<FixedTime>(std::ceil((static_cast<double>(last) + 0.5) * ratio + 0.5))};
}

BinnedLand::BinnedLand(const ArrivalHistogram& histogram, const BinPlacing& placing) : width_(seconds(from_fixed(placing.width()))) {
    if (histogram.entries().empty()) return;
    std::int64_t last = std::numeric_limits<std::int64_t>::min();
    first_ = std::numeric_limits<std::int64_t>::max();
    for (const auto& [kind, area] : land_areas(histogram)) kinds_.push_back(kind);
    for (const HistogramEntry& entry : histogram.entries()) {
        const BinRange bins = placing.bins(entry);
        first_ = std::min(first_, bins.first);
        last = std::max(last, bins.last);
        is_sure_ = is_sure_ && bins.first == bins.last;
    }
    bins_ = static_cast<std::size_t>(last - first_ + 1);
    areas_.assign(bins_ * kinds_.size(), 0);
    if (!is_sure_) by_earliest_ = by_latest_ = areas_;
    for (const HistogramEntry& entry : histogram.entries()) put(entry, placing);
}

void BinnedLand::put(const HistogramEntry& entry, const BinPlacing& placing) {
    const auto kind = static_cast<std::size_t>(std::lower_bound(kinds_.begin(), kinds_.end(), entry.kind) - kinds_.begin());
    const auto place = [&](std::int64_t bin) { return static_cast<std::size_t>(bin - first_) * kinds_.size() + kind; };
    placing.share_out(entry, [&](std::int64_t bin, FixedArea area) { areas_[place(bin)] += area; });
    if (is_sure_) return;
    const BinRange bins = placing.bins(entry);
    by_earliest_[place(bins.first)] += entry.area;
    by_latest_[place(bins.last)] += entry.area;
}

ArrivalCurve BinnedLand::curve(Coefficients& coefficients, std::size_t period) const {
    std::vector<double> c;
    for (const LandKind& kind : kinds_) c.push_back(coefficients.capped(kind, period));
    const auto runoff_of = [&](const std::vector<FixedArea>& areas) {
        std::vector<FixedArea> made(areas.empty() ? 0 : bins_);
        for (std::size_t bin = 0; bin < made.size(); ++bin) {
            double runoff = 0.0;
            for (std::size_t kind = 0; kind < kinds_.size(); ++kind) {
                runoff += c[kind] * static_cast<double>(areas[bin * kinds_.size() + kind]);
            }
            made[bin] = nearest_whole(runoff);
        }
        return made;
    };
    return {.first_bin = first_, .runoff = runoff_of(areas_), .bin = width_, .by_earliest = runoff_of(by_earliest_), .by_latest = runoff_of(by_latest_)};
}

}  // namespace rillclock
