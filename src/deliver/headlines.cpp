#include "rillclock/deliver/headlines.hpp"

#include <algorithm>
#include <array>
#include <map>
#include <numeric>
#include <optional>
#include <utility>

#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/report_units.hpp"
#include "rillclock/deliver/uncertainty_tables.hpp"
#include "network_words.hpp"

namespace rillclock {
namespace {

std::string time_text(double s) {
    const double m = s / 60.0;
    return m < 120.0 ? significant(m, 3) + " min" : significant(m / 60.0, 3) + " h";
}

std::string length_text(const StudyResult& result, double m) {
    const ReportScale scale(result.study.report_units);
    return significant(scale.length(m), 4) + " " + scale.length_unit();
}

std::string area_text(const StudyResult& result, FixedArea area) {
    const ReportScale scale(result.study.report_units);
    return significant(scale.area(from_fixed_area(area)), 4) + " " + scale.area_unit();
}

std::string governing_sentence(const StudyResult& result, const Outlet& main) {
    const bool same = main.longest.cells.front() == main.governing.cells.front();
    std::string text = "'" + main.point.name + "' drains " + area_text(result, area_shown(result, main)) + ". Its slowest water arrives after " +
                       time_text(time_shown_s(result, main));
    if (is_stated_felt(result.network, main)) {
        const std::string stated = stated_in_words(result, result.network.points[main.number - 1].stated_above);
        text += " in the network, where pipes or stated figures act" + (stated.empty() ? "" : " (" + stated + ")") +
                ". Over the ground alone it drains " + area_text(result, main.area) + " and the time is " + time_text(main.time_of_concentration_s());
    }
    text += ", along " + length_text(result, from_fixed(main.governing.summary.length)) + " of path";
    if (same) return text + "; that is the longest path too.";
    return text + "; the longest path (" + length_text(result, from_fixed(main.longest.summary.length)) + ") takes only " +
           time_text(main.longest.seconds) + ".";
}

std::string_view in_words(Regime regime) {
    switch (regime) {
        case Regime::none: return "standing still";
        case Regime::sheet: return "sheet flow";
        case Regime::shallow: return "shallow concentrated flow";
        case Regime::channel: return "channel flow";
        case Regime::water: return "crossing of open water";
    }
    return "";
}

std::string makeup_sentence(const StudyResult& result, const Outlet& main) {
    std::array<StepTime, 5> by_regime{};
    for (const Segment& s : main.governing.segments) by_regime[static_cast<std::size_t>(s.regime)] += s.time;
    std::string text;
    for (const Regime regime : {Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        const double s = in_seconds(by_regime[static_cast<std::size_t>(regime)].under(main.storm_factor));
        if (!(s > 0)) continue;
        text += (text.empty() ? "" : ", ") + time_text(s) + " " + std::string(in_words(regime));
    }
    const std::string half = "alf of the area has arrived after " + time_text(main.arrival_s[0]) + ".";
    const std::string which = is_stated_felt(result.network, main) ? "The time over the ground" : "That time";
    return text.empty() ? "H" + half : which + " is made up of " + text + "; h" + half;
}

std::string flow_text(const StudyResult& result, Discharge flow) {
    const ReportScale scale(result.study.report_units);
    return significant(scale.flow(flow), 3) + (result.study.report_units == ReportUnits::us ? " ft3/s" : " m3/s");
}

/// None where the study has no peak for the point.
std::optional<std::string> peak_sentence(const StudyResult& result, const Outlet& main) {
    const PointPeak* of_main = raster_peak(result, main.number);
    if (of_main == nullptr) return std::nullopt;
    const PointPeak& peak = *of_main;
    const std::string begin = "Its peak of " + significant(result.rain.raster_storm().return_period, 6) + " years is " +
                              flow_text(result, peak.partial);
    if (!(peak.partial > peak.whole)) return begin + ", that of the whole area.";
    return begin + ", made by rain of " + time_text(in_seconds(peak.window.duration)) + " on " +
           significant(100.0 * peak.window_share, 3) + " % of the area; the whole area gives " + flow_text(result, peak.whole) + ".";
}

/// The first few names of points, and how many more there are.
std::string names_text(const StudyResult& result, const std::vector<PointNumber>& points) {
    constexpr std::size_t most_named = 4;
    std::string text;
    for (std::size_t i = 0; i < std::min(most_named, points.size()); ++i) text += (i == 0 ? "'" : ", '") + point_name(result, points[i]) + "'";
    return points.size() <= most_named ? text : text + " and " + std::to_string(points.size() - most_named) + " more";
}

std::string of_points(std::size_t some, std::size_t all) { return std::to_string(some) + " of " + std::to_string(all) + " points"; }

/// Why points have no peak of some return period, and how many there are of each.
struct MissingPeaks {
    std::size_t points = 0;                      ///< in all
    std::size_t beyond_rain = 0;                 ///< whose time no duration of the rain reaches
    Duration longest;                            ///< of their times
    std::map<std::string, std::size_t> lacking;  ///< others, by what they lack

    /// The reason of the first return period that lacks a peak counts.
    void add(const std::vector<PointPeak>& periods) {
        const auto missing = std::find_if(periods.begin(), periods.end(), [](const PointPeak& p) { return !p.is_there(); });
        if (missing == periods.end()) return;
        ++points;
        if (!missing->is_beyond_rain) {
            ++lacking[missing->why_not];
            return;
        }
        ++beyond_rain;
        for (const PointPeak& peak : periods) longest = peak.is_beyond_rain ? std::max(longest, peak.whole_time) : longest;
    }
};

std::string reasons_text(const MissingPeaks& missing) {
    constexpr std::size_t most_told = 2;
    std::string text;
    const auto add = [&](std::size_t points, const std::string& why) { text += (text.empty() ? "" : "; ") + ("at " + std::to_string(points)) + " " + why; };
    if (missing.beyond_rain > 0)
        add(missing.beyond_rain, "the rain's durations end before the time of concentration, which is up to " + time_text(in_seconds(missing.longest)));
    std::vector<std::pair<std::string, std::size_t>> lacking(missing.lacking.begin(), missing.lacking.end());
    std::stable_sort(lacking.begin(), lacking.end(), [](const auto& a, const auto& b) { return a.second > b.second; });
    std::size_t others = 0;
    for (std::size_t i = 0; i < lacking.size(); ++i) {
        if (i < most_told) add(lacking[i].second, lacking[i].first);
        else others += lacking[i].second;
    }
    if (others > 0) add(others, "other coefficients are missing");
    return text;
}

/// Where rain by duration is there and some point has no peak.
std::optional<std::string> missing_sentence(const StudyResult& result) {
    if (!result.rain.source) return std::nullopt;
    if (!result.peaks.are_there()) {
        const auto told = std::find_if(result.notices.begin(), result.notices.end(), [](const Notice& n) { return n.code == no_peaks_code; });
        const bool is_told_anyway = told == result.notices.begin();   // it is what needs an eye first
        if (told == result.notices.end() || is_told_anyway) return std::nullopt;
        return told->text;
    }
    MissingPeaks missing;
    for (const Outlet& outlet : result.outlets) missing.add(result.peaks.points[outlet.number - 1]);
    if (missing.points == 0) return std::nullopt;
    return "No peak flow of some or all return periods could be made at " + of_points(missing.points, result.outlets.size()) +
           " (column why_not of tables/peaks.csv): " + reasons_text(missing) + ".";
}

/// Where a part of the area makes more than the whole; the greatest gain first.
std::optional<std::string> partial_sentence(const StudyResult& result) {
    if (!result.peaks.are_there() || result.outlets.size() < 2) return std::nullopt;
    std::vector<PointNumber> points;
    bool any = false;
    for (const Outlet& outlet : result.outlets) {
        const PointPeak* peak = raster_peak(result, outlet.number);
        any = any || peak != nullptr;
        if (peak != nullptr && peak->partial > peak->whole) points.push_back(outlet.number);
    }
    if (!any) return std::nullopt;
    if (points.empty()) return "At no point does a part of the area make a greater peak than the whole.";
    const auto gain = [&](PointNumber number) { return raster_peak(result, number)->partial / raster_peak(result, number)->whole; };
    std::stable_sort(points.begin(), points.end(), [&](PointNumber a, PointNumber b) { return gain(a) > gain(b); });
    return "A part of the area makes the peak at " + of_points(points.size(), result.outlets.size()) + ", up to " + significant(gain(points.front()), 3) +
           " times that of the whole: " + names_text(result, points) + ".";
}

/// Where the subarea that arrives last is not the one with the greatest share of the peak; the largest catchments first.
std::optional<std::string> difference_sentence(const StudyResult& result) {
    if (!result.peaks.are_there()) return std::nullopt;
    std::vector<PointNumber> points;
    for (const std::size_t i : by_area(result)) {
        const auto number = static_cast<PointNumber>(i + 1);
        const PointPeak* peak = raster_peak(result, number);
        const NetworkStorm& storm = result.network.points[i].raster_storm();
        if (peak != nullptr && !peak->makers.empty() && peak->makers.front().subarea != storm.last) points.push_back(number);
    }
    if (points.empty()) return std::nullopt;
    const PointNumber first = points.front();
    const SubareaShare& maker = raster_peak(result, first)->makers.front();
    return "The subarea that arrives last is not the one with the greatest share of the peak at " + of_points(points.size(), result.outlets.size()) + ": " +
           names_text(result, points) + ". At '" + point_name(result, first) + "' the water of '" + point_name(result, result.network.points[first - 1].raster_storm().last) +
           "' arrives last, and the subarea of '" + point_name(result, maker.subarea) + "' makes " + significant(100.0 * maker.of_window, 3) + " % of the peak.";
}

/// Where the second to arrive comes closest behind the last.
std::optional<std::string> lead_sentence(const StudyResult& result) {
    constexpr std::size_t most_told = 3;
    std::vector<PointNumber> points;
    for (const Outlet& outlet : result.outlets) {
        if (result.network.points[outlet.number - 1].raster_storm().lead) points.push_back(outlet.number);
    }
    if (points.empty()) return std::nullopt;
    const auto lead = [&](PointNumber number) { return *result.network.points[number - 1].raster_storm().lead; };
    std::stable_sort(points.begin(), points.end(), [&](PointNumber a, PointNumber b) { return lead(a) < lead(b); });
    points.resize(std::min(points.size(), most_told));
    std::string text;
    for (const PointNumber number : points) {
        text += (text.empty() ? "" : ", ") + time_text(from_fixed(lead(number))) + " at '" + point_name(result, number) + "' ('" +
                point_name(result, result.network.points[number - 1].raster_storm().last) + "' last)";
    }
    return "Least lead of the subarea that arrives last over the next one: " + text + "; changes of that size change which it is.";
}

std::string concern_sentence(const StudyResult& result) {
    if (result.notices.empty()) return "Nothing was found that needs a person's eye more than usual.";
    return "Check this first. " + result.notices.front().text;
}

std::string padded(std::string text, std::size_t width, bool right) {
    // Names may hold bytes beyond ASCII: count code points, not bytes.
    const auto letters = static_cast<std::size_t>(std::count_if(text.begin(), text.end(), [](char c) {
        return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U;
    }));
    const std::string blanks(letters < width ? width - letters : 0, ' ');
    return right ? blanks + text : text + blanks;
}

using OverviewRow = std::array<std::string, 5>;

/// Figures stay below one another where some points are marked: the others get a blank.
OverviewRow overview_row(const StudyResult& result, const Outlet& outlet, bool any_marked) {
    const ReportScale scale(result.study.report_units);
    const std::string own_mark = stated_mark(result, outlet);
    const std::string mark = any_marked && own_mark.empty() ? " " : own_mark;
    return {outlet.point.name, significant(scale.area(from_fixed_area(area_shown(result, outlet))), 4) + mark,
            fixed_decimals(time_shown_s(result, outlet) / 60.0, 1) + mark, fixed_decimals(outlet.arrival_s[0] / 60.0, 1),
            significant(scale.length(from_fixed(outlet.governing.summary.length)), 4)};
}

}  // namespace

std::vector<std::size_t> by_area(const StudyResult& result) {
    std::vector<std::size_t> order(result.outlets.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::stable_sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) {
        return result.outlets[a].area > result.outlets[b].area;
    });
    return order;
}

std::vector<std::string> headlines(const StudyResult& result) {
    const Outlet& main = result.outlets[by_area(result).front()];
    std::vector<std::string> sentences{governing_sentence(result, main), makeup_sentence(result, main)};
    if (const auto peak = peak_sentence(result, main)) sentences.push_back(*peak);
    if (result.uncertainty != nullptr) sentences.push_back(uncertainty_sentence(result, main));
    for (const auto& sentence : {missing_sentence(result), partial_sentence(result), difference_sentence(result), lead_sentence(result)}) {
        if (sentence) sentences.push_back(*sentence);
    }
    sentences.push_back(concern_sentence(result));
    return sentences;
}

std::string outlets_overview(const StudyResult& result, std::size_t most) {
    const ReportScale scale(result.study.report_units);
    std::vector<OverviewRow> rows{{"point", "area " + scale.area_unit(), "time min", "half arrived min", "path " + scale.length_unit()}};
    const std::vector<std::size_t> order = by_area(result);
    const std::string mark_words = stated_mark_words(result);
    for (std::size_t i = 0; i < std::min(most, order.size()); ++i) {
        rows.push_back(overview_row(result, result.outlets[order[i]], !mark_words.empty()));
    }
    std::array<std::size_t, 5> widths{};
    for (const OverviewRow& row : rows) {
        for (std::size_t i = 0; i < row.size(); ++i) widths[i] = std::max(widths[i], row[i].size());
    }
    std::string text;
    for (const OverviewRow& row : rows) {
        for (std::size_t i = 0; i < row.size(); ++i) text += (i == 0 ? "" : "  ") + padded(row[i], widths[i], i > 0);
        text += '\n';
    }
    if (order.size() > most) text += "… and " + std::to_string(order.size() - most) + " more in tables/outlets.csv\n";
    return mark_words.empty() ? text : text + mark_words + "\n";
}

}  // namespace rillclock
