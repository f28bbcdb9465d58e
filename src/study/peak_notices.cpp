#include "peak_notices.hpp"

#include <algorithm>
#include <map>
#include <utility>

#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/rational.hpp"
#include "rillclock/surface/printed_coefficients.hpp"

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

std::string years_text(double return_period) { return significant(return_period, 6) + " years"; }

void tell_time(const Outlet& outlet, const std::vector<PointPeak>& peaks, const PeakInputs& in, Notices& notices) {
    const Duration least = in.study.peaks.least_time.value_or(standard_least_time);
    const auto shortest = std::min_element(peaks.begin(), peaks.end(), [](const PointPeak& a, const PointPeak& b) {
        return a.whole_time < b.whole_time;
    });
    if (shortest == peaks.end() || !(shortest->whole_time < least)) return;
    const double years = in.rain.storms[static_cast<std::size_t>(shortest - peaks.begin())].return_period;
    notices.push_back({.code = "time-below-least",
                       .text = "the time of '" + outlet.point.name + "', " + minutes_text(shortest->whole_time) + " under the storm of " +
                               years_text(years) + ", is below the least; its peak is that of rain of " + minutes_text(least),
                       .point = outlet.point.name,
                       .value = in_minutes(shortest->whole_time),
                       .threshold = in_minutes(least),
                       .return_period = years,
                       .effect_s = in_seconds(least - shortest->whole_time)});
}

bool has_any(const std::vector<PointPeak>& peaks) {
    return std::any_of(peaks.begin(), peaks.end(), [](const PointPeak& p) { return p.is_there(); });
}

void tell_lacking(const Outlet& outlet, const std::vector<PointPeak>& peaks, const StudyRain& rain, Notices& notices) {
    const auto lacking = std::find_if(peaks.begin(), peaks.end(), [](const PointPeak& p) { return !p.is_there(); });
    if (lacking == peaks.end()) return;
    const double years = rain.storms[static_cast<std::size_t>(lacking - peaks.begin())].return_period;
    notices.push_back({.code = "no-peak",
                       .text = "'" + outlet.point.name + "' has no peak flow of " + years_text(years) + ": " + lacking->why_not,
                       .point = outlet.point.name,
                       .return_period = years});
}

/// Two numbers with as many digits as tell them apart, three at least.
std::pair<std::string, std::string> told_apart(double a, double b) {
    constexpr int most_digits = 15;
    int digits = 3;
    while (digits < most_digits && significant(a, digits) == significant(b, digits)) ++digits;
    return {significant(a, digits), significant(b, digits)};
}

/// Of the return period whose factor passes 1 by most.
void tell_coefficient(const Outlet& outlet, const std::vector<PointPeak>& peaks, const StudyRain& rain, Notices& notices) {
    const auto most = std::max_element(peaks.begin(), peaks.end(), [](const PointPeak& a, const PointPeak& b) {
        return a.coefficient.greatest < b.coefficient.greatest;
    });
    if (most == peaks.end() || !(most->coefficient.uncapped > most->coefficient.value * (1 + 1e-12))) return;
    const double years = rain.storms[static_cast<std::size_t>(most - peaks.begin())].return_period;
    const auto [cut, uncut] = told_apart(most->coefficient.value, most->coefficient.uncapped);
    notices.push_back({.code = "coefficient-cut",
                       .text = "with the frequency factor of " + years_text(years) + " the runoff coefficient of some land above '" +
                               outlet.point.name + "' would be " + significant(most->coefficient.greatest, 4) +
                               " and was cut to 1; the mean of its catchment is " + cut + ", and would be " + uncut + " without that",
                       .point = outlet.point.name,
                       .value = most->coefficient.greatest,
                       .threshold = 1.0,
                       .return_period = years});
}

/// A coefficient of the user's own beside a land use is held against what is printed for that.
void tell_range(const CoverClass& cover, Notices& notices) {
    const std::optional<PrintedRange> printed = printed_range(cover.land_use);
    if (!printed) return;
    for (const std::optional<SoilGroup> group : {std::optional<SoilGroup>{}, std::optional(SoilGroup::a), std::optional(SoilGroup::b),
                                                 std::optional(SoilGroup::c), std::optional(SoilGroup::d)}) {
        const std::optional<double> own = cover.coefficient(group);
        if (!own || (*own >= printed->least && *own <= printed->greatest)) continue;
        notices.push_back({.code = "coefficient-outside-range",
                           .text = "the runoff coefficient " + significant(*own, 4) + " of " + cover.name + " lies outside the range " +
                                   significant(printed->least, 3) + " to " + significant(printed->greatest, 3) + " printed for " +
                                   cover.land_use,
                           .value = *own,
                           .threshold = *own < printed->least ? printed->least : printed->greatest});
        return;
    }
}

/// Land that is steeper than the table of its land use is printed for.
void tell_steep(const PeakInputs& in, Notices& notices) {
    std::map<std::uint8_t, FixedArea> steep;
    std::map<std::uint8_t, SlopeBand> printed_to;
    for (const Outlet& outlet : in.outlets) {
        for (const LandShare& share : outlet.own_land.shares()) {
            const CoverClass& cover = in.book.classes()[share.kind.cover];
            const auto found = find_printed_row(cover.land_use);
            if (!found || !found->table->printed_to || cover.coefficient(group_of(share.kind.soil))) continue;
            if (share.kind.slope <= *found->table->printed_to) continue;
            steep[share.kind.cover] += share.area;
            printed_to[share.kind.cover] = *found->table->printed_to;
        }
    }
    for (const auto& [place, area] : steep) {
        const CoverClass& cover = in.book.classes()[place];
        const Area land = square_metres(from_fixed_area(area));
        notices.push_back({.code = "steeper-than-printed",
                           .text = area_text(land) + " of " + cover.name + " are steeper than any slope for which " + cover.land_use +
                                   " is printed; the coefficient of " + words(printed_to[place]) +
                                   " was taken: state c in the cover book where you know better",
                           .value = in_acres(land)});
    }
}

std::string flow_text(Discharge flow, ReportUnits units) {
    switch (units) {
        case ReportUnits::us: return significant(in_cubic_feet_per_second(flow), 3) + " ft3/s";
        case ReportUnits::si: return significant(in_cubic_metres_per_second(flow), 3) + " m3/s";
    }
    return "";
}

/// The peak that comes to the inlet is held against what the pipe takes when just full, however the pipe was timed.
void tell_pipe(const PipeRun& run, const PointPeak& peak, const PeakInputs& in, Notices& notices) {
    if (!peak.is_there() || !(peak.partial > run.capacity)) return;
    const ReportUnits units = in.study.report_units;
    const auto number = units == ReportUnits::us ? in_cubic_feet_per_second : in_cubic_metres_per_second;
    const double years = in.rain.raster_storm().return_period;
    const bool runs_full = !run.design_flow || *run.design_flow > run.capacity;
    notices.push_back({.code = "pipe-too-small",
                       .text = "the pipe from '" + run.pipe->from + "' to '" + run.pipe->to + "' carries " + flow_text(run.capacity, units) +
                               " just full, less than the peak of " + years_text(years) + " that comes to it, " + flow_text(peak.partial, units) +
                               "; " + (runs_full ? "its velocity is that of a full pipe, and " : "") + "what it cannot take is not led elsewhere",
                       .point = run.pipe->from,
                       .value = number(peak.partial),
                       .threshold = number(run.capacity),
                       .return_period = years});
}

void tell_periods(const Study& study, const StudyRain& rain, Notices& notices) {
    const FrequencyFactors factors = study.peaks.frequency_factors.value_or(FrequencyFactors::wright_mclaughlin);
    for (const StudyStorm& storm : rain.storms) {
        const bool below_two = factors == FrequencyFactors::wright_mclaughlin && storm.return_period < 2;
        if (is_printed_range(factors, storm.return_period) || below_two) continue;
        notices.push_back({.code = "frequency-factor-not-printed",
                           .text = "no frequency factor is printed for " + significant(storm.return_period, 6) +
                                   " years; that of the nearest printed period was taken",
                           .value = storm.return_period,
                           .return_period = storm.return_period});
    }
}

}  // namespace

Notices peak_notices(const PeakInputs& in, const std::vector<std::vector<PointPeak>>& points) {
    Notices notices;
    const bool any = std::any_of(points.begin(), points.end(), has_any);
    if (!any) notices.push_back({.code = "no-peak", .text = "no point has a peak flow: " + points.front().front().why_not});
    for (std::size_t i = 0; i < points.size(); ++i) {
        if (any) tell_lacking(in.outlets[i], points[i], in.rain, notices);
        if (!has_any(points[i])) continue;
        tell_coefficient(in.outlets[i], points[i], in.rain, notices);
        tell_area(in.outlets[i], in.network.points[i].area, in.study, notices);
        tell_time(in.outlets[i], points[i], in, notices);
    }
    for (const PipeRun& run : in.network.pipes) tell_pipe(run, points[run.inlet - 1][in.rain.raster], in, notices);
    if (in.study.peaks.coefficient.value_or(CoefficientSource::book) == CoefficientSource::book) {
        for (const CoverClass& cover : in.book.classes()) tell_range(cover, notices);
        tell_steep(in, notices);
    }
    tell_periods(in.study, in.rain, notices);
    return notices;
}

}  // namespace rillclock
