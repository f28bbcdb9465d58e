#include "peak_notices.hpp"

#include <algorithm>

#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/rational.hpp"
#include "rillclock/surface/runoff_coefficients.hpp"

namespace rillclock {
namespace {

std::string area_text(Area area) {
    return significant(in_acres(area), 4) + " ac (" + significant(in_hectares(area), 4) + " ha)";
}

std::string minutes_text(Duration time) { return significant(in_minutes(time), 4) + " min"; }

void tell_area(const Outlet& outlet, FixedArea all, const Study& study, Notices& notices) {
    const Area limit = study.peaks.area_limit.value_or(rational_area_limit);
    const Area area = square_metres(from_fixed_area(all));
    if (!(area > limit)) return;
    notices.push_back({.code = "rational-area",
                       .text = "'" + outlet.point.name + "' drains " + area_text(area) + ", more than the " + area_text(limit) +
                               " up to which the rational method is used; take its peak from a hydrograph method",
                       .point = outlet.point.name,
                       .value = in_acres(area),
                       .threshold = in_acres(limit)});
}

void tell_time(const Outlet& outlet, const std::vector<PointPeak>& peaks, Duration least, Notices& notices) {
    const auto shortest = std::min_element(peaks.begin(), peaks.end(), [](const PointPeak& a, const PointPeak& b) {
        return a.whole_time < b.whole_time;
    });
    if (shortest == peaks.end() || !(shortest->whole_time < least)) return;
    notices.push_back({.code = "time-below-least",
                       .text = "the time of '" + outlet.point.name + "', " + minutes_text(shortest->whole_time) +
                               ", is below the least; its peak is that of rain of " + minutes_text(least),
                       .point = outlet.point.name,
                       .value = in_minutes(shortest->whole_time),
                       .threshold = in_minutes(least),
                       .effect_s = in_seconds(least - shortest->whole_time)});
}

bool has_any(const std::vector<PointPeak>& peaks) {
    return std::any_of(peaks.begin(), peaks.end(), [](const PointPeak& p) { return p.is_there(); });
}

void tell_lacking(const Outlet& outlet, const std::vector<PointPeak>& peaks, Notices& notices) {
    const auto lacking = std::find_if(peaks.begin(), peaks.end(), [](const PointPeak& p) { return !p.is_there(); });
    if (lacking == peaks.end()) return;
    notices.push_back({.code = "no-peak",
                       .text = "'" + outlet.point.name + "' has no peak flow: " + lacking->why_not,
                       .point = outlet.point.name});
}

void tell_coefficient(const Outlet& outlet, const std::vector<PointPeak>& peaks, Notices& notices) {
    for (const PointPeak& peak : peaks) {
        if (!(peak.coefficient.uncapped > peak.coefficient.value * (1 + 1e-12))) continue;
        notices.push_back({.code = "coefficient-cut",
                           .text = "with its frequency factor the runoff coefficient of some land above '" + outlet.point.name +
                                   "' passes 1 and was cut to it; the mean would be " + significant(peak.coefficient.uncapped, 3) +
                                   " instead of " + significant(peak.coefficient.value, 3),
                           .point = outlet.point.name,
                           .value = peak.coefficient.uncapped,
                           .threshold = 1.0});
        return;
    }
}

/// A coefficient of the user's own beside a land use is held against what is printed for that.
void tell_range(const CoverClass& cover, Notices& notices) {
    const LandUse* use = find_land_use(cover.land_use);
    if (use == nullptr) return;
    for (const std::optional<SoilGroup> group : {std::optional<SoilGroup>{}, std::optional(SoilGroup::a), std::optional(SoilGroup::b),
                                                 std::optional(SoilGroup::c), std::optional(SoilGroup::d)}) {
        const std::optional<double> own = cover.coefficient(group);
        if (!own || (*own >= use->least() && *own <= use->greatest())) continue;
        notices.push_back({.code = "coefficient-outside-range",
                           .text = "the runoff coefficient " + significant(*own, 4) + " of " + cover.name + " lies outside the range " +
                                   significant(use->least(), 3) + " to " + significant(use->greatest(), 3) + " printed for " +
                                   std::string(use->name),
                           .value = *own,
                           .threshold = *own < use->least() ? use->least() : use->greatest()});
        return;
    }
}

void tell_periods(const Study& study, const StudyRain& rain, Notices& notices) {
    const FrequencyFactors factors = study.peaks.frequency_factors.value_or(FrequencyFactors::wright_mclaughlin);
    for (const StudyStorm& storm : rain.storms) {
        const bool below_two = factors == FrequencyFactors::wright_mclaughlin && storm.return_period < 2;
        if (is_printed_range(factors, storm.return_period) || below_two) continue;
        notices.push_back({.code = "frequency-factor-not-printed",
                           .text = "no frequency factor is printed for " + significant(storm.return_period, 6) +
                                   " years; that of the nearest printed period was taken",
                           .value = storm.return_period});
    }
}

}  // namespace

Notices peak_notices(const PeakInputs& in, const std::vector<std::vector<PointPeak>>& points) {
    Notices notices;
    const bool any = std::any_of(points.begin(), points.end(), has_any);
    if (!any) notices.push_back({.code = "no-peak", .text = "no point has a peak flow: " + points.front().front().why_not});
    for (std::size_t i = 0; i < points.size(); ++i) {
        if (any) tell_lacking(in.outlets[i], points[i], notices);
        if (!has_any(points[i])) continue;
        tell_coefficient(in.outlets[i], points[i], notices);
        tell_area(in.outlets[i], in.network.points[i].area, in.study, notices);
        tell_time(in.outlets[i], points[i], in.study.peaks.least_time.value_or(standard_least_time), notices);
    }
    if (in.study.peaks.coefficient.value_or(CoefficientSource::book) == CoefficientSource::book) {
        for (const CoverClass& cover : in.book.classes()) tell_range(cover, notices);
    }
    tell_periods(in.study, in.rain, notices);
    return notices;
}

}  // namespace rillclock
