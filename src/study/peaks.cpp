#include "rillclock/study/peaks.hpp"

#include <algorithm>
#include <tuple>
#include <utility>

#include "rillclock/core/number_text.hpp"
#include "rillclock/study/catchment_runoff.hpp"
#include "rillclock/study/handbook_cases.hpp"
#include "rillclock/study/time_area_rows.hpp"
#include "peak_notices.hpp"

namespace rillclock {
namespace {

constexpr std::size_t named_makers = 8;

std::vector<double> storm_periods(const StudyRain& rain) {
    std::vector<double> periods;
    for (const StudyStorm& storm : rain.storms) periods.push_back(storm.return_period);
    return periods;
}

/// Works out all points, from the divides down.
class PeakWork {
public:
    PeakWork(const PeakInputs& in, std::vector<ArrivalHistogram> histograms)
        : in_(in),
          own_(std::move(histograms)),
          stated_(stated_coefficients(in.network.edits, in.book)),
          coefficients_(in.book, in.study.peaks, storm_periods(in.rain), stated_),
          conversion_(in.study.peaks.conversion.value_or(RationalConversion::exact)),
          least_time_(in.study.peaks.least_time.value_or(standard_least_time)) {}

    [[nodiscard]] StudyPeaks work() {
        StudyPeaks made;
        made.points.resize(in_.outlets.size());
        made.land.resize(in_.outlets.size());
        for (std::size_t i = 0; i < own_.size(); ++i) {
            if (in_.network.edits[i].stated != nullptr)
                own_[i] = edited_histogram(own_[i], in_.network.edits[i], in_.outlets[i], in_.binned, in_.book, stated_);
            own_[i].shift_by(graph().shift(static_cast<PointNumber>(i + 1)));
        }
        for (const ArrivalHistogram& own : own_) made.subareas.push_back(runoff_of(own));
        std::vector<ArrivalHistogram> joined = own_;
        for (const PointNumber number : upstream_first()) {
            ArrivalHistogram& catchment = joined[number - 1];  // by now with all that joins from above
            const LandAreas land = land_areas(catchment);
            made.points[number - 1] = peaks_at(number, catchment, land, made.subareas);
            made.land[number - 1] = rows_of(land);
            const PointNumber next = graph().next_of(number);
            if (next != 0) joined[next - 1].add(catchment);
            catchment = {};
        }
        return made;
    }

private:
    [[nodiscard]] const DrainageNetwork& graph() const { return in_.network.network; }
    [[nodiscard]] const NetworkStorm& storm_at(PointNumber number, std::size_t period) const {
        return in_.network.points[number - 1].storms[period];
    }

    [[nodiscard]] std::vector<PointNumber> upstream_first() const {
        std::vector<PointNumber> next;
        for (const Outlet& outlet : in_.outlets) next.push_back(graph().next_of(outlet.number));
        return point_tree(std::move(next)).upstream_first;
    }

    [[nodiscard]] SubareaRunoff runoff_of(const ArrivalHistogram& own) {
        SubareaRunoff made;
        const LandAreas land = land_areas(own);
        for (std::size_t period = 0; period < in_.rain.storms.size(); ++period) {
            if (!lacking_coefficient(land, coefficients_, period).empty()) return {};
            made.coefficients.push_back(composite_of(land, coefficients_, period));
        }
        return made;
    }

    [[nodiscard]] std::vector<RunoffLand> rows_of(const LandAreas& land) {
        const std::size_t periods = in_.rain.storms.size();
        for (std::size_t period = 0; period < periods; ++period) {
            if (!lacking_coefficient(land, coefficients_, period).empty()) return {};
        }
        return runoff_land(land, coefficients_, periods);
    }

    [[nodiscard]] std::vector<PointPeak> peaks_at(PointNumber number, const ArrivalHistogram& catchment, const LandAreas& land,
                                                  const std::vector<SubareaRunoff>& subareas) {
        const Outlet& outlet = in_.outlets[number - 1];
        std::vector<PointPeak> peaks;
        std::optional<BinnedLand> binned;
        for (std::size_t period = 0; period < outlet.storms.size(); ++period) {
            const NetworkStorm& storm = storm_at(number, period);
            const BinPlacing placing(in_.binned, storm.storm_factor);
            const bool same = binned && storm.storm_factor == storm_at(number, period - 1).storm_factor;
            if (!same) binned.emplace(catchment, placing);
            PointPeak peak;
            peak.whole_time = seconds(time_used_s(in_.network, outlet, period));
            peak.why_not = lacking_coefficient(land, coefficients_, period);
            if (peak.is_there()) work_out(peak, {number, period, land, *binned, placing}, subareas);
            peaks.push_back(std::move(peak));
        }
        return peaks;
    }

    struct At {
        PointNumber number;
        std::size_t period;
        const LandAreas& land;
        const BinnedLand& binned;
        const BinPlacing& placing;
    };

    /// The rain of the point's zone.
    [[nodiscard]] IntensityOfDuration rain_of(PointNumber number, std::size_t period) const {
        const std::size_t zone = in_.outlets[number - 1].rain_zone.number;
        return [&curve = in_.rain.storms_of(zone)[period].rain](Duration duration) { return curve.within(duration); };
    }

    void work_out(PointPeak& peak, const At& at, const std::vector<SubareaRunoff>& subareas) {
        const IntensityOfDuration rain = rain_of(at.number, at.period);
        const PartialAreaSearch search{.rain = rain, .least_time = least_time_, .whole_time = peak.whole_time};
        const ArrivalCurve curve = at.binned.curve(coefficients_, at.period);
        const std::optional<PartialPeak> found = partial_peak(curve, search);
        if (!found) {
            peak.is_beyond_rain = true;
            peak.why_not = "the rain ends before " + significant(in_minutes(peak.whole_time), 4) + " min";
            return;
        }
        peak.coefficient = composite_of(at.land, coefficients_, at.period);
        peak.window = found->best;
        peak.whole_intensity = *rain(found->whole.duration);
        peak.peak_intensity = *rain(found->best.duration);
        peak.whole = flow(found->whole.product);
        peak.partial = flow(found->best.product);
        peak.partial_at_least = flow(found->least_product);
        peak.partial_at_most = flow(found->greatest_product);
        const double factor = storm_at(at.number, at.period).storm_factor;
        const FixedTime begins = fixed_under(graph().to_root(at.number), factor);
        peak.rows = time_area_rows(curve, search, peak.window.duration, begins, conversion_);
        share_out(peak, at, subareas, rain);
    }

    /// Of C·A times intensity, in m³/s.
    [[nodiscard]] Discharge flow(double product) const {
        return rational_peak(square_metres(product), Intensity::from_si(1), conversion_);
    }

    /// What each subarea has of the window, and what the handbooks' cases give.
    void share_out(PointPeak& peak, const At& at, const std::vector<SubareaRunoff>& subareas, const IntensityOfDuration& rain) {
        const double factor = storm_at(at.number, at.period).storm_factor;
        const PointArrivals arrivals = graph().arrivals_at(at.number, factor);
        std::vector<SubareaShare> shares;
        std::vector<LumpSubarea> lumps;
        for (const SubareaArrival& arrival : arrivals.subareas) {
            const CompositeCoefficient& c = subareas[arrival.subarea - 1].coefficients[at.period];
            const Within within = within_window(peak.window, own_[arrival.subarea - 1], at);
            shares.push_back({.subarea = arrival.subarea,
                              .of_runoff = ratio(from_fixed_area(c.runoff), from_fixed_area(peak.coefficient.runoff)),
                              .of_window = ratio(within.runoff_m2, from_fixed_area(peak.window.runoff))});
            peak.window_share += within.area_m2;
            lumps.push_back({seconds(from_fixed(arrival.arrival())), c.runoff});
        }
        peak.window_share = ratio(peak.window_share, from_fixed_area(in_.network.points[at.number - 1].area));
        peak.cases = handbook_cases(std::move(lumps), rain, least_time_, conversion_);
        for (const SubareaArrival& listed : storm_at(at.number, at.period).subareas) {
            peak.shares.push_back(*std::lower_bound(shares.begin(), shares.end(), listed.subarea,
                                                    [](const SubareaShare& s, PointNumber number) { return s.subarea < number; }));
        }
        name_makers(peak, std::move(shares));
    }

    struct Within {
        double runoff_m2 = 0.0;
        double area_m2 = 0.0;
    };
    [[nodiscard]] Within within_window(const RainWindow& window, const ArrivalHistogram& own, const At& at) {
        Within within;
        for (const HistogramEntry& entry : own.entries()) {
            FixedArea area = 0;
            at.placing.share_out(entry, [&](std::int64_t bin, FixedArea part) { area += window.holds(bin) ? part : 0; });
            within.runoff_m2 += coefficients_.capped(entry.kind, at.period) * from_fixed_area(area);
            within.area_m2 += from_fixed_area(area);
        }
        return within;
    }

    static double ratio(double part, double whole) { return whole > 0 ? part / whole : 0.0; }

    static void name_makers(PointPeak& peak, std::vector<SubareaShare> shares) {
        std::erase_if(shares, [](const SubareaShare& s) { return !(s.of_window > 0); });
        peak.subareas_in_window = shares.size();
        std::sort(shares.begin(), shares.end(), [](const SubareaShare& a, const SubareaShare& b) {
            return std::tuple(-a.of_window, a.subarea) < std::tuple(-b.of_window, b.subarea);
        });
        shares.resize(std::min(shares.size(), named_makers));
        peak.makers = std::move(shares);
    }

    const PeakInputs& in_;
    std::vector<ArrivalHistogram> own_;
    std::vector<double> stated_;
    Coefficients coefficients_;
    RationalConversion conversion_;
    Duration least_time_;
};

}  // namespace

StudyPeaks study_peaks(const PeakInputs& in, std::vector<ArrivalHistogram> histograms) {
    StudyPeaks made = PeakWork(in, std::move(histograms)).work();
    made.notices = peak_notices(in, made.points);
    return made;
}

bool gives_peaks(const Study& study, const StudyRain& rain, const CoverBook& book) {
    return rain.source && has_coefficients(book, study.peaks.coefficient.value_or(CoefficientSource::book));
}

StudyPeaks no_peaks(const Study& study, const StudyRain& rain) {
    StudyPeaks none;
    if (!rain.source) return none;
    const bool by_book = study.peaks.coefficient.value_or(CoefficientSource::book) == CoefficientSource::book;
    none.notices.push_back({.code = no_peaks_code,
                            .text = std::string("no peak flows were computed, since no class of the cover book has ") +
                                    (by_book ? "a runoff coefficient: give it a column c, c_a to c_d or land_use"
                                             : "an imperviousness: give it a column impervious_percent")});
    return none;
}

HistogramRules histogram_rules(const Study& study, const CoverBook& book, double storm_factor) {
    return {.bin = to_fixed(in_seconds(study.peaks.time_bin.value_or(standard_time_bin))),
            .storm_factor = storm_factor,
            .storms = study.timing.is_kinematic() ? Storms::by_point : Storms::one,
            .by_slope = uses_slope(book, study.peaks.coefficient.value_or(CoefficientSource::book))};
}

}  // namespace rillclock
