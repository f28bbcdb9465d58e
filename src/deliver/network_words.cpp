#include "network_words.hpp"

#include <algorithm>

#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

constexpr std::size_t named_at_each_end = 4;

}  // namespace

std::string way_in_words(const StudyResult& result, const std::vector<PointNumber>& way) {
    std::string text;
    for (std::size_t i = 0; i < way.size(); ++i) {
        const bool is_long = way.size() > 2 * named_at_each_end;
        if (is_long && i == named_at_each_end) {
            const std::size_t between = way.size() - 2 * named_at_each_end;
            text += " > … " + std::to_string(between) + " more …";
            i += between;
        }
        text += (text.empty() ? "" : " > ") + point_name(result, way[i]);
    }
    return text;
}

std::string stated_in_words(const StudyResult& result, const std::vector<PointNumber>& points) {
    std::string text;
    for (std::size_t i = 0; i < points.size(); ++i) {
        if (i == 2 * named_at_each_end) return text + ", and " + std::to_string(points.size() - i) + " more";
        text += (text.empty() ? "" : ", ") + point_name(result, points[i]) + " (" + marks_of(result.network.edits[points[i] - 1]) + ")";
    }
    return text;
}

std::string makers_in_words(const StudyResult& result, const PointPeak& peak) {
    std::string text;
    for (const SubareaShare& share : peak.makers) {
        text += (text.empty() ? "" : ", ") + point_name(result, share.subarea) + " " + significant(100.0 * share.of_window, 3) + " %";
    }
    const std::size_t more = peak.subareas_in_window - peak.makers.size();
    return more == 0 ? text : text + ", and " + std::to_string(more) + " more";
}

const PointPeak* raster_peak(const StudyResult& result, PointNumber number) {
    if (!result.peaks.are_there()) return nullptr;
    const std::vector<PointPeak>& periods = result.peaks.points[number - 1];
    const std::size_t raster = result.rain.raster;
    return raster < periods.size() && periods[raster].is_there() ? &periods[raster] : nullptr;
}

double time_shown_s(const StudyResult& result, const Outlet& outlet) {
    return time_used_s(result.network, outlet, result.network.points[outlet.number - 1].raster);
}

FixedArea area_shown(const StudyResult& result, const Outlet& outlet) {
    return result.network.is_edited ? result.network.points[outlet.number - 1].area : outlet.area;
}

std::string stated_mark(const StudyResult& result, const Outlet& outlet) { return is_stated_felt(result.network, outlet) ? "*" : ""; }

std::string stated_mark_words(const StudyResult& result) {
    const auto is_marked = [&](const Outlet& outlet) { return is_stated_felt(result.network, outlet); };
    if (std::none_of(result.outlets.begin(), result.outlets.end(), is_marked)) return "";
    return "* Pipes or stated figures act on this point: area and time are those of the network, with which its peaks are made. Half arrived and "
           "path go by the ground alone, whose area and time are area and time_of_concentration_min in tables/outlets.csv.";
}

}  // namespace rillclock
