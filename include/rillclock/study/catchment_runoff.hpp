#pragma once

#include <map>
#include <optional>
#include <span>
#include <string>
#include <utility>
#include <vector>

#include "rillclock/catchment/arrival_histogram.hpp"
#include "rillclock/study/edited_network.hpp"
#include "rillclock/study/partial_area.hpp"
#include "rillclock/study/study.hpp"

namespace rillclock {

/// The coefficient of a catchment at one return period.
struct CompositeCoefficient {
    double frequency_factor = 1.0;   ///< 1 where it acts on none of the land
    double plain = 0.0;              ///< Σ C·A / Σ A, before any factor
    double value = 0.0;              ///< Σ min(1, Cf·C)·A / Σ A
    double uncapped = 0.0;           ///< Σ Cf·C·A / Σ A
    double greatest = 0.0;           ///< of any kind of its land: Cf·C, before it is cut to 1
    FixedArea runoff = 0;            ///< C·A, in cm²
};

/// Coefficients of every kind of land at every return period, each looked up once.
class Coefficients {
public:
    /// `stated`: coefficients that overrides state, as `stated_coefficients` gives them.
    Coefficients(const CoverBook& book, const PeakStudy& rules, std::vector<double> periods, std::vector<double> stated = {})
        : book_(book),
          source_(rules.coefficient.value_or(CoefficientSource::book)),
          factors_(rules.frequency_factors.value_or(FrequencyFactors::wright_mclaughlin)),
          periods_(std::move(periods)),
          stated_(std::move(stated)) {}

    /// C without any factor.
    [[nodiscard]] const KindCoefficient& of(const LandKind& kind, std::size_t period);
    /// Cf, where it acts on that kind.
    [[nodiscard]] double factor(const LandKind& kind, std::size_t period);
    /// The smaller of 1 and Cf·C. There must be a C.
    [[nodiscard]] double capped(const LandKind& kind, std::size_t period);
    /// The factor of a return period, by its place among those of the study.
    [[nodiscard]] double frequency_factor(std::size_t period) const;

private:
    const CoverBook& book_;
    CoefficientSource source_;
    FrequencyFactors factors_;
    std::vector<double> periods_;
    std::vector<double> stated_;
    std::map<std::pair<LandKind, std::size_t>, KindCoefficient> known_;
};

/// Areas by kind of land.
using LandAreas = std::map<LandKind, FixedArea>;
/// The area of each kind of land, whenever it arrives.
[[nodiscard]] LandAreas land_areas(const ArrivalHistogram& histogram);

/// The different coefficients that overrides state, ascending. Land that has one is of a kind beyond the classes of the book. Throws an
/// input error where kinds run out.
[[nodiscard]] std::vector<double> stated_coefficients(std::span<const PointEdit> edits, const CoverBook& book);
/// The land of a subarea, all of it with the coefficient that is stated of its point, where one is.
[[nodiscard]] LandAreas with_stated_coefficient(LandAreas land, const PointEdit& edit, const CoverBook& book, std::span<const double> stated);

/// What a histogram becomes by what is stated of its point: arrivals stretched evenly to a stated time, land of a stated coefficient. A
/// cell that arrived at some share of the own time, under the storm of `rules`, arrives at that share of the stated time, which is that of
/// each storm where a stated sheet flow makes it.
[[nodiscard]] ArrivalHistogram edited_histogram(const ArrivalHistogram& own, const PointEdit& edit, const Outlet& outlet,
                                                const HistogramRules& rules, const CoverBook& book, std::span<const double> stated);

/// Why the land has no coefficient; empty where it has.
[[nodiscard]] std::string lacking_coefficient(const LandAreas& land, Coefficients& coefficients, std::size_t period);
/// Every kind must have a coefficient. C·A is rounded to a square centimetre once.
[[nodiscard]] CompositeCoefficient composite_of(const LandAreas& land, Coefficients& coefficients, std::size_t period);

/// Times of arrival from one up to, but not at, another, counted from the root.
struct ArrivalSpan {
    FixedTime from = 0;
    FixedTime to = 0;
};

/// Bins from one to another, both included.
struct BinRange {
    std::int64_t first = 0;
    std::int64_t last = 0;
};

/// Puts entries of histograms into the bins of a point's own storm.
///
/// An entry says of its land no more than a span of arrivals. It is one bin wide under one storm where nothing is stated; the storm part
/// of a time, a stated way and a stretched bin make it lie across several. Land is spread evenly over its span, and may arrive anywhere in it.
class BinPlacing {
public:
    BinPlacing(const HistogramRules& rules, double storm_factor) : rules_(rules), storm_factor_(storm_factor) {}

    /// Within which all land of an entry arrives.
    [[nodiscard]] ArrivalSpan span(const HistogramEntry& entry) const;
    /// The bins that the span touches, counted from the root.
    [[nodiscard]] BinRange bins(const HistogramEntry& entry) const {
        const ArrivalSpan arrives = span(entry);
        return {bin_of(arrives.from, rules_.bin), bin_of(arrives.to - 1, rules_.bin)};
    }
    /// Calls `take(bin, area)` for each of these bins; the areas sum up to the entry's.
    template <typename Take>
    void share_out(const HistogramEntry& entry, Take take) const;
    [[nodiscard]] FixedTime width() const { return rules_.bin; }

private:
    /// What the point's storm makes of the storm part of a time, the last time included.
    [[nodiscard]] ArrivalSpan storm_part(std::int32_t storm_bin) const;

    HistogramRules rules_;
    double storm_factor_;
};

template <typename Take>
void BinPlacing::share_out(const HistogramEntry& entry, Take take) const {
    const ArrivalSpan arrives = span(entry);
    const BinRange touched = bins(entry);
    FixedArea given = 0;
    for (std::int64_t bin = touched.first; bin < touched.last; ++bin) {
        const auto passed = static_cast<double>((bin + 1) * rules_.bin - arrives.from);
        const FixedArea until = nearest_whole(passed / static_cast<double>(arrives.to - arrives.from) * static_cast<double>(entry.area));
        take(bin, until - given);
        given = until;
    }
    take(touched.last, entry.area - given);
}

/// Land by bin and kind under one storm, from which C·A by bin follows for any return period.
class BinnedLand {
public:
    BinnedLand(const ArrivalHistogram& histogram, const BinPlacing& placing);
    /// C·A by time of arrival under a return period, by its place.
    [[nodiscard]] ArrivalCurve curve(Coefficients& coefficients, std::size_t period) const;

private:
    void put(const HistogramEntry& entry, const BinPlacing& placing);

    std::int64_t first_ = 0;
    std::size_t bins_ = 0;
    Duration width_;
    bool is_sure_ = true;           ///< whether each entry lies within one bin
    std::vector<LandKind> kinds_;
    std::vector<FixedArea> areas_;  ///< bins × kinds
    std::vector<FixedArea> by_earliest_;  ///< the same, all land in the first bin it may arrive in; empty if that is sure
    std::vector<FixedArea> by_latest_;    ///< and in the last
};

}  // namespace rillclock
